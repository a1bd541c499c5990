/* aspect.c - all mechanisms of one aspect, block by block */
#include "scatter/aspect.h"
#include "base/elementary.h"
#include "base/level.h"
#include "base/sum.h"
#include "scatter/bounce.h"
#include "scatter/cover.h"
#include "scatter/edge.h"
#include "scatter/lit.h"
#include "scatter/reflection.h"
#include <math.h>
#include <omp.h>
#include <stdlib.h>
#include <string.h>

#define LIGHT_SPEED_M_PER_S 299792458.0
#define ROOT_PI 1.77245385090551602730
/* Far above any radar; phases keep their digits up to there. */
#define HIGHEST_HZ 1e13
/* Pieces shorter than this share of the shortest wavelength are not cut any further where occluders crowd. */
#define GRAIN_PER_WAVELENGTH 0.125

/* Blocks that threads work on between two foldings; a bound on memory, of no influence on the result. */
enum { GROUP = 64 };

enum { HH, VV, HV, N_SUMS };        /* HV stands for VH too: reciprocity */

typedef struct { double at[N_SUMS][2]; } amplitude;     /* real and imaginary parts, m, about the mesh's middle */
typedef struct { rg_sum at[N_SUMS][2]; } amplitude_sum;

/* Working memory of one thread. */
typedef struct {
    rg_lit_scratch *lit_scratch;
    rg_bounce_scratch *bounce_scratch;
    rg_edge_scratch *edge_scratch;
    rg_polygons lit;
    rg_pieces pieces;
    rg_footprints footprints;
    rg_stretches stretches;
} worker;

struct rg_aspect_bench {
    const rg_scene *scene;
    rg_aspect_job job;
    double grain_m;
    rg_seen seen;
    rg_cover *cover;                /* NULL where no mechanism asks for facets */
    int n_threads;
    worker *workers;                /* [n_threads] */
    amplitude *group;               /* [GROUP][n_freq]: each block of the group */
    amplitude_sum *part, *total;    /* [n_freq]: the part in hand, the parts done */
};

double rg_dbsm(double complex s_m) { return rg_level_db(s_m); }

rg_status rg_aspect_job_check(const rg_aspect_job *job, rg_error *err)
{
    if (job->n_freq == 0) return rg_fail(err, RG_BAD_VALUE, "no frequency: give at least one, such as 77GHz");
    for (size_t f = 0; f < job->n_freq; f++)
        if (!(job->freq_hz[f] > 0.0 && job->freq_hz[f] <= HIGHEST_HZ))
            return rg_fail(err, RG_BAD_VALUE, "a frequency of %g Hz: it must be above 0 and no more than 10 THz", job->freq_hz[f]);
    if (job->mechanisms == 0 || job->mechanisms & ~(unsigned)(RG_SURFACE | RG_EDGE | RG_BOUNCE))
        return rg_fail(err, RG_BAD_VALUE, "no such mechanism: there are surface, edge and bounce");
    if (job->n_bounces < 2 || job->n_bounces > RG_MAX_BOUNCES)
        return rg_fail(err, RG_BAD_VALUE, "%d bounces: it must be 2 to %d", job->n_bounces, RG_MAX_BOUNCES);
    return RG_OK;
}

rg_status rg_aspect_bench_new(rg_aspect_bench **out, const rg_scene *scene, const rg_aspect_job *job, int n_threads, rg_error *err)
{
    double highest_hz = 0.0;
    rg_aspect_bench *bench = calloc(1, sizeof *bench);
    if (!bench) return rg_fail(err, RG_NO_MEMORY, "no memory to start a thread's work");
    for (size_t f = 0; f < job->n_freq; f++) highest_hz = fmax(highest_hz, job->freq_hz[f]);
    bench->scene = scene;
    bench->job = *job;
    bench->grain_m = GRAIN_PER_WAVELENGTH * LIGHT_SPEED_M_PER_S / highest_hz;
    bench->n_threads = n_threads;
    bench->workers = calloc((size_t)n_threads, sizeof *bench->workers);
    bench->group = calloc(GROUP * job->n_freq, sizeof *bench->group);
    bench->part = calloc(job->n_freq, sizeof *bench->part);
    bench->total = calloc(job->n_freq, sizeof *bench->total);
    bool enough = bench->workers && bench->group && bench->part && bench->total && rg_seen_new(&bench->seen, scene->mesh, err) == RG_OK;
    if (enough && job->mechanisms & (RG_SURFACE | RG_BOUNCE)) enough = rg_cover_new(&bench->cover, scene->mesh, err) == RG_OK;
    for (int t = 0; t < n_threads && enough; t++) {
        worker *w = &bench->workers[t];
        enough = (w->lit_scratch = rg_lit_scratch_new()) && (w->bounce_scratch = rg_bounce_scratch_new()) &&
                 (w->edge_scratch = rg_edge_scratch_new());
    }
    if (!enough) {
        rg_aspect_bench_free(bench);
        return rg_fail(err, RG_NO_MEMORY, "no memory for %d threads and %zu frequencies", n_threads, job->n_freq);
    }
    *out = bench;
    return RG_OK;
}

void rg_aspect_bench_free(rg_aspect_bench *bench)
{
    if (!bench) return;
    for (int t = 0; t < bench->n_threads && bench->workers; t++) {
        worker *w = &bench->workers[t];
        rg_lit_scratch_free(w->lit_scratch);
        rg_bounce_scratch_free(w->bounce_scratch);
        rg_edge_scratch_free(w->edge_scratch);
        free(w->lit.polygon);
        rg_pieces_free(&w->pieces);
        rg_footprints_free(&w->footprints);
        rg_stretches_free(&w->stretches);
    }
    free(bench->workers);
    rg_seen_free(&bench->seen);
    rg_cover_free(bench->cover);
    free(bench->group);
    free(bench->part);
    free(bench->total);
    free(bench);
}

/* The lit pieces of a block's facets, and the footprints of the beams that leave them. */
static rg_status find_pieces(const rg_aspect_bench *bench, const rg_block *block, worker *w, rg_error *err)
{
    const bool surface = bench->job.mechanisms & RG_SURFACE, bounce = bench->job.mechanisms & RG_BOUNCE;
    bool enough = true;
    w->pieces.n = w->footprints.n = 0;
    for (uint32_t i = 0; i < block->n && enough; i++) {
        rg_face face;
        if (!rg_face_seen(&face, bench->scene->mesh, &bench->seen, block->first + i)) continue;
        w->lit.n = 0;
        enough = rg_lit_from_afar(bench->scene, &bench->seen, bench->cover, &face, &rg_whole_facet, bench->grain_m, w->lit_scratch, &w->lit);
        for (size_t k = 0; k < w->lit.n && enough; k++) {
            const rg_polygon *lit = &w->lit.polygon[k];
            if (surface) enough = rg_pieces_add(&w->pieces, &face, lit);
            if (bounce && enough)
                enough = rg_bounce_follow(bench->scene, &bench->seen, bench->cover, &face, lit, bench->job.n_bounces, bench->grain_m, w->lit_scratch,
                                          w->bounce_scratch, &w->footprints);
        }
    }
    enough = enough && rg_pieces_pad(&w->pieces) && rg_footprints_pad(&w->footprints);
    return enough ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for the lit pieces of %u facets", block->n);
}

/* Adds the integral I over some pieces, (2.1): S = -(jk/sqrt(pi)) I, I = integral[0] + j integral[1]. */
static void add_integral(double freq_hz, const double integral_m2[2], double share, double s_m[2])
{
    const double k = 2.0 * RG_SIN_PI_0 * freq_hz / LIGHT_SPEED_M_PER_S;
    s_m[0] += k / ROOT_PI * integral_m2[1] * share;
    s_m[1] -= k / ROOT_PI * integral_m2[0] * share;
}

static rg_status sum_facets(const rg_aspect_bench *bench, const rg_block *block, worker *w, amplitude s[], rg_error *err)
{
    const rg_scene *scene = bench->scene;
    const rg_pieces *p = &w->pieces;
    const rg_footprints *g = &w->footprints;
    const rg_status status = find_pieces(bench, block, w, err);
    double complex dyad[2][2];
    /* (2.3); on metal the dyad is the same for every normal, so it stands before the sum */
    rg_backscatter_dyad(rg_reflect_metal(), bench->seen.view.s, &bench->seen.view, dyad);
    for (size_t f = 0; f < bench->job.n_freq && !status; f++) {
        const double freq_hz = bench->job.freq_hz[f], q_per_m = 2.0 * freq_hz / LIGHT_SPEED_M_PER_S;
        double integral_m2[2];
        scene->triangle_sum(p->n, p->path_m[0], p->path_m[1], p->path_m[2], p->weight_m2, q_per_m, integral_m2);
        add_integral(freq_hz, integral_m2, creal(dyad[0][0]), s[f].at[HH]);
        add_integral(freq_hz, integral_m2, creal(dyad[1][1]), s[f].at[VV]);
        add_integral(freq_hz, integral_m2, creal(dyad[0][1]), s[f].at[HV]);
        for (int pol = 0; pol < N_SUMS && g->n > 0; pol++) {
            scene->triangle_sum(g->n, g->path_m[0], g->path_m[1], g->path_m[2], g->weight_m2[pol], q_per_m, integral_m2);
            add_integral(freq_hz, integral_m2, 1.0, s[f].at[pol]);
        }
    }
    return status;
}

static rg_status sum_edges(const rg_aspect_bench *bench, const rg_block *block, worker *w, amplitude s[], rg_error *err)
{
    const rg_scene *scene = bench->scene;
    const rg_stretches *e = &w->stretches;
    const rg_status status = rg_edge_stretches(scene, &bench->seen, block->n, scene->edge + block->first, w->edge_scratch, &w->stretches, err);
    for (size_t f = 0; f < bench->job.n_freq && !status; f++) {
        double sum_m[RG_SEGMENT_WEIGHTS][2];
        scene->segment_sum(e->n, e->path_m[0], e->path_m[1], e->weight_m, 2.0 * bench->job.freq_hz[f] / LIGHT_SPEED_M_PER_S, sum_m);
        for (int pol = 0; pol < N_SUMS; pol++)
            for (int i = 0; i < 2; i++) s[f].at[pol][i] += sum_m[pol][i];
    }
    return status;
}

static rg_status sum_block(const rg_aspect_bench *bench, const rg_block *block, worker *w, amplitude s[], rg_error *err)
{
    memset(s, 0, bench->job.n_freq * sizeof *s);
    if (block->kind == RG_EDGE_BLOCK) return bench->job.mechanisms & RG_EDGE ? sum_edges(bench, block, w, s, err) : RG_OK;
    return bench->job.mechanisms & (RG_SURFACE | RG_BOUNCE) ? sum_facets(bench, block, w, s, err) : RG_OK;
}

static rg_status sum_group(rg_aspect_bench *bench, size_t first, size_t n, const volatile sig_atomic_t *stop, rg_error *err)
{
    rg_status first_status = RG_OK;
#pragma omp parallel for schedule(dynamic) num_threads(bench->n_threads) if (bench->n_threads > 1)
    for (size_t b = 0; b < n; b++) {
        rg_error mine = {{0}};
        worker *w = &bench->workers[bench->n_threads > 1 ? omp_get_thread_num() : 0];
        const rg_status status = stop && *stop ? rg_fail(&mine, RG_STOPPED, "stopped")
                                               : sum_block(bench, &bench->scene->block[first + b], w, bench->group + b * bench->job.n_freq, &mine);
        if (status) {
#pragma omp critical
            first_status = rg_fail(err, status, "%s", mine.text);
        }
    }
    return first_status;
}

static void add_amplitude(amplitude_sum *sum, const amplitude *s)
{
    for (int pol = 0; pol < N_SUMS; pol++)
        for (int i = 0; i < 2; i++) rg_sum_add(&sum->at[pol][i], s->at[pol][i]);
}

static amplitude amplitude_of(const amplitude_sum *sum)
{
    amplitude s;
    for (int pol = 0; pol < N_SUMS; pol++)
        for (int i = 0; i < 2; i++) s.at[pol][i] = rg_sum_value(&sum->at[pol][i]);
    return s;
}

/* From the mesh's middle to its origin. */
static void refer_to_origin(const rg_aspect_bench *bench, double freq_hz, const amplitude *s, double complex s_m[RG_N_POL])
{
    static const int sum_of_pol[RG_N_POL] = {[RG_HH] = HH, [RG_VV] = VV, [RG_HV] = HV, [RG_VH] = HV};
    double c, d;
    rg_cis_pi(4.0 * freq_hz / LIGHT_SPEED_M_PER_S * vec3_dot(bench->seen.view.s, vec3_from(bench->scene->mesh->origin_m)), &c, &d);
    for (int pol = 0; pol < RG_N_POL; pol++) {
        const double re = s->at[sum_of_pol[pol]][0], im = s->at[sum_of_pol[pol]][1];
        s_m[pol] = CMPLX(re * c - im * d, re * d + im * c);
    }
}

/* Ends a part: its sum goes to its slot and to the total. */
static void close_part(rg_aspect_bench *bench, size_t part, double complex part_m[][RG_N_POL])
{
    for (size_t f = 0; f < bench->job.n_freq; f++) {
        const amplitude s = amplitude_of(&bench->part[f]);
        if (part_m) refer_to_origin(bench, bench->job.freq_hz[f], &s, part_m[part * bench->job.n_freq + f]);
        add_amplitude(&bench->total[f], &s);
    }
    memset(bench->part, 0, bench->job.n_freq * sizeof *bench->part);
}

rg_status rg_aspect_run(rg_aspect_bench *bench, const rg_view *view, double complex s_m[][RG_N_POL],
                        double complex part_m[][RG_N_POL], const volatile sig_atomic_t *stop, rg_error *err)
{
    const rg_scene *scene = bench->scene;
    const size_t n_freq = bench->job.n_freq;
    rg_status status = RG_OK;
    rg_seen_turn(&bench->seen, scene->mesh, view);
    if (bench->cover) rg_cover_draw(bench->cover, scene->mesh, &bench->seen);
    memset(bench->part, 0, n_freq * sizeof *bench->part);
    memset(bench->total, 0, n_freq * sizeof *bench->total);
    for (size_t first = 0; first < scene->n_blocks && !status; first += GROUP) {
        const size_t n = scene->n_blocks - first < GROUP ? scene->n_blocks - first : GROUP;
        status = sum_group(bench, first, n, stop, err);
        for (size_t b = 0; b < n && !status; b++) {
            const size_t part = scene->block[first + b].part;
            for (size_t f = 0; f < n_freq; f++) add_amplitude(&bench->part[f], &bench->group[b * n_freq + f]);
            if (first + b + 1 == scene->n_blocks || scene->block[first + b + 1].part != part) close_part(bench, part, part_m);
        }
    }
    for (size_t f = 0; f < n_freq && !status; f++) {
        const amplitude s = amplitude_of(&bench->total[f]);
        refer_to_origin(bench, bench->job.freq_hz[f], &s, s_m[f]);
    }
    return status;
}

double rg_aspect_undecided_m2(rg_aspect_bench *bench)
{
    double sum_m2 = 0.0;
    for (int t = 0; t < bench->n_threads; t++) sum_m2 += rg_lit_take_undecided_m2(bench->workers[t].lit_scratch);
    return sum_m2;
}

rg_status rg_surface(const rg_scene *scene, rg_aspect aspect, size_t n_freq, const double freq_hz[],
                     double complex s_m[][RG_N_POL], rg_error *err)
{
    const rg_aspect_job job = {.mechanisms = RG_SURFACE, .n_bounces = 2, .n_freq = n_freq, .freq_hz = freq_hz};
    rg_aspect_bench *bench = NULL;
    double complex(*result_m)[RG_N_POL] = NULL;
    if (!isfinite(aspect.az_rad) || !isfinite(aspect.el_rad))
        return rg_fail(err, RG_BAD_VALUE, "an aspect of %g, %g rad: both angles must be finite", aspect.az_rad, aspect.el_rad);
    const rg_view view = rg_view_of(aspect);
    rg_status status = rg_aspect_job_check(&job, err);
    if (!status && !(result_m = malloc(n_freq * sizeof *result_m)))
        status = rg_fail(err, RG_NO_MEMORY, "no memory for %zu frequencies", n_freq);
    if (!status) status = rg_aspect_bench_new(&bench, scene, &job, 1, err);
    if (!status) status = rg_aspect_run(bench, &view, result_m, NULL, NULL, err);
    if (!status) memcpy(s_m, result_m, n_freq * sizeof *result_m);
    rg_aspect_bench_free(bench);
    free(result_m);
    return status;
}
