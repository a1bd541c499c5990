/* sum.h - sums whose order is part of the result */
#ifndef RG_BASE_SUM_H
#define RG_BASE_SUM_H
#include <math.h>

enum { RG_LANES = 8 };   /* part of the result: it fixes the order of every sum, on every machine */

/* Lane 0 with 4, 1 with 5 ...; then 0 with 2, 1 with 3; then 0 with 1: as a register folds in halves. */
static inline double fold_lanes(const double lane[RG_LANES])
{
    return ((lane[0] + lane[4]) + (lane[2] + lane[6])) + ((lane[1] + lane[5]) + (lane[3] + lane[7]));
}

/* A running sum that keeps what rounding drops: A. Neumaier, ZAMM 54, 1974. */
typedef struct { double sum, rest; } rg_sum;

static inline void rg_sum_add(rg_sum *s, double x)
{
    const double t = s->sum + x;
    s->rest += fabs(s->sum) >= fabs(x) ? (s->sum - t) + x : (x - t) + s->sum;
    s->sum = t;
}

static inline double rg_sum_value(const rg_sum *s) { return s->sum + s->rest; }

#endif
