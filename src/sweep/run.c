/* run.c - many aspects on all cores, handed over in the order of the table */
#include <roadglint/sweep.h>
#include "scatter/aspect.h"
#include <math.h>
#include <omp.h>
#include <stdlib.h>

/* Aspects that are worked on between two hand-overs, per thread: many, so that threads seldom wait for the slowest. */
enum { BATCH_PER_THREAD = 16 };

typedef struct {
    const rg_scene *scene;
    const rg_sweep_plan *plan;
    rg_aspect_job job;
    const volatile sig_atomic_t *stop;
    size_t n_slots;                         /* amplitudes of an aspect, each n_freq long */
    int n_benches;                          /* aspects at a time; where they are few, the threads share one instead */
    rg_aspect_bench **bench;
    size_t batch;
    double complex (*s_m)[RG_N_POL];        /* [batch][n_slots][n_freq] */
    double *undecided_m2;                   /* [batch] */
} sweep_work;

static rg_status check_angles(const char *name, size_t n, const double deg[], rg_error *err)
{
    if (n == 0) return rg_fail(err, RG_BAD_VALUE, "no %s: give at least one, in degrees", name);
    for (size_t i = 0; i < n; i++)
        if (!isfinite(deg[i]) || fabs(deg[i]) > 1e6)
            return rg_fail(err, RG_BAD_VALUE, "an %s of %g degrees: it must lie within a million degrees", name, deg[i]);
    return RG_OK;
}

static rg_status start_work(sweep_work *work, rg_error *err)
{
    const rg_sweep_plan *plan = work->plan;
    const size_t n_aspects = plan->n_el * plan->n_az;
    const int n_threads = plan->n_threads > 0 ? plan->n_threads : omp_get_num_procs();
    const bool share_aspect = n_aspects < 2 * (size_t)n_threads;
    work->n_slots = 1 + (plan->parts ? rg_mesh_n_parts(rg_scene_mesh(work->scene)) : 0);
    work->n_benches = share_aspect ? 1 : n_threads;
    work->batch = share_aspect ? 1 : BATCH_PER_THREAD * (size_t)n_threads;
    work->bench = calloc((size_t)work->n_benches, sizeof(rg_aspect_bench *));
    work->s_m = calloc(work->batch * work->n_slots * plan->n_freq, sizeof *work->s_m);
    work->undecided_m2 = calloc(work->batch, sizeof *work->undecided_m2);
    if (!work->bench || !work->s_m || !work->undecided_m2)
        return rg_fail(err, RG_NO_MEMORY, "no memory for %zu aspects at a time of %zu frequencies and %zu parts", work->batch,
                       plan->n_freq, work->n_slots);
    rg_status status = RG_OK;
    for (int t = 0; t < work->n_benches && !status; t++)
        status = rg_aspect_bench_new(&work->bench[t], work->scene, &work->job, share_aspect ? n_threads : 1, err);
    return status;
}

static void end_work(sweep_work *work)
{
    for (int t = 0; t < work->n_benches && work->bench; t++) rg_aspect_bench_free(work->bench[t]);
    free(work->bench);
    free(work->s_m);
    free(work->undecided_m2);
}

static double complex (*slots_of(const sweep_work *work, size_t in_batch))[RG_N_POL]
{
    return work->s_m + in_batch * work->n_slots * work->plan->n_freq;
}

static rg_status run_batch(sweep_work *work, size_t first, size_t n, rg_error *err)
{
    const rg_sweep_plan *plan = work->plan;
    rg_status first_status = RG_OK;
#pragma omp parallel for schedule(dynamic) num_threads(work->n_benches) if (work->n_benches > 1)
    for (size_t i = 0; i < n; i++) {
        rg_error mine = {{0}};
        const size_t aspect = first + i;
        const rg_view view = rg_view_of_deg(plan->az_deg[aspect % plan->n_az], plan->el_deg[aspect / plan->n_az]);
        double complex(*s_m)[RG_N_POL] = slots_of(work, i);
        rg_aspect_bench *bench = work->bench[work->n_benches > 1 ? omp_get_thread_num() : 0];
        const rg_status status = rg_aspect_run(bench, &view, s_m, plan->parts ? s_m + plan->n_freq : NULL, work->stop, &mine);
        work->undecided_m2[i] = rg_aspect_undecided_m2(bench);
        if (status) {
#pragma omp critical
            first_status = rg_fail(err, status, "%s", mine.text);
        }
    }
    return first_status;
}

rg_status rg_sweep(const rg_scene *scene, const rg_sweep_plan *plan, rg_sweep_sink *sink, void *user,
                   const volatile sig_atomic_t *stop, rg_error *err)
{
    sweep_work work = {.scene = scene, .plan = plan, .stop = stop,
                       .job = {.mechanisms = plan->mechanisms ? plan->mechanisms : RG_SURFACE,
                               .n_bounces = plan->n_bounces ? plan->n_bounces : 4, .n_freq = plan->n_freq, .freq_hz = plan->freq_hz}};
    rg_status status = check_angles("elevation", plan->n_el, plan->el_deg, err);
    if (!status) status = check_angles("azimuth", plan->n_az, plan->az_deg, err);
    if (!status) status = rg_aspect_job_check(&work.job, err);
    if (!status) status = start_work(&work, err);
    const size_t n_aspects = plan->n_el * plan->n_az;
    for (size_t first = 0; first < n_aspects && !status; first += work.batch) {
        const size_t n = n_aspects - first < work.batch ? n_aspects - first : work.batch;
        status = run_batch(&work, first, n, err);
        for (size_t i = 0; i < n && !status; i++) {
            const rg_sweep_aspect done = {.az_deg = plan->az_deg[(first + i) % plan->n_az],
                                          .el_deg = plan->el_deg[(first + i) / plan->n_az],
                                          .n_slots = work.n_slots, .n_freq = plan->n_freq,
                                          .s_m = (const double complex(*)[RG_N_POL])slots_of(&work, i),
                                          .undecided_m2 = work.undecided_m2[i]};
            status = sink(user, &done, err);
        }
    }
    end_work(&work);
    return status;
}
