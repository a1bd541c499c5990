/* panels.c - a skin taken apart into panels, each lowered by its depth, with walls between */
#include "edges.h"
#include "skin.h"
#include <stdlib.h>
#include <string.h>

/* What one panel has of a vertex. Panels that meet in a vertex get a corner each. */
typedef struct {
    uint32_t vertex, next;      /* the vertex of the lowered panel; the vertex's next corner */
    int panel;
} corner;

typedef struct {
    facets *mesh;
    field body;
    const skin_panel *panel;    /* by part */
    size_t n_corners, room_corners;
    corner *corner;
    uint32_t *first;            /* [n_vertices at the start]: a vertex's first corner, or NO_FACET */
} taking_apart;

static corner *corner_of(taking_apart *job, uint32_t vertex, int panel)
{
    for (uint32_t c = job->first[vertex]; c != NO_FACET; c = job->corner[c].next)
        if (job->corner[c].panel == panel) return &job->corner[c];
    job->corner = grow_array(job->corner, &job->room_corners, job->n_corners + 1, sizeof *job->corner);
    job->corner[job->n_corners] = (corner){.next = job->first[vertex], .panel = panel};
    job->first[vertex] = (uint32_t)job->n_corners;
    return &job->corner[job->n_corners++];
}

/* The panel's own vertex in place of the skin's. */
static uint32_t lowered(taking_apart *job, uint32_t vertex, const skin_panel *panel)
{
    return corner_of(job, vertex, panel->panel)->vertex;
}

static void lower_vertices(taking_apart *job, const double depth_of_panel[])
{
    facets *mesh = job->mesh;
    const uint32_t n_vertices = (uint32_t)mesh->n_vertices;
    for (size_t i = 0; i < mesh->n_facets; i++)
        for (int k = 0; k < 3; k++) (void)corner_of(job, mesh->facet[i].v[k], job->panel[mesh->facet[i].part].panel);
    for (uint32_t v = 0; v < n_vertices; v++) {
        for (uint32_t c = job->first[v]; c != NO_FACET; c = job->corner[c].next) {
            const vec3 p = mesh->vertex_m[v];
            vec3 down = vec3_sub(p, vec3_scale(field_normal(job->body, p), depth_of_panel[job->corner[c].panel]));
            if (p.y == 0.0) down.y = 0.0;
            job->corner[c].vertex = facets_vertex(mesh, down);
        }
    }
}

/* Does the facet run along the edge from a to b? */
static int runs_forward(const facet *f, const edge *e)
{
    for (int c = 0; c < 3; c++)
        if (f->v[c] == e->a) return f->v[(c + 1) % 3] == e->b;
    return 0;
}

void skin_part_panels(facets *mesh, field body, const skin_panel panel[])
{
    taking_apart job = {.mesh = mesh, .body = body, .panel = panel};
    size_t room_first = 0;
    double depth_of_panel[MAX_PARTS] = {0};
    for (size_t p = 0; p < mesh->n_parts; p++) depth_of_panel[panel[p].panel] = panel[p].depth_m;
    job.first = grow_array(NULL, &room_first, mesh->n_vertices, sizeof *job.first);
    memset(job.first, 0xff, mesh->n_vertices * sizeof *job.first);
    edges all = edges_of(mesh);
    lower_vertices(&job, depth_of_panel);
    const size_t n_facets = mesh->n_facets;
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        if (e->facet[1] == NO_FACET) continue;
        /* left of the edge from a to b, and right of it: the wall faces outward as both do */
        const int forward = runs_forward(&mesh->facet[e->facet[0]], e);
        const uint32_t left = mesh->facet[e->facet[!forward]].part, right = mesh->facet[e->facet[forward]].part;
        if (panel[left].panel == panel[right].panel) continue;
        const uint32_t la = lowered(&job, e->a, &panel[left]), lb = lowered(&job, e->b, &panel[left]);
        const uint32_t ra = lowered(&job, e->a, &panel[right]), rb = lowered(&job, e->b, &panel[right]);
        facets_quad(mesh, lb, la, ra, rb, panel[left].depth_m > panel[right].depth_m ? left : right);
    }
    for (size_t i = 0; i < n_facets; i++) {
        facet *f = &mesh->facet[i];
        for (int k = 0; k < 3; k++) f->v[k] = lowered(&job, f->v[k], &panel[f->part]);
    }
    edges_free(&all);
    free(job.first);
    free(job.corner);
    facets_weld(mesh);
}
