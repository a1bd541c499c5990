/* skin.c - facets on the surface of a field: laid out and refined until they are smooth */
#include "skin.h"
#include "edges.h"
#include "judge.h"
#include "split.h"
#include <stdlib.h>
#include <string.h>

static vec3 middle(vec3 a, vec3 b) { return vec3_scale(vec3_add(a, b), 0.5); }

static uint32_t lattice_vertex(facets *mesh, field body, skin_cage_fn *cage, const int n[3], const int at[3])
{
    vec3 p = cage((double)at[0] / n[0], (double)at[1] / n[1], (double)at[2] / n[2]);
    if (fabs(p.y) < 1e-12) p.y = 0.0;
    return facets_vertex(mesh, field_project(body, p));
}

/* One face of the box: axis is fixed at level; the two others run so that facets face outward. */
static void lattice_face(facets *mesh, field body, skin_cage_fn *cage, const int n[3], int axis, int level, uint32_t part)
{
    int row = (axis + 1) % 3, column = (axis + 2) % 3;
    if (level == 0) {
        const int swap = row;
        row = column;
        column = swap;
    }
    const uint32_t first = (uint32_t)mesh->n_vertices;
    for (int i = 0; i <= n[row]; i++) {
        for (int j = 0; j <= n[column]; j++) {
            int at[3];
            at[axis] = level;
            at[row] = i;
            at[column] = j;
            lattice_vertex(mesh, body, cage, n, at);
        }
    }
    facets_grid(mesh, first, (size_t)n[row] + 1, (size_t)n[column] + 1, part);
}

/* Draws every vertex half-way to the mean of its neighbours and back onto the surface: where the cage had folds they open. */
static void relax(facets *mesh, field body)
{
    edges all = edges_of(mesh);
    size_t room_sum = 0, room_n = 0;
    vec3 *sum = grow_array(NULL, &room_sum, mesh->n_vertices, sizeof *sum);
    int *n = grow_array(NULL, &room_n, mesh->n_vertices, sizeof *n);
    memset(sum, 0, mesh->n_vertices * sizeof *sum);
    memset(n, 0, mesh->n_vertices * sizeof *n);
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        sum[e->a] = vec3_add(sum[e->a], mesh->vertex_m[e->b]);
        sum[e->b] = vec3_add(sum[e->b], mesh->vertex_m[e->a]);
        n[e->a]++;
        n[e->b]++;
    }
    for (size_t i = 0; i < mesh->n_vertices; i++) {
        const vec3 p = mesh->vertex_m[i];
        vec3 to = middle(p, vec3_scale(sum[i], 1.0 / n[i]));
        if (p.y == 0.0) to.y = 0.0;
        mesh->vertex_m[i] = field_project(body, to);
    }
    free(sum);
    free(n);
    edges_free(&all);
}

void skin_box(facets *mesh, field body, skin_cage_fn *cage, const int n_cells[3], int is_half, uint32_t part)
{
    for (int axis = 0; axis < 3; axis++) {
        if (!(axis == 1 && is_half)) lattice_face(mesh, body, cage, n_cells, axis, 0, part);
        lattice_face(mesh, body, cage, n_cells, axis, n_cells[axis], part);
    }
    facets_weld(mesh);
    for (int pass = 0; pass < 2; pass++) relax(mesh, body);
}

static vec3 unit_ball(double u, double w, double t)
{
    /* The tangents make the cells of the cube's faces more alike on the ball. */
    const double quarter = atan(1.0);
    const vec3 p = {tan(quarter * (2.0 * u - 1.0)), tan(quarter * (2.0 * w - 1.0)), tan(quarter * (2.0 * t - 1.0))};
    return vec3_scale(p, 1.0 / vec3_norm(p));
}

typedef struct { field body; vec3 centre, radius_m; } egg;

/* The surface along the ray from centre through the ball's point: Newton on the ray, as closest points would bunch at the ends. */
static vec3 egg_point(const egg *e, vec3 on_ball)
{
    const vec3 way = {on_ball.x * e->radius_m.x, on_ball.y * e->radius_m.y, on_ball.z * e->radius_m.z};
    double inside = 0.0, outside = 3.0;
    for (int i = 0; i < 60; i++) {
        const double t = 0.5 * (inside + outside);
        if (field_at(e->body, vec3_add(e->centre, vec3_scale(way, t))) < 0.0) inside = t;
        else outside = t;
    }
    return vec3_add(e->centre, vec3_scale(way, outside));
}

static double ball_field(vec3 p, const void *shape)
{
    (void)shape;
    return vec3_norm(p) - 1.0;
}

void skin_egg(facets *mesh, field body, vec3 centre, vec3 radius_m, int n_cells, skin_limit limit, uint32_t part)
{
    facets shell = {0};
    facets_part(&shell, mesh->part_name[part]);
    skin_box(&shell, (field){ball_field, NULL}, unit_ball, (int[3]){n_cells, n_cells, n_cells}, 0, 0);
    const egg e = {body, centre, radius_m};
    for (size_t i = 0; i < shell.n_vertices; i++) shell.vertex_m[i] = egg_point(&e, shell.vertex_m[i]);
    skin_refine(&shell, body, limit);
    skin_finish(&shell, body, limit);
    facets_add(mesh, &shell, (vec3){0});
    facets_free(&shell);
}

/* How far the chord runs from the surface, to first order: at its middle and, as a fillet may lie beside that, at the quarters. */
static double off_surface_m(field body, vec3 a, vec3 b)
{
    double worst_m = 0.0;
    for (int quarter = 1; quarter <= 3; quarter++) {
        const vec3 m = vec3_add(vec3_scale(a, 1.0 - 0.25 * quarter), vec3_scale(b, 0.25 * quarter));
        const double value = fabs(field_at(body, m));
        if (value > 0.7 * worst_m) worst_m = fmax(worst_m, value / vec3_norm(field_gradient(body, m)));
    }
    return worst_m;
}

static vec3 area_normal(const vec3 *v, uint32_t a, uint32_t b, uint32_t c)
{
    return vec3_cross(vec3_sub(v[b], v[a]), vec3_sub(v[c], v[a]));
}

/* Sine of a triangle's smallest angle: twice the area over the product of the two longer sides. */
static double narrowness(const vec3 *v, uint32_t a, uint32_t b, uint32_t c)
{
    const double ab = vec3_norm(vec3_sub(v[a], v[b])), bc = vec3_norm(vec3_sub(v[b], v[c])), ca = vec3_norm(vec3_sub(v[c], v[a]));
    const double shortest = fmin(ab, fmin(bc, ca));
    return vec3_norm(area_normal(v, a, b, c)) * shortest / (ab * bc * ca);
}

static int corner_opposite(const facet *f, const edge *e)
{
    for (int c = 0; c < 3; c++)
        if (f->v[c] != e->a && f->v[c] != e->b) return c;
    return 0;
}

static size_t split_far_edges(facets *mesh, field body, skin_limit limit)
{
    edges all = edges_of(mesh);
    size_t n_split = 0;
    for (size_t i = 0; i < all.n; i++) {
        edge *e = &all.edge[i];
        const vec3 a = mesh->vertex_m[e->a], b = mesh->vertex_m[e->b];
        const double length_m = vec3_norm(vec3_sub(a, b));
        e->made = NO_FACET;
        if (length_m < skin_least_edge_m || (length_m <= limit.edge_m && off_surface_m(body, a, b) <= limit.sagitta_m)) continue;
        e->made = facets_vertex(mesh, field_project(body, middle(a, b)));
        n_split++;
    }
    split_edges(mesh, &all);
    edges_free(&all);
    return n_split;
}

/* The sagitta that the turn t between two facets tells of: e tan(t/4)/2, with e the mean of their heights over the edge. Above
 * a right angle it is a fold. */
static double sagitta_of_turn_m(const facets *mesh, const edge *e)
{
    const facet *f = &mesh->facet[e->facet[0]], *g = &mesh->facet[e->facet[1]];
    const vec3 n = area_normal(mesh->vertex_m, f->v[0], f->v[1], f->v[2]);
    const vec3 m = area_normal(mesh->vertex_m, g->v[0], g->v[1], g->v[2]);
    if (vec3_dot(n, m) <= 0.0) return 0.0;
    const double length_m = vec3_norm(vec3_sub(mesh->vertex_m[e->a], mesh->vertex_m[e->b]));
    const double height_m = 0.5 * (vec3_norm(n) + vec3_norm(m)) / length_m;
    return 0.5 * height_m * tan(0.25 * atan2(vec3_norm(vec3_cross(n, m)), vec3_dot(n, m)));
}

static uint32_t longest_edge(const facets *mesh, const edges *all, uint32_t f)
{
    uint32_t longest = 0;
    double longest_m = 0.0;
    for (int c = 0; c < 3; c++) {
        const edge *e = &all->edge[all->of_facet[f][c]];
        const double length_m = vec3_norm(vec3_sub(mesh->vertex_m[e->a], mesh->vertex_m[e->b]));
        if (length_m <= longest_m) continue;
        longest_m = length_m;
        longest = all->of_facet[f][c];
    }
    return longest;
}

static size_t halve_longest(facets *mesh, field body, edges *all, uint32_t f)
{
    edge *longest = &all->edge[longest_edge(mesh, all, f)];
    const vec3 a = mesh->vertex_m[longest->a], b = mesh->vertex_m[longest->b];
    if (longest->made != NO_FACET || vec3_norm(vec3_sub(a, b)) < skin_least_edge_m) return 0;
    longest->made = facets_vertex(mesh, field_project(body, middle(a, b)));
    return 1;
}

/* A facet may miss the surface between edges that keep the limit: then it turns against its neighbours. */
static size_t split_turned_facets(facets *mesh, field body, skin_limit limit)
{
    edges all = edges_of(mesh);
    size_t n_split = 0;
    for (size_t i = 0; i < all.n; i++) all.edge[i].made = NO_FACET;
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        if (e->facet[1] == NO_FACET || sagitta_of_turn_m(mesh, e) <= limit.sagitta_m) continue;
        for (int side = 0; side < 2; side++) n_split += halve_longest(mesh, body, &all, e->facet[side]);
    }
    split_edges(mesh, &all);
    edges_free(&all);
    return n_split;
}

/* Facets (a, b, c) and (b, a, d) become (c, d, b) and (d, c, a): is that better? Where the edge strays from the surface the nearer of
 * the two diagonals wins, as edges along a fillet are worth more than even angles; elsewhere the wider smallest angle. */
static int turn_is_better(const facets *mesh, field body, skin_limit limit, uint32_t a, uint32_t b, uint32_t c, uint32_t d)
{
    static const double least_sine = 0.12;
    const vec3 *v = mesh->vertex_m;
    const vec3 n = vec3_add(area_normal(v, a, b, c), area_normal(v, b, a, d));
    const vec3 n1 = area_normal(v, c, d, b), n2 = area_normal(v, d, c, a);
    const double level = 0.9 * vec3_norm(n);
    if (vec3_dot(n, n1) < level * vec3_norm(n1) || vec3_dot(n, n2) < level * vec3_norm(n2)) return 0;
    const double now = fmin(narrowness(v, a, b, c), narrowness(v, b, a, d));
    const double then = fmin(narrowness(v, c, d, b), narrowness(v, d, c, a));
    if (then < fmin(now, least_sine)) return 0;
    const double off_now_m = off_surface_m(body, v[a], v[b]), off_then_m = off_surface_m(body, v[c], v[d]);
    if (fmax(off_now_m, off_then_m) < 0.5 * limit.sagitta_m) return then > 1.05 * now;
    return off_then_m < 0.8 * off_now_m;
}

/* One sweep over the edges. A facet or tip vertex takes part in one turn only, as the table of edges does not follow. */
static size_t turn_edges_once(facets *mesh, field body, skin_limit limit)
{
    edges all = edges_of(mesh);
    size_t room_facets = 0, room_vertices = 0, n_turned = 0;
    char *facet_done = grow_array(NULL, &room_facets, mesh->n_facets, 1);
    char *vertex_done = grow_array(NULL, &room_vertices, mesh->n_vertices, 1);
    memset(facet_done, 0, mesh->n_facets);
    memset(vertex_done, 0, mesh->n_vertices);
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        if (e->facet[1] == NO_FACET || facet_done[e->facet[0]] || facet_done[e->facet[1]]) continue;
        facet *f = &mesh->facet[e->facet[0]], *g = &mesh->facet[e->facet[1]];
        const int k = corner_opposite(f, e), l = corner_opposite(g, e);
        const uint32_t a = f->v[(k + 1) % 3], b = f->v[(k + 2) % 3], c = f->v[k], d = g->v[l];
        if (f->part != g->part || vertex_done[c] || vertex_done[d] || edges_have(&all, c, d)) continue;
        if (!turn_is_better(mesh, body, limit, a, b, c, d)) continue;
        *f = (facet){{c, d, b}, f->part};
        *g = (facet){{d, c, a}, g->part};
        facet_done[e->facet[0]] = facet_done[e->facet[1]] = vertex_done[c] = vertex_done[d] = 1;
        n_turned++;
    }
    free(facet_done);
    free(vertex_done);
    edges_free(&all);
    return n_turned;
}

void skin_turn_edges(facets *mesh, field body, skin_limit limit)
{
    enum { MOST_PASSES = 3 };
    for (int pass = 0; pass < MOST_PASSES && turn_edges_once(mesh, body, limit) > 0; pass++) continue;
}

void skin_refine(facets *mesh, field body, skin_limit limit)
{
    enum { MOST_PASSES = 12 };
    for (int pass = 0; pass < MOST_PASSES; pass++) {
        skin_turn_edges(mesh, body, limit);
        if (split_far_edges(mesh, body, limit) == 0) break;
    }
    for (int pass = 0; pass < MOST_PASSES; pass++) {
        if (split_turned_facets(mesh, body, limit) == 0) break;
        skin_turn_edges(mesh, body, limit);
    }
}

size_t skin_halve_judged(facets *mesh, field body, skin_limit limit)
{
    double *sagitta_m = facets_sagitta_m(mesh);
    edges all = edges_of(mesh);
    const size_t n_facets = mesh->n_facets;
    size_t n_split = 0;
    for (size_t i = 0; i < all.n; i++) all.edge[i].made = NO_FACET;
    for (size_t f = 0; f < n_facets; f++)
        if (sagitta_m[f] > limit.judged_m) n_split += halve_longest(mesh, body, &all, (uint32_t)f);
    split_edges(mesh, &all);
    edges_free(&all);
    free(sagitta_m);
    return n_split;
}

void skin_finish(facets *mesh, field body, skin_limit limit)
{
    enum { MOST_PASSES = 8 };
    for (int pass = 0; pass < MOST_PASSES && skin_halve_judged(mesh, body, limit) > 0; pass++) skin_turn_edges(mesh, body, limit);
}
