/* level.h - an amplitude's level in decibels */
#ifndef RG_BASE_LEVEL_H
#define RG_BASE_LEVEL_H
#include <complex.h>

#define RG_LEVEL_FLOOR_DB (-200.0)

/* 20 log10 |s|, and the floor for all that is less, NaN included. Always finite: an infinite part counts as the largest double. */
double rg_level_db(double complex s);

#endif
