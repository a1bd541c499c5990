/* surface.c - first-bounce physical optics over the lit pieces */
#include "scatter/surface.h"
#include "base/elementary.h"
#include "base/level.h"
#include "base/sum.h"
#include "scatter/reflection.h"
#include <math.h>
#include <omp.h>
#include <stdlib.h>
#include <string.h>

#define LIGHT_SPEED_M_PER_S 299792458.0
#define ROOT_PI 1.77245385090551602730
/* Pieces shorter than this share of the shortest wavelength are not cut any further where occluders crowd. */
#define GRAIN_PER_WAVELENGTH 0.125

/* Blocks that threads work on between two foldings; a bound on memory, of no influence on the result. */
enum { GROUP = 64 };

struct rg_surface_bench {
    rg_seen seen;
    int n_threads;
    rg_lit_scratch **scratch;       /* [n_threads] */
    rg_pieces *pieces;              /* [n_threads] */
    size_t sum_room;
    double (*group_m2)[2];          /* [GROUP][n_freq]: the integral over each block of the group */
    rg_sum (*part_m2)[2];           /* [n_freq]: over the part in hand */
    rg_sum (*total_m2)[2];          /* [n_freq]: over the parts done */
};

double rg_dbsm(double complex s_m) { return rg_level_db(s_m); }

rg_status rg_surface_bench_new(rg_surface_bench **out, const rg_scene *scene, int n_threads, rg_error *err)
{
    rg_surface_bench *bench = calloc(1, sizeof *bench);
    if (!bench) return rg_fail(err, RG_NO_MEMORY, "no memory to start a thread's work");
    bench->n_threads = n_threads;
    bench->scratch = calloc((size_t)n_threads, sizeof(rg_lit_scratch *));
    bench->pieces = calloc((size_t)n_threads, sizeof *bench->pieces);
    rg_status status = bench->scratch && bench->pieces ? rg_seen_new(&bench->seen, scene->mesh, err) : RG_NO_MEMORY;
    for (int t = 0; t < n_threads && !status; t++)
        if (!(bench->scratch[t] = rg_lit_scratch_new())) status = RG_NO_MEMORY;
    if (status) {
        rg_surface_bench_free(bench);
        return rg_fail(err, status, "no memory for the work of %d threads", n_threads);
    }
    *out = bench;
    return RG_OK;
}

void rg_surface_bench_free(rg_surface_bench *bench)
{
    if (!bench) return;
    for (int t = 0; t < bench->n_threads && bench->scratch; t++) rg_lit_scratch_free(bench->scratch[t]);
    for (int t = 0; t < bench->n_threads && bench->pieces; t++) rg_pieces_free(&bench->pieces[t]);
    free(bench->scratch);
    free(bench->pieces);
    rg_seen_free(&bench->seen);
    free(bench->group_m2);
    free(bench->part_m2);
    free(bench->total_m2);
    free(bench);
}

static rg_status make_sum_room(rg_surface_bench *bench, size_t n_freq, rg_error *err)
{
    if (n_freq <= bench->sum_room) return RG_OK;
    free(bench->group_m2);
    free(bench->part_m2);
    free(bench->total_m2);
    bench->group_m2 = calloc(GROUP * n_freq, sizeof *bench->group_m2);
    bench->part_m2 = calloc(n_freq, sizeof *bench->part_m2);
    bench->total_m2 = calloc(n_freq, sizeof *bench->total_m2);
    const bool enough = bench->group_m2 && bench->part_m2 && bench->total_m2;
    bench->sum_room = enough ? n_freq : 0;
    return enough ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for the sums of %zu frequencies", n_freq);
}

/* The integral Sum (n.s) Int exp(2jk s.r) dA over one block, for every frequency; r from the mesh's middle. */
static rg_status sum_block(const rg_scene *scene, const rg_seen *seen, const rg_block *block, double grain_m, size_t n_freq,
                           const double freq_hz[], rg_lit_scratch *scratch, rg_pieces *pieces, double sum_m2[][2], rg_error *err)
{
    const rg_status status = rg_lit_block(scene, seen, block, grain_m, scratch, pieces, err);
    for (size_t f = 0; f < n_freq && !status; f++)
        scene->triangle_sum(pieces->n, pieces->path_m[0], pieces->path_m[1], pieces->path_m[2], pieces->weight_m2,
                            2.0 * freq_hz[f] / LIGHT_SPEED_M_PER_S, sum_m2[f]);
    return status;
}

/* (2.1) and (2.3): from the integral about the mesh's middle to the amplitude about its origin. On metal the dyad is the same for
 * every normal, so it stands before the sum. */
static void amplitude(const rg_scene *scene, const rg_view *view, double freq_hz, const rg_sum sum_m2[2], double complex s_m[RG_N_POL])
{
    double complex dyad[2][2];
    double turn_re, turn_im;
    const double k = 2.0 * RG_SIN_PI_0 * freq_hz / LIGHT_SPEED_M_PER_S;
    rg_cis_pi(4.0 * freq_hz / LIGHT_SPEED_M_PER_S * vec3_dot(view->s, vec3_from(scene->mesh->origin_m)), &turn_re, &turn_im);
    const double re = rg_sum_value(&sum_m2[0]), im = rg_sum_value(&sum_m2[1]);
    const double at_origin_re = re * turn_re - im * turn_im, at_origin_im = re * turn_im + im * turn_re;
    const double complex s = CMPLX(k / ROOT_PI * at_origin_im, -k / ROOT_PI * at_origin_re);      /* times -jk/sqrt(pi) */
    rg_backscatter_dyad(rg_reflect_metal(), view->s, view, dyad);
    s_m[RG_HH] = s * dyad[0][0];
    s_m[RG_VV] = s * dyad[1][1];
    s_m[RG_HV] = s * dyad[0][1];
    s_m[RG_VH] = s * dyad[1][0];
}

/* Ends a part: its sum goes to its slot and to the total. */
static void close_part(const rg_scene *scene, rg_surface_bench *bench, size_t part, size_t n_freq, const double freq_hz[],
                       double complex part_m[][RG_N_POL])
{
    for (size_t f = 0; f < n_freq; f++) {
        if (part_m) amplitude(scene, &bench->seen.view, freq_hz[f], bench->part_m2[f], part_m[part * n_freq + f]);
        for (int i = 0; i < 2; i++) rg_sum_add(&bench->total_m2[f][i], rg_sum_value(&bench->part_m2[f][i]));
    }
    memset(bench->part_m2, 0, n_freq * sizeof *bench->part_m2);
}

static rg_status sum_group(const rg_scene *scene, rg_surface_bench *bench, size_t first, size_t n, double grain_m, size_t n_freq,
                           const double freq_hz[], const volatile sig_atomic_t *stop, rg_error *err)
{
    rg_status first_status = RG_OK;
#pragma omp parallel for schedule(dynamic) num_threads(bench->n_threads) if (bench->n_threads > 1)
    for (size_t b = 0; b < n; b++) {
        rg_error mine = {{0}};
        rg_status status = stop && *stop ? rg_fail(&mine, RG_STOPPED, "stopped") : RG_OK;
        const int t = bench->n_threads > 1 ? omp_get_thread_num() : 0;
        if (!status)
            status = sum_block(scene, &bench->seen, &scene->block[first + b], grain_m, n_freq, freq_hz, bench->scratch[t],
                               &bench->pieces[t], bench->group_m2 + b * n_freq, &mine);
        if (status) {
#pragma omp critical
            first_status = rg_fail(err, status, "%s", mine.text);
        }
    }
    return first_status;
}

rg_status rg_surface_aspect(const rg_scene *scene, rg_surface_bench *bench, const rg_view *view, size_t n_freq,
                            const double freq_hz[], double complex s_m[][RG_N_POL], double complex part_m[][RG_N_POL],
                            const volatile sig_atomic_t *stop, rg_error *err)
{
    rg_status status = make_sum_room(bench, n_freq, err);
    if (status) return status;
    double highest_hz = 0.0;
    for (size_t f = 0; f < n_freq; f++) highest_hz = fmax(highest_hz, freq_hz[f]);
    const double grain_m = GRAIN_PER_WAVELENGTH * LIGHT_SPEED_M_PER_S / highest_hz;

    rg_seen_turn(&bench->seen, scene->mesh, view);
    memset(bench->part_m2, 0, n_freq * sizeof *bench->part_m2);
    memset(bench->total_m2, 0, n_freq * sizeof *bench->total_m2);
    for (size_t first = 0; first < scene->n_blocks && !status; first += GROUP) {
        const size_t n = scene->n_blocks - first < GROUP ? scene->n_blocks - first : GROUP;
        status = sum_group(scene, bench, first, n, grain_m, n_freq, freq_hz, stop, err);
        for (size_t b = 0; b < n && !status; b++) {
            const size_t part = scene->block[first + b].part;
            for (size_t f = 0; f < n_freq; f++)
                for (int i = 0; i < 2; i++) rg_sum_add(&bench->part_m2[f][i], bench->group_m2[b * n_freq + f][i]);
            if (first + b + 1 == scene->n_blocks || scene->block[first + b + 1].part != part)
                close_part(scene, bench, part, n_freq, freq_hz, part_m);
        }
    }
    for (size_t f = 0; f < n_freq && !status; f++) amplitude(scene, view, freq_hz[f], bench->total_m2[f], s_m[f]);
    return status;
}

rg_status rg_check_frequencies(size_t n_freq, const double freq_hz[], rg_error *err)
{
    if (n_freq == 0) return rg_fail(err, RG_BAD_VALUE, "no frequency: give at least one, such as 77GHz");
    for (size_t f = 0; f < n_freq; f++)
        if (!isfinite(freq_hz[f]) || freq_hz[f] <= 0.0)
            return rg_fail(err, RG_BAD_VALUE, "a frequency of %g Hz: it must be finite and above 0", freq_hz[f]);
    return RG_OK;
}

rg_status rg_surface(const rg_scene *scene, rg_aspect aspect, size_t n_freq, const double freq_hz[],
                     double complex s_m[][RG_N_POL], rg_error *err)
{
    if (!isfinite(aspect.az_rad) || !isfinite(aspect.el_rad))
        return rg_fail(err, RG_BAD_VALUE, "an aspect of %g, %g rad: both angles must be finite", aspect.az_rad, aspect.el_rad);
    rg_surface_bench *bench = NULL;
    const rg_view view = rg_view_of(aspect);
    double complex(*result_m)[RG_N_POL] = NULL;
    rg_status status = rg_check_frequencies(n_freq, freq_hz, err);
    if (!status) {
        result_m = malloc(n_freq * sizeof *result_m);
        if (!result_m) status = rg_fail(err, RG_NO_MEMORY, "no memory for %zu frequencies", n_freq);
    }
    if (!status) status = rg_surface_bench_new(&bench, scene, 1, err);
    if (!status) status = rg_surface_aspect(scene, bench, &view, n_freq, freq_hz, result_m, NULL, NULL, err);
    if (!status) memcpy(s_m, result_m, n_freq * sizeof *result_m);
    rg_surface_bench_free(bench);
    free(result_m);
    return status;
}
