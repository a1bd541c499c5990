/* level.c - an amplitude's level in decibels */
#include "base/level.h"
#include "base/elementary.h"
#include <float.h>
#include <math.h>

double rg_level_db(double complex s)
{
    double re = creal(s), im = cimag(s), offset_db = 0.0;
    if (isnan(re) || isnan(im)) return RG_LEVEL_FLOOR_DB;
    if (fabs(re) > 1e150 || fabs(im) > 1e150) {             /* the square would overflow */
        re = fmin(fmax(re, -DBL_MAX), DBL_MAX) * 0x1p-600;
        im = fmin(fmax(im, -DBL_MAX), DBL_MAX) * 0x1p-600;
        offset_db = 3612.3599479677743426;                  /* 20 log10 2^600 */
    }
    const double power = re * re + im * im;
    if (!(power > 1e-20)) return RG_LEVEL_FLOOR_DB;
    return 10.0 * rg_log10(power) + offset_db;
}
