/* roadglint/sweep.h - many aspects and frequencies, on all cores, in table order */
#ifndef ROADGLINT_SWEEP_H
#define ROADGLINT_SWEEP_H
#include <roadglint/scatter.h>
#include <signal.h>

/** What to compute: every elevation with every azimuth with every frequency. The arrays are lent for the call. */
typedef struct {
    size_t n_el, n_az, n_freq;      /* each at least 1 */
    const double *el_deg, *az_deg, *freq_hz;
    bool parts;                     /* one amplitude per mesh part beside the total */
    int n_threads;                  /* 0: one per processor */
    unsigned mechanisms;            /* RG_SURFACE | RG_EDGE | RG_BOUNCE; 0: RG_SURFACE */
    int n_bounces;                  /* reflections that RG_BOUNCE follows, 2 .. 16; 0: 4 */
} rg_sweep_plan;

/** All of one aspect. slot 0 is the total; with plan.parts slot 1 + p is part p alone. */
typedef struct {
    double az_deg, el_deg;
    size_t n_slots, n_freq;
    const double complex (*s_m)[RG_N_POL];      /* [n_slots][n_freq], metres */
    double undecided_m2;    /* area of pieces under lambda/8 that were lit or dark as a whole, where occluders crowded; an error of
                             * k/sqrt(pi) times this at the most. 0 almost always: shadows are cut exactly */
} rg_sweep_aspect;

/** Takes the aspects in the order of the table (elevation slowest, then azimuth), never two at a time. Anything but RG_OK ends
 *  the sweep with that status. */
typedef rg_status rg_sweep_sink(void *user, const rg_sweep_aspect *aspect, rg_error *err);

/** Runs the plan. The amplitudes do not depend on the number of threads, to the last bit.
 *
 *    stop   may be NULL; once it is not 0 the sweep ends with RG_STOPPED within a fraction of a second
 *
 *  RG_BAD_VALUE (an empty list, a value that is not finite, a frequency that is not positive, bounces out of range), RG_NO_MEMORY, RG_STOPPED, or what
 *  the sink returned.
 */
RG_API rg_status rg_sweep(const rg_scene *scene, const rg_sweep_plan *plan, rg_sweep_sink *sink, void *user,
                          const volatile sig_atomic_t *stop, rg_error *err);

#endif
