/* fitness.c - is a mesh fit for a wavelength? */
#include "base/sum.h"
#include "base/vec3.h"
#include "mesh/sagitta.h"
#include <roadglint/fitness.h>
#include <stdlib.h>

#define LIGHT_M_PER_S 299792458.0
#define SAGITTA_PER_LAMBDA (1.0 / 16.0)     /* docs/physics.md (4.1) */

static int by_value(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Each edge once; where three facets meet, once for each of them. */
static rg_status edge_points(const rg_mesh *mesh, double edge_m[5], rg_error *err)
{
    static const double share[5] = {0.05, 0.25, 0.5, 0.75, 0.95};
    double *length_m = malloc(3 * mesh->n_facets * sizeof *length_m);
    if (!length_m) return rg_fail(err, RG_NO_MEMORY, "no memory for the edges of %zu facets", mesh->n_facets);
    size_t n = 0;
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            if (mesh->neighbour[f][i] < f) continue;
            const uint32_t *c = mesh->facet[f];
            length_m[n++] = vec3_norm(vec3_sub(vec3_from(mesh->vertex_m[c[(i + 1) % 3]]), vec3_from(mesh->vertex_m[c[i]])));
        }
    qsort(length_m, n, sizeof *length_m, by_value);
    for (int p = 0; p < 5; p++) edge_m[p] = length_m[(size_t)(share[p] * (double)(n - 1) + 0.5)];
    free(length_m);
    return RG_OK;
}

/* The greatest distance between two vertices, looked for from the ones that reach farthest along 13 axes. A lower bound that misses the
 * diameter only where none of these is an end of it. */
static double diameter_m(const rg_mesh *mesh)
{
    static const signed char axis[13][3] = {{1, 0, 0}, {0, 1, 0}, {0, 0, 1}, {1, 1, 0}, {1, -1, 0}, {1, 0, 1}, {1, 0, -1},
                                            {0, 1, 1}, {0, 1, -1}, {1, 1, 1}, {1, 1, -1}, {1, -1, 1}, {-1, 1, 1}};
    size_t end[26] = {0};
    double reach_m[26];
    for (int a = 0; a < 26; a++) reach_m[a] = -INFINITY;
    for (size_t v = 0; v < mesh->n_vertices; v++)
        for (int a = 0; a < 13; a++) {
            const double *r = mesh->vertex_m[v], along_m = axis[a][0] * r[0] + axis[a][1] * r[1] + axis[a][2] * r[2];
            if (along_m > reach_m[2 * a]) reach_m[2 * a] = along_m, end[2 * a] = v;
            if (-along_m > reach_m[2 * a + 1]) reach_m[2 * a + 1] = -along_m, end[2 * a + 1] = v;
        }
    double largest_m2 = 0.0;
    for (size_t v = 0; v < mesh->n_vertices; v++)
        for (int a = 0; a < 26; a++) {
            const vec3 d = vec3_sub(vec3_from(mesh->vertex_m[v]), vec3_from(mesh->vertex_m[end[a]]));
            largest_m2 = fmax(largest_m2, vec3_dot(d, d));
        }
    return sqrt(largest_m2);
}

typedef struct { double sagitta_m, area_m2; } curved_facet;

static int by_sagitta(const void *a, const void *b)
{
    const curved_facet *x = a, *y = b;
    return (x->sagitta_m > y->sagitta_m) - (x->sagitta_m < y->sagitta_m);
}

static double facet_area_m2(const rg_mesh *mesh, size_t f)
{
    const uint32_t *c = mesh->facet[f];
    const vec3 a = vec3_from(mesh->vertex_m[c[0]]);
    return 0.5 * vec3_norm(vec3_cross(vec3_sub(vec3_from(mesh->vertex_m[c[1]]), a), vec3_sub(vec3_from(mesh->vertex_m[c[2]]), a)));
}

/* Fills what follows from the sagittas; wavelength_m is there. */
static rg_status judge_sagittas(const rg_mesh *mesh, const rg_sagittas *s, rg_fitness *out, rg_error *err)
{
    curved_facet *curved = malloc(mesh->n_facets * sizeof *curved);
    if (!curved) return rg_fail(err, RG_NO_MEMORY, "no memory to judge %zu facets", mesh->n_facets);
    const double limit_m = SAGITTA_PER_LAMBDA * out->wavelength_m;
    size_t n = 0, worst = 0;
    rg_sum area_m2 = {0}, over_m2 = {0};
    for (size_t f = 0; f < mesh->n_facets; f++) {
        if (s->sagitta_m[f] > s->sagitta_m[worst]) worst = f;
        if (!(s->sagitta_m[f] > 0.0)) continue;
        curved[n] = (curved_facet){s->sagitta_m[f], facet_area_m2(mesh, f)};
        rg_sum_add(&area_m2, curved[n].area_m2);
        if (s->sagitta_m[f] > limit_m) rg_sum_add(&over_m2, curved[n].area_m2);
        n++;
    }
    out->curved_area_m2 = rg_sum_value(&area_m2);
    out->over_area_m2 = rg_sum_value(&over_m2);
    qsort(curved, n, sizeof *curved, by_sagitta);
    double below_m2 = 0.0;
    for (size_t i = 0; i < n; i++) {
        if (below_m2 <= 0.5 * out->curved_area_m2) out->sagitta_m[0] = curved[i].sagitta_m;
        if (below_m2 <= 0.95 * out->curved_area_m2) out->sagitta_m[1] = curved[i].sagitta_m;
        below_m2 += curved[i].area_m2;
    }
    out->sagitta_m[2] = s->sagitta_m[worst];
    out->worst_part = mesh->part[worst];
    out->fit_up_to_hz = n ? SAGITTA_PER_LAMBDA * LIGHT_M_PER_S / s->sagitta_m[worst] : INFINITY;
    /* An even-sided triangle of edge e on a sphere stands off by e^2/(6 R), a chord over an arc by e^2/(8 R): the stricter. */
    out->edge_needed_m = n ? sqrt(6.0 * limit_m / s->curvature_per_m[worst]) : INFINITY;
    free(curved);
    return RG_OK;
}

rg_status rg_mesh_fitness(const rg_mesh *mesh, double freq_hz, rg_fitness *out, rg_error *err)
{
    if (!isfinite(freq_hz) || freq_hz <= 0.0)
        return rg_fail(err, RG_BAD_VALUE, "a frequency of %g Hz is not finite and above 0", freq_hz);
    rg_fitness fitness = {.freq_hz = freq_hz, .wavelength_m = LIGHT_M_PER_S / freq_hz, .feature_turn_rad = RG_FEATURE_TURN_RAD};
    rg_sagittas sagittas = {0};
    rg_status status = edge_points(mesh, fitness.edge_m, err);
    if (!status) status = rg_sagittas_find(&sagittas, mesh, err);
    if (!status) status = judge_sagittas(mesh, &sagittas, &fitness, err);
    if (status) goto done;
    fitness.n_feature_edges = sagittas.n_feature_edges;
    fitness.n_unsure_edges = sagittas.n_unsure_edges;
    fitness.unsure_sagitta_m = sagittas.unsure_sagitta_m;
    fitness.size_m = diameter_m(mesh);
    fitness.far_field_m = 2.0 * fitness.size_m * fitness.size_m / fitness.wavelength_m;
    fitness.aspect_step_rad = 0.25 * fitness.wavelength_m / fitness.size_m;
    fitness.fit = freq_hz <= fitness.fit_up_to_hz;
    *out = fitness;
done:
    rg_sagittas_free(&sagittas);
    return status;
}

rg_status rg_mesh_part_sagitta(const rg_mesh *mesh, double sagitta_m[], rg_error *err)
{
    rg_sagittas sagittas = {0};
    const rg_status status = rg_sagittas_find(&sagittas, mesh, err);
    if (status) return status;
    for (size_t p = 0; p < mesh->n_parts; p++) {
        sagitta_m[p] = 0.0;
        for (size_t f = mesh->part_first[p]; f < mesh->part_first[p + 1]; f++)
            sagitta_m[p] = fmax(sagitta_m[p], sagittas.sagitta_m[f]);
    }
    rg_sagittas_free(&sagittas);
    return RG_OK;
}
