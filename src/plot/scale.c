/* scale.c - which levels to show, where the grid stands, and what of a dense curve a step of the picture covers */
#include "plot/plot.h"
#include <math.h>
#include <stdlib.h>

static int by_value(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

void rg_plot_limits(size_t n_curves, const rg_curve curve[], double *low_dbsm, double *high_dbsm)
{
    enum { SAMPLES = 4096 };                                /* enough for a percentile; taken evenly from all */
    double sample[SAMPLES], highest = -INFINITY;
    size_t n = 0, total = 0, seen = 0;
    for (size_t i = 0; i < n_curves; i++) total += curve[i].n;
    const size_t every = total / SAMPLES + 1;
    for (size_t i = 0; i < n_curves; i++)
        for (size_t k = 0; k < curve[i].n; k++) {
            highest = fmax(highest, curve[i].level_dbsm[k]);
            if (seen++ % every == 0 && n < SAMPLES) sample[n++] = curve[i].level_dbsm[k];
        }
    if (n == 0) { highest = 0.0; sample[n++] = 0.0; }
    qsort(sample, n, sizeof sample[0], by_value);
    *high_dbsm = 5.0 * floor(highest / 5.0 + 1.0);
    *low_dbsm = fmax(fmin(10.0 * floor(sample[n / 20] / 10.0), *high_dbsm - 40.0), *high_dbsm - 60.0);
}

size_t rg_plot_ticks(double low, double high, int n, bool angle, double tick[RG_PLOT_MOST_TICKS])
{
    static const double plain[] = {1.0, 2.0, 5.0, 10.0}, degrees[] = {10.0, 15.0, 30.0, 45.0, 90.0, 180.0};
    const double least = (high - low) / n;
    if (!(least > 0.0) || !isfinite(least)) return 0;
    const double power = pow(10.0, floor(log10(least)));
    double step = 0.0;
    for (int i = 0; i < 4 && !(step >= least); i++) step = plain[i] * power;
    for (int i = 0; angle && i < 6 && least > 5.0 && least <= 180.0; i++)
        if ((step = degrees[i]) >= least) break;
    const double slack = 1e-9;                              /* of a step: low and high may be a rounding beside their tick */
    const double first = ceil(low / step - slack), count = floor(high / step + slack) - first + 1.0;
    if (!(count >= 1.0)) return 0;
    const size_t n_ticks = count < RG_PLOT_MOST_TICKS ? (size_t)count : RG_PLOT_MOST_TICKS;
    for (size_t i = 0; i < n_ticks; i++) tick[i] = (first + (double)i) * step + 0.0;
    return n_ticks;
}

static size_t count_turns(const rg_curve *c)
{
    size_t n = 0;
    for (size_t k = 2; k < c->n; k++) n += (c->level_dbsm[k] > c->level_dbsm[k - 1]) != (c->level_dbsm[k - 1] > c->level_dbsm[k - 2]);
    return n;
}

size_t rg_plot_bands(const rg_curve *c, double step, size_t most, rg_band band[])
{
    if (c->n < 2) return 0;
    const double steps = (c->x[c->n - 1] - c->x[0]) / step + 1.0;
    if (!(steps < (double)most) || ((double)count_turns(c) <= steps && (double)c->n <= 16.0 * steps)) return 0;
    size_t n = 0;
    double bin = -1.0;
    for (size_t k = 0; k < c->n; k++) {
        const double level = c->level_dbsm[k], here = floor((c->x[k] - c->x[0]) / step);
        if (n > 0) {
            band[n - 1].low = fmin(band[n - 1].low, level);
            band[n - 1].high = fmax(band[n - 1].high, level);
        }
        if (here != bin) band[n++] = (rg_band){c->x[0] + (here + 0.5) * step, level, level};
        bin = here;
    }
    band[0].x = c->x[0];                                    /* the ends are where the curve's are */
    band[n - 1].x = c->x[c->n - 1];
    return n;
}
