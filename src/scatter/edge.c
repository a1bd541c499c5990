/* edge.c - the stretches of edges that the radar sees, with their fringe coefficients */
#include "scatter/edge.h"
#include "base/room.h"
#include "scatter/fringe.h"
#include "scatter/occluder.h"
#include <math.h>
#include <stdlib.h>

typedef struct { double from, to; } interval;

struct rg_edge_scratch {
    uint32_t *near;
    size_t near_room;
    interval *hidden;
    size_t n_hidden, hidden_room;
};

rg_edge_scratch *rg_edge_scratch_new(void) { return calloc(1, sizeof(rg_edge_scratch)); }

void rg_edge_scratch_free(rg_edge_scratch *scratch)
{
    if (!scratch) return;
    free(scratch->near);
    free(scratch->hidden);
    free(scratch);
}

void rg_stretches_free(rg_stretches *stretches)
{
    for (int i = 0; i < 2; i++) free(stretches->path_m[i]);
    for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) free(stretches->weight_m[w]);
    *stretches = (rg_stretches){0};
}

static bool make_stretch_room(rg_stretches *s, size_t n)
{
    double **array[] = {&s->path_m[0], &s->path_m[1], &s->weight_m[0], &s->weight_m[1], &s->weight_m[2]};
    return rg_make_rooms(array, sizeof array / sizeof array[0], &s->room, n);
}

static int by_start(const void *a, const void *b)
{
    const interval *x = a, *y = b;
    if (x->from != y->from) return x->from < y->from ? -1 : 1;
    return (x->to > y->to) - (x->to < y->to);
}

/* What hides stretches of the edge. False without memory. */
static bool gather_hidden(const rg_scene *scene, const rg_seen *seen, const rg_edge *edge, const double end_m[2][3], rg_edge_scratch *scratch)
{
    const rg_mesh *mesh = scene->mesh;
    rg_prism prism = {.toward = {seen->view.s.x, seen->view.s.y, seen->view.s.z}};
    for (int i = 0; i < 3; i++)
        for (int axis = 0; axis < 3; axis++) prism.corner_m[i][axis] = mesh->vertex_m[edge->vertex[i > 0]][axis];
    size_t n = rg_bvh_in_prism(scene->bvh, &prism, scratch->near_room, scratch->near);
    if (n > scratch->near_room) {
        if (!rg_make_room((void **)&scratch->near, &scratch->near_room, n, sizeof *scratch->near)) return false;
        n = rg_bvh_in_prism(scene->bvh, &prism, scratch->near_room, scratch->near);
    }
    scratch->n_hidden = 0;
    for (size_t i = 0; i < n; i++) {
        rg_face face;
        double stretch[2];
        const uint32_t near = scratch->near[i];
        if (near == edge->facet[0] || near == edge->facet[1] || !rg_face_seen(&face, mesh, seen, near) ||
            !rg_occluder_stretch(stretch, &face, edge->vertex, end_m, mesh->report.weld_m))
            continue;
        if (!rg_make_room((void **)&scratch->hidden, &scratch->hidden_room, scratch->n_hidden + 1, sizeof *scratch->hidden)) return false;
        scratch->hidden[scratch->n_hidden++] = (interval){stretch[0], stretch[1]};
    }
    if (scratch->n_hidden > 1) qsort(scratch->hidden, scratch->n_hidden, sizeof *scratch->hidden, by_start);
    return true;
}

static bool add_stretch(rg_stretches *s, const double end_m[2][3], double from, double to, const double weight_m[RG_SEGMENT_WEIGHTS])
{
    if (to <= from) return true;
    if (!make_stretch_room(s, s->n + 1)) return false;
    s->path_m[0][s->n] = 2.0 * (end_m[0][2] + from * (end_m[1][2] - end_m[0][2]));
    s->path_m[1][s->n] = 2.0 * (end_m[0][2] + to * (end_m[1][2] - end_m[0][2]));
    for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) s->weight_m[w][s->n] = weight_m[w] * (to - from);
    s->n++;
    return true;
}

static void find_end(const rg_scene *scene, const rg_seen *seen, uint32_t vertex, double at_m[3])
{
    const vec3 r = vec3_from(scene->mesh->vertex_m[vertex]);
    at_m[0] = vec3_dot(seen->view.h, r);
    at_m[1] = vec3_dot(seen->view.v, r);
    at_m[2] = vec3_dot(seen->view.s, r);
}

static bool add_edge(const rg_scene *scene, const rg_seen *seen, const rg_edge *edge, rg_edge_scratch *scratch, rg_stretches *stretches)
{
    const rg_edge_face face[2] = {{vec3_from(edge->into[0]), vec3_from(edge->normal[0])}, {vec3_from(edge->into[1]), vec3_from(edge->normal[1])}};
    double complex m[2][2];
    double end_m[2][3], length2_m2 = 0.0, weight_m[RG_SEGMENT_WEIGHTS];
    rg_fringe(edge->wedge_n, face, &seen->view, m);
    if (m[0][0] == 0.0 && m[1][1] == 0.0 && m[0][1] == 0.0) return true;
    for (int i = 0; i < 2; i++) find_end(scene, seen, edge->vertex[i], end_m[i]);
    for (int axis = 0; axis < 3; axis++) length2_m2 += (end_m[1][axis] - end_m[0][axis]) * (end_m[1][axis] - end_m[0][axis]);
    const double length_m = sqrt(length2_m2);
    weight_m[0] = creal(m[0][0]) * length_m;                /* the coefficients are real on metal */
    weight_m[1] = creal(m[1][1]) * length_m;
    weight_m[2] = creal(m[0][1]) * length_m;
    if (!gather_hidden(scene, seen, edge, end_m, scratch)) return false;
    double lit_from = 0.0;
    bool enough = true;
    for (size_t i = 0; i < scratch->n_hidden && enough; i++) {
        enough = add_stretch(stretches, end_m, lit_from, scratch->hidden[i].from, weight_m);
        lit_from = fmax(lit_from, scratch->hidden[i].to);
    }
    return enough && add_stretch(stretches, end_m, lit_from, 1.0, weight_m);
}

rg_status rg_edge_stretches(const rg_scene *scene, const rg_seen *seen, size_t n, const rg_edge edge[], rg_edge_scratch *scratch,
                            rg_stretches *stretches, rg_error *err)
{
    bool enough = true;
    stretches->n = 0;
    for (size_t i = 0; i < n && enough; i++) enough = add_edge(scene, seen, &edge[i], scratch, stretches);
    enough = enough && make_stretch_room(stretches, stretches->n + RG_LANES);
    if (!enough) return rg_fail(err, RG_NO_MEMORY, "no memory for the stretches of %zu edges", n);
    for (; stretches->n % RG_LANES; stretches->n++) {
        for (int i = 0; i < 2; i++) stretches->path_m[i][stretches->n] = 0.0;
        for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) stretches->weight_m[w][stretches->n] = 0.0;
    }
    return RG_OK;
}
