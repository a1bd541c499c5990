/* quantity.c - a number with its unit, from text */
#include "base/quantity.h"
#include "base/number.h"
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

typedef struct { rg_dimension dimension; const char *name; double factor; } unit;

static const unit units[] = {
    {RG_LENGTH, "m", 1.0}, {RG_LENGTH, "cm", 1e-2}, {RG_LENGTH, "mm", 1e-3}, {RG_LENGTH, "um", 1e-6}, {RG_LENGTH, "km", 1e3},
    {RG_LENGTH, "in", 0.0254}, {RG_LENGTH, "ft", 0.3048},
    {RG_FREQUENCY, "Hz", 1.0}, {RG_FREQUENCY, "kHz", 1e3}, {RG_FREQUENCY, "MHz", 1e6}, {RG_FREQUENCY, "GHz", 1e9}, {RG_FREQUENCY, "THz", 1e12},
    {RG_ANGLE, "deg", 1.0}, {RG_ANGLE, "rad", 57.295779513082320877},
    {RG_LEVEL, "dB", 1.0}, {RG_LEVEL, "dBsm", 1.0},
};

static const char *const what[] = {[RG_NUMBER] = "a number such as 12.5", [RG_LENGTH] = "a length such as 120mm or 0.5m",
                                   [RG_FREQUENCY] = "a frequency such as 77GHz or 76.5e9Hz", [RG_ANGLE] = "an angle such as 30 or 30deg",
                                   [RG_LEVEL] = "a level such as -10dB"};
static const char *const names[] = {[RG_NUMBER] = "no unit", [RG_LENGTH] = "m, cm, mm, um, km, in or ft",
                                    [RG_FREQUENCY] = "Hz, kHz, MHz, GHz or THz", [RG_ANGLE] = "deg or rad", [RG_LEVEL] = "dB or dBsm"};

/* Lengths and frequencies differ by their case only where it means nothing (77ghz); m and M are never both units of one dimension. */
static const unit *find_unit(rg_dimension dimension, const char *name)
{
    for (size_t i = 0; i < sizeof units / sizeof units[0]; i++)
        if (units[i].dimension == dimension && strcasecmp(units[i].name, name) == 0) return &units[i];
    return NULL;
}

rg_status rg_split_quantity(double *number, const char **unit_name, rg_dimension dimension, const char *text, rg_error *err)
{
    const size_t n = rg_take_number(number, text);
    if (n == 0) return rg_fail(err, RG_BAD_VALUE, "'%s' is not %s", text, what[dimension]);
    if (!isfinite(*number)) return rg_fail(err, RG_BAD_VALUE, "%s is too large a number", text);
    *unit_name = text + n;
    while (**unit_name == ' ') (*unit_name)++;
    return RG_OK;
}

/* A decimal times a power of ten is a decimal, and 9mm the double nearest to 0.009: the product of doubles misses it by an ulp in one
 * case of seven. Fifteen digits are what every decimal keeps. */
static double nearest_decimal(double v)
{
    char text[32];
    snprintf(text, sizeof text, "%.15g", v);
    return strtod(text, NULL);
}

rg_status rg_apply_unit(double *value, rg_dimension dimension, const char *unit_name, const char *text, rg_error *err)
{
    if (!*unit_name) return RG_OK;
    const unit *u = find_unit(dimension, unit_name);
    if (!u) return rg_fail(err, RG_BAD_VALUE, "%s: '%s' is no unit here; it takes %s", text, unit_name, names[dimension]);
    if (u->factor == 1.0) return RG_OK;
    const double si = nearest_decimal(*value * u->factor);
    if (!isfinite(si)) return rg_fail(err, RG_BAD_VALUE, "%s is too large", text);
    *value = si;
    return RG_OK;
}

rg_status rg_take_quantity(double *value, rg_dimension dimension, const char *text, rg_error *err)
{
    double number = 0.0;
    const char *unit_name = "";
    rg_status status = rg_split_quantity(&number, &unit_name, dimension, text, err);
    if (!status) status = rg_apply_unit(&number, dimension, unit_name, text, err);
    if (!status) *value = number;
    return status;
}
