/* quantity.h - a number with its unit, from text */
#ifndef RG_BASE_QUANTITY_H
#define RG_BASE_QUANTITY_H
#include <roadglint/status.h>

typedef enum { RG_NUMBER, RG_LENGTH, RG_FREQUENCY, RG_ANGLE, RG_LEVEL } rg_dimension;

/* Reads all of text. Lengths: m, cm, mm, um, km, in, ft (to metres); frequencies: Hz, kHz, MHz, GHz, THz (to hertz); angles: deg, rad
 * (to degrees); levels: dB, dBsm (as they are). A bare number is SI, an angle degrees. '.' is the decimal point in every locale.
 * RG_BAD_VALUE: the text says what would be right. *value is finite on success. */
rg_status rg_take_quantity(double *value, rg_dimension dimension, const char *text, rg_error *err);

/* Its two steps, for a list whose last number may lend its unit: the number with the text of its unit (empty if it has none), and the
 * unit, if any, put to a number; text is for the message. */
rg_status rg_split_quantity(double *number, const char **unit_name, rg_dimension dimension, const char *text, rg_error *err);
rg_status rg_apply_unit(double *value, rg_dimension dimension, const char *unit_name, const char *text, rg_error *err);

#endif
