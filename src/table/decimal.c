/* decimal.c - numbers as text in a table: exact, quick, and the same in every locale */
#include "table/decimal.h"
#include <locale.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

__extension__ typedef unsigned __int128 uint128;

enum { MOST_FIVES = 27 };
static const uint64_t five_to[MOST_FIVES + 1] = {
    1u, 5u, 25u, 125u, 625u, 3125u, 15625u,
    78125u, 390625u, 1953125u, 9765625u, 48828125u, 244140625u, 1220703125u,
    6103515625u, 30517578125u, 152587890625u, 762939453125u, 3814697265625u, 19073486328125u, 95367431640625u,
    476837158203125u, 2384185791015625u, 11920928955078125u, 59604644775390625u, 298023223876953125u, 1490116119384765625u, 7450580596923828125u};
static const double ten_to[] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,  1e8,  1e9,  1e10, 1e11,
                                1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};    /* exact, all of them */
enum { MOST_TENS = 22 };

/* |v| = m 2^e, m under 2^53 */
static uint64_t take_apart(double v, int *e)
{
    uint64_t bits;
    memcpy(&bits, &v, sizeof bits);
    const int exponent = (int)(bits >> 52 & 0x7ff);
    const uint64_t fraction = bits & 0xfffffffffffffu;
    *e = (exponent ? exponent : 1) - 1075;
    return exponent ? fraction | 0x10000000000000u : fraction;
}

/* |v| 10^q to the nearest whole number, to the even one of two: exact, for it is m 5^q 2^(e + q) and the product has under 2^116. The result
 * must be under 2^64. */
static uint64_t scaled(double v, int q)
{
    int e;
    const uint128 product = (uint128)take_apart(v, &e) * five_to[q];
    const int shift = -(e + q);
    if (shift <= 0) return (uint64_t)(product << -shift);
    if (shift > 120) return 0;
    const uint128 whole = product >> shift, rest = product - (whole << shift), half = (uint128)1 << (shift - 1);
    return (uint64_t)whole + (rest > half || (rest == half && (whole & 1)));
}

/* digits figures of n, with leading zeros, the last `decimals` of them behind a point */
static char *put_figures(char *out, uint64_t n, int digits, int decimals)
{
    char *end = out + digits + (decimals > 0), *at = end;
    for (int i = 0; i < digits; i++) {
        if (i == decimals && i > 0) *--at = '.';
        *--at = (char)('0' + n % 10);
        n /= 10;
    }
    return end;
}

static char *put_scaled(char *out, bool negative, uint64_t n, int decimals)
{
    int digits = decimals + 1;
    for (uint64_t rest = n / (uint64_t)ten_to[digits]; rest; rest /= 10) digits++;
    if (negative && n) *out++ = '-';
    return put_figures(out, n, digits, decimals);
}

/* By the C library, with a '.' whatever the locale; trips: until it reads back as the same double. */
static char *put_slowly(char *out, char form, int digits, bool trips, double v)
{
    char text[RG_DECIMAL_ROOM + 1];
    const locale_t plain = newlocale(LC_NUMERIC_MASK, "C", (locale_t)0), before = plain ? uselocale(plain) : (locale_t)0;
    do snprintf(text, sizeof text, form == 'e' ? "%.*e" : "%.*g", digits, v);
    while (trips && digits++ < 17 && strtod(text, NULL) != v);
    if (plain) {
        uselocale(before);
        freelocale(plain);
    }
    const size_t n = strlen(text);
    memcpy(out, text, n);
    return out + n;
}

char *rg_put_level(char *out, double v) { return put_scaled(out, v < 0.0, scaled(v, 7), 7); }

char *rg_put_amplitude(char *out, double v)
{
    if (v != 0.0 && !(fabs(v) >= 1e-14 && fabs(v) < 1e12)) return put_slowly(out, 'e', 12, false, v);
    int power = 0;
    uint64_t figures = 0;
    if (v != 0.0) {
        int e;
        take_apart(v, &e);
        power = (int)floor((e + 52) * 0.30102999566398119521);        /* of the power of two below: one too low, or right */
        figures = scaled(v, 12 - power);
        if (figures >= 10000000000000u) figures = scaled(v, 12 - ++power);
    }
    if (v < 0.0) *out++ = '-';
    out = put_figures(out, figures, 13, 12);
    *out++ = 'e';
    *out++ = power < 0 ? '-' : '+';
    return put_figures(out, (uint64_t)abs(power), 2, 0);
}

char *rg_put_shortest(char *out, double v)
{
    /* n/10^d with both exact is rounded once: if it is v, then so is the text "n/10^d" when read. Under 16 figures no other text that
     * short is. */
    const double size = fabs(v);
    for (int d = 0; d <= 12; d++) {
        const double n = rint(size * ten_to[d]);
        if (!(n < 1e15)) break;
        if (n / ten_to[d] == size) return put_scaled(out, v < 0.0, (uint64_t)n, d);
    }
    return put_slowly(out, 'g', 15, true, v);
}

bool rg_get_decimal(double *v, const char *text)
{
    const bool negative = *text == '-';
    if (*text == '-' || *text == '+') text++;
    uint64_t n = 0;
    int digits = 0, decimals = 0, power = 0;
    for (bool behind = false; (*text >= '0' && *text <= '9') || (*text == '.' && !behind); text++) {
        if (*text == '.') {
            behind = true;
            continue;
        }
        n = n * 10 + (uint64_t)(*text - '0');
        decimals += behind;
        if (++digits > 19) return false;
    }
    if (digits == 0) return false;
    if (*text == 'e' || *text == 'E') {
        const bool down = *++text == '-';
        if (*text == '-' || *text == '+') text++;
        int most = 3;
        if (*text < '0' || *text > '9') return false;
        for (; *text >= '0' && *text <= '9' && most-- > 0; text++) power = power * 10 + (*text - '0');
        if (down) power = -power;
    }
    power -= decimals;
    if (*text || n > (uint64_t)1 << 53 || abs(power) > MOST_TENS) return false;
    /* both exact, so that this rounds once: W. D. Clinger, How to read floating point numbers accurately, 1990 */
    const double size = power < 0 ? (double)n / ten_to[-power] : (double)n * ten_to[power];
    *v = negative ? -size : size;
    return true;
}
