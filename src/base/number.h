/* number.h - a plain number from text, the same in every locale */
#ifndef RG_BASE_NUMBER_H
#define RG_BASE_NUMBER_H
#include <stddef.h>

/* Reads the longest decimal number at the start of text: sign, digits with at most one '.', exponent (which has digits, or is not one:
 * "1e" is 1 and an e). Not hexadecimal, not "inf" or "nan". Returns how many characters it took; 0: none. */
size_t rg_take_number(double *value, const char *text);

#endif
