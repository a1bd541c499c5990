/* surface.h - first-bounce physical optics, as a sweep runs it */
#ifndef RG_SCATTER_SURFACE_H
#define RG_SCATTER_SURFACE_H
#include "scatter/lit.h"
#include <roadglint/scatter.h>
#include <signal.h>

/* What one aspect at a time needs: its vertices as seen, and scratch for each thread that works on it. */
typedef struct rg_surface_bench rg_surface_bench;

rg_status rg_surface_bench_new(rg_surface_bench **out, const rg_scene *scene, int n_threads, rg_error *err);
void rg_surface_bench_free(rg_surface_bench *bench);     /* takes NULL */

/* The amplitudes of one aspect; the threads of the bench share its blocks, and the result does not depend on how many they are.
 *
 *    s_m[n_freq][RG_N_POL]               out: the whole mesh
 *    part_m[n_parts][n_freq][RG_N_POL]   out: each part alone; NULL: not wanted
 *    stop                                may be NULL
 *
 * RG_NO_MEMORY, RG_STOPPED. Afterwards, but for RG_OK, the amplitudes have no meaning. */
rg_status rg_surface_aspect(const rg_scene *scene, rg_surface_bench *bench, const rg_view *view, size_t n_freq,
                            const double freq_hz[], double complex s_m[][RG_N_POL], double complex part_m[][RG_N_POL],
                            const volatile sig_atomic_t *stop, rg_error *err);

/* RG_BAD_VALUE unless all frequencies are finite and positive. */
rg_status rg_check_frequencies(size_t n_freq, const double freq_hz[], rg_error *err);

#endif
