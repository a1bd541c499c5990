/* level.c - an amplitude's level in decibels */
#include "base/level.h"
#include "base/elementary.h"

double rg_level_db(double complex s)
{
    const double power = creal(s) * creal(s) + cimag(s) * cimag(s);
    if (!(power > 1e-20)) return RG_LEVEL_FLOOR_DB;
    return 10.0 * rg_log10(power);
}
