/* panels.c - a skin taken apart into panels: lowered ones with walls, and the gaps between */
#include "edges.h"
#include "skin.h"
#include <stdlib.h>
#include <string.h>

/* What one panel has of a vertex. Panels that meet in a vertex get a corner each. */
typedef struct {
    uint32_t vertex, next;      /* the vertex of the lowered, shifted panel; the vertex's next corner */
    int panel;
    vec3 inward;                /* sum of the unit directions into the panel, across its border edges at this vertex */
    int n_gap_edges;
} corner;

typedef struct {
    facets *mesh;
    field body;
    const skin_panel *panel;    /* by part */
    size_t n_corners, room_corners;
    corner *corner;
    uint32_t *first;            /* [n_vertices at the start]: a vertex's first corner, or NO_FACET */
    size_t n_vertices;
} taking_apart;

static corner *corner_of(taking_apart *job, uint32_t vertex, int panel)
{
    for (uint32_t c = job->first[vertex]; c != NO_FACET; c = job->corner[c].next)
        if (job->corner[c].panel == panel) return &job->corner[c];
    job->corner = grow_array(job->corner, &job->room_corners, job->n_corners + 1, sizeof *job->corner);
    job->corner[job->n_corners] = (corner){.vertex = vertex, .next = job->first[vertex], .panel = panel};
    job->first[vertex] = (uint32_t)job->n_corners;
    return &job->corner[job->n_corners++];
}

static const skin_panel *panel_of(const taking_apart *job, uint32_t facet_index)
{
    return &job->panel[job->mesh->facet[facet_index].part];
}

static int parts_panels(const taking_apart *job, const edge *e)
{
    return e->facet[1] != NO_FACET && panel_of(job, e->facet[0])->panel != panel_of(job, e->facet[1])->panel;
}

static double gap_m(const taking_apart *job, const edge *e)
{
    const skin_panel *p = panel_of(job, e->facet[0]), *q = panel_of(job, e->facet[1]);
    return p->depth_m == q->depth_m ? fmax(p->gap_m, q->gap_m) : 0.0;
}

/* In the surface, across the edge, into the facet. */
static vec3 into_facet(const taking_apart *job, const edge *e, uint32_t facet_index)
{
    const vec3 *v = job->mesh->vertex_m;
    const vec3 a = v[e->a], along = vec3_sub(v[e->b], a);
    vec3 third = {0};
    for (int c = 0; c < 3; c++) {
        const uint32_t k = job->mesh->facet[facet_index].v[c];
        if (k != e->a && k != e->b) third = vec3_sub(v[k], a);
    }
    const vec3 in = vec3_sub(third, vec3_scale(along, vec3_dot(third, along) / vec3_dot(along, along)));
    return vec3_scale(in, 1.0 / vec3_norm(in));
}

static void gather_inward(taking_apart *job, const edges *all)
{
    for (size_t i = 0; i < all->n; i++) {
        const edge *e = &all->edge[i];
        if (!parts_panels(job, e) || gap_m(job, e) == 0.0) continue;
        for (int side = 0; side < 2; side++) {
            const vec3 in = vec3_scale(into_facet(job, e, e->facet[side]), 0.5 * gap_m(job, e));
            const uint32_t end[2] = {e->a, e->b};
            for (int k = 0; k < 2; k++) {
                corner *c = corner_of(job, end[k], panel_of(job, e->facet[side])->panel);
                c->inward = vec3_add(c->inward, in);
                c->n_gap_edges++;
            }
        }
    }
}

/* The corner's place: moved into its panel by half of the gap (mitred where two edges meet), then down. */
static vec3 corner_place(const taking_apart *job, const corner *c, vec3 p, double depth_m)
{
    const double y = p.y;
    if (c->n_gap_edges > 0) {
        const vec3 mean = vec3_scale(c->inward, 1.0 / c->n_gap_edges);
        p = field_project(job->body, vec3_add(p, mean));
    }
    p = vec3_sub(p, vec3_scale(field_normal(job->body, p), depth_m));
    if (y == 0.0) p.y = 0.0;
    return p;
}

/* Would the facet, with its panel's own vertices, be turned over or nearly so? */
static int folds(taking_apart *job, const facet *f, const vec3 was[])
{
    vec3 now[3];
    for (int k = 0; k < 3; k++) now[k] = job->mesh->vertex_m[corner_of(job, f->v[k], job->panel[f->part].panel)->vertex];
    const vec3 n = vec3_cross(vec3_sub(was[f->v[1]], was[f->v[0]]), vec3_sub(was[f->v[2]], was[f->v[0]]));
    const vec3 m = vec3_cross(vec3_sub(now[1], now[0]), vec3_sub(now[2], now[0]));
    return vec3_dot(n, m) < 0.05 * vec3_dot(n, n);
}

/* Every facet takes its panel's own vertices. Where a facet is narrower than the gap, its corners move less and the gap is narrower. */
static void move_facets(taking_apart *job, const vec3 was[], double depth_of_panel[])
{
    enum { MOST_PASSES = 8 };
    facets *mesh = job->mesh;
    for (size_t i = 0; i < mesh->n_facets; i++) {
        const facet *f = &mesh->facet[i];
        for (int k = 0; k < 3; k++) (void)corner_of(job, f->v[k], job->panel[f->part].panel);
    }
    for (uint32_t v = 0; v < job->n_vertices; v++)
        for (uint32_t c = job->first[v]; c != NO_FACET; c = job->corner[c].next)
            job->corner[c].vertex = facets_vertex(mesh, corner_place(job, &job->corner[c], was[v], depth_of_panel[job->corner[c].panel]));
    for (int pass = 0; pass < MOST_PASSES; pass++) {
        size_t n_folded = 0;
        for (size_t i = 0; i < mesh->n_facets; i++) {
            const facet *f = &mesh->facet[i];
            const int panel = job->panel[f->part].panel;
            if (!folds(job, f, was)) continue;
            for (int k = 0; k < 3; k++) {
                corner *c = corner_of(job, f->v[k], panel);
                c->inward = vec3_scale(c->inward, 0.7);
                mesh->vertex_m[c->vertex] = corner_place(job, c, was[f->v[k]], depth_of_panel[panel]);
            }
            n_folded++;
        }
        if (n_folded == 0) break;
    }
    for (size_t i = 0; i < mesh->n_facets; i++) {
        facet *f = &mesh->facet[i];
        for (int k = 0; k < 3; k++) f->v[k] = corner_of(job, f->v[k], job->panel[f->part].panel)->vertex;
    }
}

/* Facet of the edge in which it runs from a to b: the strip between the panels keeps the skin's outside outside. */
static int first_runs_forward(const facet *f, const edge *e)
{
    for (int c = 0; c < 3; c++)
        if (f->v[c] == e->a) return f->v[(c + 1) % 3] == e->b;
    return 0;
}

/* The bottom of a groove between two panels' edges. */
static uint32_t groove_root(taking_apart *job, uint32_t left, uint32_t right, double depth_m)
{
    const vec3 p = vec3_scale(vec3_add(job->mesh->vertex_m[left], job->mesh->vertex_m[right]), 0.5);
    vec3 root = vec3_sub(p, vec3_scale(field_normal(job->body, p), depth_m));
    if (p.y == 0.0) root.y = 0.0;
    return facets_vertex(job->mesh, root);
}

typedef struct { uint32_t left[2], right[2], part; double groove_m; } seam;     /* left, right: the two panels' ends a and b */

static void close_seam(taking_apart *job, const seam *s)
{
    facets *mesh = job->mesh;
    if (s->groove_m == 0.0) {
        facets_quad(mesh, s->left[1], s->left[0], s->right[0], s->right[1], s->part);
        return;
    }
    uint32_t root[2];
    for (int k = 0; k < 2; k++) root[k] = groove_root(job, s->left[k], s->right[k], s->groove_m);
    facets_quad(mesh, s->left[1], s->left[0], root[0], root[1], s->part);
    facets_quad(mesh, root[1], root[0], s->right[0], s->right[1], s->part);
}

void skin_part_panels(facets *mesh, field body, const skin_panel panel[], double groove_depth_m)
{
    taking_apart job = {.mesh = mesh, .body = body, .panel = panel, .n_vertices = mesh->n_vertices};
    size_t room_first = 0, room_was = 0, room_old = 0;
    double depth_of_panel[MAX_PARTS] = {0};
    for (size_t p = 0; p < mesh->n_parts; p++) depth_of_panel[panel[p].panel] = panel[p].depth_m;
    job.first = grow_array(NULL, &room_first, mesh->n_vertices, sizeof *job.first);
    memset(job.first, 0xff, mesh->n_vertices * sizeof *job.first);
    vec3 *was = grow_array(NULL, &room_was, mesh->n_vertices, sizeof *was);
    memcpy(was, mesh->vertex_m, mesh->n_vertices * sizeof *was);
    facet *old = grow_array(NULL, &room_old, mesh->n_facets, sizeof *old);
    memcpy(old, mesh->facet, mesh->n_facets * sizeof *old);
    edges all = edges_of(mesh);

    gather_inward(&job, &all);
    move_facets(&job, was, depth_of_panel);
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        if (e->facet[1] == NO_FACET) continue;
        const int forward = first_runs_forward(&old[e->facet[0]], e);
        const uint32_t left = old[e->facet[!forward]].part, right = old[e->facet[forward]].part;
        if (panel[left].panel == panel[right].panel) continue;
        const double gap = gap_m(&job, e);
        seam s = {.groove_m = gap > 0.0 ? groove_depth_m : 0.0,
                  .part = gap > 0.0 ? (left < right ? left : right) : (panel[left].depth_m > panel[right].depth_m ? left : right)};
        const uint32_t end[2] = {e->a, e->b};
        for (int k = 0; k < 2; k++) {
            s.left[k] = corner_of(&job, end[k], panel[left].panel)->vertex;
            s.right[k] = corner_of(&job, end[k], panel[right].panel)->vertex;
        }
        close_seam(&job, &s);
    }
    edges_free(&all);
    free(old);
    free(was);
    free(job.first);
    free(job.corner);
    facets_weld(mesh);
}
