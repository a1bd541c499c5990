/* number.c - a plain number from text, the same in every locale */
#include "base/number.h"
#include <ctype.h>
#include <locale.h>
#include <stdlib.h>
#include <string.h>

static size_t digits(const char *text)
{
    size_t n = 0;
    while (isdigit((unsigned char)text[n])) n++;
    return n;
}

size_t rg_take_number(double *value, const char *text)
{
    size_t n = text[0] == '+' || text[0] == '-';
    const size_t whole = digits(text + n);
    n += whole;
    size_t fraction = 0;
    if (text[n] == '.') {
        fraction = digits(text + n + 1);
        if (whole + fraction > 0) n += 1 + fraction;
    }
    if (whole + fraction == 0) return 0;
    if (text[n] == 'e' || text[n] == 'E') {
        const size_t sign = text[n + 1] == '+' || text[n + 1] == '-', exponent = digits(text + n + 1 + sign);
        if (exponent > 0) n += 1 + sign + exponent;
    }
    char copy[64], *longer = n < sizeof copy ? NULL : malloc(n + 1), *word = longer ? longer : copy;
    if (n >= sizeof copy && !longer) return 0;
    memcpy(word, text, n);
    word[n] = 0;
    locale_t plain = newlocale(LC_NUMERIC_MASK, "C", (locale_t)0);
    *value = plain ? strtod_l(word, NULL, plain) : strtod(word, NULL);
    if (plain) freelocale(plain);
    free(longer);
    return n;
}
