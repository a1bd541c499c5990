/* cut.c - a skin cut along the border of a region */
#include "edges.h"
#include "skin.h"
#include "split.h"
#include <stdlib.h>
#include <string.h>

/* A vertex this near to where the border crosses one of its edges, as a share of the edge, moves there: no slivers. */
static const double snap_share = 0.3;

/* A border may miss a vertex that must not move by this much. */
static const double unseen_step_m = 0.5e-3;

/* No cut makes a facet lower than this share of its longest edge, unless it was low before. */
static const double least_height_share = 0.1;

typedef struct {
    facets *mesh;
    field body, region;
    uint32_t from, to;
    size_t room;
    double *value_m;        /* region at each vertex of from; exactly 0: on the border; NAN: not of from */
} cut;

static void take_values(cut *c)
{
    const facets *mesh = c->mesh;
    c->value_m = grow_array(c->value_m, &c->room, mesh->n_vertices, sizeof *c->value_m);
    for (size_t i = 0; i < mesh->n_vertices; i++) c->value_m[i] = NAN;
    for (size_t i = 0; i < mesh->n_facets; i++) {
        const facet *f = &mesh->facet[i];
        if (f->part != c->from) continue;
        for (int k = 0; k < 3; k++) c->value_m[f->v[k]] = field_at(c->region, mesh->vertex_m[f->v[k]]);
    }
}

static double length_of(const facets *mesh, const edge *e)
{
    return vec3_norm(vec3_sub(mesh->vertex_m[e->a], mesh->vertex_m[e->b]));
}

/* Near the border no edge stays longer than detail_m, so that a small region is seen and its corners are kept. */
static void refine_near_border(cut *c, double detail_m)
{
    for (int pass = 0; pass < 8; pass++) {
        take_values(c);
        edges all = edges_of(c->mesh);
        size_t n_split = 0;
        for (size_t i = 0; i < all.n; i++) {
            edge *e = &all.edge[i];
            const double a = fabs(c->value_m[e->a]), b = fabs(c->value_m[e->b]), length_m = length_of(c->mesh, e);
            e->made = NO_FACET;
            if (isnan(a) || isnan(b) || length_m <= detail_m || fmin(a, b) > length_m) continue;
            const vec3 m = vec3_scale(vec3_add(c->mesh->vertex_m[e->a], c->mesh->vertex_m[e->b]), 0.5);
            e->made = facets_vertex(c->mesh, field_project(c->body, m));
            n_split++;
        }
        split_edges(c->mesh, &all);
        edges_free(&all);
        if (n_split == 0) break;
    }
    take_values(c);
}

static int crosses(const cut *c, const edge *e) { return c->value_m[e->a] * c->value_m[e->b] < 0.0; }

/* The facets about each vertex: of_vertex[first[v]] .. of_vertex[first[v + 1] - 1]. */
typedef struct { uint32_t *first, *of_vertex; } rings;

static rings rings_of(const facets *mesh)
{
    rings r = {NULL, NULL};
    size_t room_first = 0, room_all = 0;
    r.first = grow_array(NULL, &room_first, mesh->n_vertices + 2, sizeof *r.first);
    r.of_vertex = grow_array(NULL, &room_all, 3 * mesh->n_facets, sizeof *r.of_vertex);
    memset(r.first, 0, (mesh->n_vertices + 2) * sizeof *r.first);
    for (size_t i = 0; i < 3 * mesh->n_facets; i++) r.first[mesh->facet[i / 3].v[i % 3] + 2]++;
    for (size_t v = 2; v < mesh->n_vertices + 2; v++) r.first[v] += r.first[v - 1];
    for (size_t i = 0; i < 3 * mesh->n_facets; i++) r.of_vertex[r.first[mesh->facet[i / 3].v[i % 3] + 1]++] = (uint32_t)(i / 3);
    return r;
}

/* A facet's area normal, and how its height compares with its longest edge. */
static vec3 facet_normal(const facets *mesh, uint32_t f, double *height_share)
{
    const vec3 a = mesh->vertex_m[mesh->facet[f].v[0]], b = mesh->vertex_m[mesh->facet[f].v[1]], c = mesh->vertex_m[mesh->facet[f].v[2]];
    const vec3 ab = vec3_sub(b, a), bc = vec3_sub(c, b), ca = vec3_sub(a, c), n = vec3_cross(ab, bc);
    const double longest = fmax(vec3_dot(ab, ab), fmax(vec3_dot(bc, bc), vec3_dot(ca, ca)));
    *height_share = vec3_norm(n) / longest;
    return n;
}

/* Moves the vertex onto the border unless that would fold or flatten a facet; has it moved? */
static int move_to_border(cut *c, const rings *r, uint32_t vertex)
{
    facets *mesh = c->mesh;
    const vec3 was = mesh->vertex_m[vertex], there = field_project_on_border(c->body, c->region, was);
    for (uint32_t i = r->first[vertex]; i < r->first[vertex + 1]; i++) {
        double before, after;
        const vec3 n = facet_normal(mesh, r->of_vertex[i], &before);
        mesh->vertex_m[vertex] = there;
        const vec3 m = facet_normal(mesh, r->of_vertex[i], &after);
        mesh->vertex_m[vertex] = was;
        if (vec3_dot(n, m) < 0.7 * vec3_norm(n) * vec3_norm(m) || after < fmin(before, least_height_share)) return 0;
    }
    mesh->vertex_m[vertex] = there;
    return 1;
}

static void snap_vertices(cut *c)
{
    facets *mesh = c->mesh;
    edges all = edges_of(mesh);
    rings r = rings_of(mesh);
    size_t room = 0;
    enum { FIXED = 1, NEAR_BORDER = 2 };
    char *mark = grow_array(NULL, &room, mesh->n_vertices, 1);
    memset(mark, 0, mesh->n_vertices);
    for (size_t i = 0; i < mesh->n_facets; i++)
        if (mesh->facet[i].part != c->from)     /* a border that was cut before stays, and draws the new one to it */
            for (int k = 0; k < 3; k++) mark[mesh->facet[i].v[k]] |= FIXED;
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        if (!crosses(c, e)) continue;
        const double a = fabs(c->value_m[e->a]), b = fabs(c->value_m[e->b]), share = a / (a + b);
        if (share < snap_share) mark[e->a] |= NEAR_BORDER;
        if (share > 1.0 - snap_share) mark[e->b] |= NEAR_BORDER;
    }
    for (uint32_t i = 0; i < mesh->n_vertices; i++) {
        if (!(mark[i] & NEAR_BORDER)) continue;
        const int moved = !(mark[i] & FIXED) && move_to_border(c, &r, i);
        if (moved || fabs(c->value_m[i]) < unseen_step_m) c->value_m[i] = 0.0;
    }
    free(mark);
    free(r.first);
    free(r.of_vertex);
    edges_free(&all);
}

static void split_at_border(cut *c)
{
    facets *mesh = c->mesh;
    edges all = edges_of(mesh);
    for (size_t i = 0; i < all.n; i++) {
        edge *e = &all.edge[i];
        e->made = NO_FACET;
        if (!crosses(c, e)) continue;
        const double a = fabs(c->value_m[e->a]), b = fabs(c->value_m[e->b]), share = a / (a + b);
        const vec3 pa = mesh->vertex_m[e->a], pb = mesh->vertex_m[e->b];
        const vec3 start = vec3_add(vec3_scale(pa, 1.0 - share), vec3_scale(pb, share));
        e->made = facets_vertex(mesh, field_project_on_border(c->body, c->region, start));
    }
    split_edges(mesh, &all);
    edges_free(&all);
}

static void give_to_part(cut *c)
{
    facets *mesh = c->mesh;
    for (size_t i = 0; i < mesh->n_facets; i++) {
        facet *f = &mesh->facet[i];
        if (f->part != c->from) continue;
        const vec3 sum = vec3_add(vec3_add(mesh->vertex_m[f->v[0]], mesh->vertex_m[f->v[1]]), mesh->vertex_m[f->v[2]]);
        const vec3 centre = field_project(c->body, vec3_scale(sum, 1.0 / 3.0));
        if (field_at(c->region, centre) < 0.0) f->part = c->to;
    }
}

/* Can vertex b of a facet's edge from a be drawn to p, and the other half stay sound too? */
static int stays_sound(const facets *mesh, uint32_t f, const edge *e, vec3 p)
{
    double share;
    const vec3 n = facet_normal(mesh, f, &share);
    for (int half = 0; half < 2; half++) {
        facets piece = {.vertex_m = (vec3[3]){{0}}, .facet = &(facet){{0, 1, 2}, 0}};
        for (int c = 0; c < 3; c++) {
            const uint32_t v = mesh->facet[f].v[c];
            piece.vertex_m[c] = v == (half ? e->a : e->b) ? p : mesh->vertex_m[v];
        }
        const vec3 m = facet_normal(&piece, 0, &share);
        if (share < 0.5 * least_height_share || vec3_dot(n, m) < 0.7 * vec3_norm(n) * vec3_norm(m)) return 0;
    }
    return 1;
}

/* The border itself is a curve: its chords keep 0.3 of the sagitta, as walls along it are curved by them alone. */
static void refine_border(cut *c, skin_limit limit)
{
    facets *mesh = c->mesh;
    for (int pass = 0; pass < 6; pass++) {
        edges all = edges_of(mesh);
        size_t n_split = 0;
        for (size_t i = 0; i < all.n; i++) {
            edge *e = &all.edge[i];
            e->made = NO_FACET;
            if (e->facet[1] == NO_FACET) continue;
            const uint32_t p = mesh->facet[e->facet[0]].part, q = mesh->facet[e->facet[1]].part;
            if (!((p == c->from && q == c->to) || (p == c->to && q == c->from))) continue;
            const vec3 m = vec3_scale(vec3_add(mesh->vertex_m[e->a], mesh->vertex_m[e->b]), 0.5);
            const vec3 on = field_project_on_border(c->body, c->region, m);
            const double off_m = vec3_norm(vec3_sub(on, m));
            const double length_m = length_of(mesh, e);
            if (off_m <= 0.3 * limit.sagitta_m || off_m > 0.3 * length_m || length_m < skin_least_edge_m) continue;
            if (!stays_sound(mesh, e->facet[0], e, on) || !stays_sound(mesh, e->facet[1], e, on)) continue;
            e->made = facets_vertex(mesh, on);
            n_split++;
        }
        split_edges(mesh, &all);
        edges_free(&all);
        if (n_split == 0) break;
    }
}

void skin_cut(facets *mesh, field body, field region, double detail_m, skin_limit limit, uint32_t from, uint32_t to)
{
    cut c = {.mesh = mesh, .body = body, .region = region, .from = from, .to = to};
    refine_near_border(&c, detail_m);
    snap_vertices(&c);
    split_at_border(&c);
    give_to_part(&c);
    for (int round = 0; round < 2; round++) {       /* turned edges make room for vertices that the border had to do without */
        refine_border(&c, limit);
        skin_refine(mesh, body, limit);
        skin_turn_edges(mesh, body, limit);
    }
    free(c.value_m);
}
