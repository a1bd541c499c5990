/* decimal.h - numbers as text in a table: exact, quick, and the same in every locale */
#ifndef RG_TABLE_DECIMAL_H
#define RG_TABLE_DECIMAL_H
#include <stdbool.h>

/* All write at out, with no zero byte after it, and return the end: at most RG_DECIMAL_ROOM characters. Zero has no sign. */
enum { RG_DECIMAL_ROOM = 40 };
char *rg_put_level(char *out, double v);        /* as "%.7f"; |v| < 1e9 */
char *rg_put_amplitude(char *out, double v);    /* as "%.12e" */
/* The shortest decimal that reads back as the same double; whole numbers under 1e15 without an exponent. */
char *rg_put_shortest(char *out, double v);

/* All of text as a number, "-12.5" or "1.5e-3"; false where rg_take_number of base/number.h must be asked instead: more than 19 digits, or
 * so many or such an exponent that the double is not simply one rounding away. */
bool rg_get_decimal(double *v, const char *text);

#endif
