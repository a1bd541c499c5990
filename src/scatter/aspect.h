/* aspect.h - all mechanisms of one aspect, as a sweep runs them */
#ifndef RG_SCATTER_ASPECT_H
#define RG_SCATTER_ASPECT_H
#include "scatter/direction.h"
#include "scatter/scene.h"
#include <roadglint/scatter.h>
#include <signal.h>

/* What to compute at each aspect. */
typedef struct {
    unsigned mechanisms;            /* RG_SURFACE | RG_EDGE | RG_BOUNCE */
    int n_bounces;
    size_t n_freq;
    const double *freq_hz;          /* lent */
} rg_aspect_job;

/* RG_BAD_VALUE unless all frequencies are finite and positive, and mechanisms and bounces are such. */
rg_status rg_aspect_job_check(const rg_aspect_job *job, rg_error *err);

/* What one aspect at a time needs: its vertices as seen, sums, and working memory for each thread that works on it. */
typedef struct rg_aspect_bench rg_aspect_bench;

rg_status rg_aspect_bench_new(rg_aspect_bench **out, const rg_scene *scene, const rg_aspect_job *job, int n_threads, rg_error *err);
void rg_aspect_bench_free(rg_aspect_bench *bench);     /* takes NULL */

/* After rg_aspect_run: area that the cutting of shadows left undecided, see rg_lit_take_undecided_m2; its last bits may follow the
 * number of threads. */
double rg_aspect_undecided_m2(rg_aspect_bench *bench);

/* The amplitudes of one aspect; the threads of the bench share its blocks, and the result does not depend on how many they are.
 *
 *    s_m[n_freq][RG_N_POL]               out: the whole mesh
 *    part_m[n_parts][n_freq][RG_N_POL]   out: each part alone; NULL: not wanted
 *    stop                                may be NULL
 *
 * RG_NO_MEMORY, RG_STOPPED. Afterwards, but for RG_OK, the amplitudes have no meaning. */
rg_status rg_aspect_run(rg_aspect_bench *bench, const rg_view *view, double complex s_m[][RG_N_POL],
                        double complex part_m[][RG_N_POL], const volatile sig_atomic_t *stop, rg_error *err);

#endif
