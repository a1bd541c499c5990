/* text.c - words and numbers in text files */
#include "mesh/text.h"
#include <locale.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

static bool blank(char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\v' || c == '\f'; }

rg_word rg_word_in_line(rg_text *text)
{
    const char *at = text->at, *end = text->end;
    while (at < end && blank(*at)) at++;
    const char *start = at;
    while (at < end && !blank(*at) && *at != '\n') at++;
    text->at = at;
    return (rg_word){start, (size_t)(at - start)};
}

rg_word rg_word_anywhere(rg_text *text)
{
    rg_word word = rg_word_in_line(text);
    while (word.n == 0 && text->at < text->end) {
        rg_next_line(text);
        word = rg_word_in_line(text);
    }
    return word;
}

void rg_next_line(rg_text *text)
{
    const char *newline = text->at < text->end ? memchr(text->at, '\n', (size_t)(text->end - text->at)) : NULL;
    text->at = newline ? newline + 1 : text->end;
    text->line += newline != NULL;
}

rg_word rg_rest_of_line(rg_text *text)
{
    const char *start = text->at;
    const char *newline = start < text->end ? memchr(start, '\n', (size_t)(text->end - start)) : NULL;
    const char *end = newline ? newline : text->end;
    text->at = newline ? newline + 1 : text->end;
    text->line += newline != NULL;
    while (start < end && blank(*start)) start++;
    while (start < end && blank(end[-1])) end--;
    return (rg_word){start, (size_t)(end - start)};
}

bool rg_word_is(rg_word word, const char *want) { return strlen(want) == word.n && memcmp(word.at, want, word.n) == 0; }
bool rg_word_is_caseless(rg_word word, const char *want) { return strlen(want) == word.n && strncasecmp(word.at, want, word.n) == 0; }

static bool digit(char c) { return c >= '0' && c <= '9'; }

/* strtod of a word that is known to be a decimal number. Only the point depends on the locale, so a copy gets the locale's own. */
static double slow_number(rg_word word)
{
    char brief[512], *copy = word.n < sizeof brief / 2 ? brief : malloc(2 * word.n + 16);
    const char *point = localeconv()->decimal_point;
    if (!copy) return NAN;
    char *to = copy;
    for (size_t i = 0; i < word.n; i++) {
        if (word.at[i] != '.') *to++ = word.at[i];
        else to = stpncpy(to, point, 8);
    }
    *to = 0;
    const double value = strtod(copy, NULL);
    if (copy != brief) free(copy);
    return value;
}

static bool says_not_finite(rg_word word)
{
    if (word.n && (word.at[0] == '-' || word.at[0] == '+')) word.at++, word.n--;
    static const char *const names[] = {"nan", "inf", "infinity", "1.#inf", "1.#ind", "1.#qnan", "nan(ind)"};
    for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
        if (rg_word_is_caseless(word, names[i])) return true;
    return false;
}

/* Digits under 2^53 times or over a power of ten under 10^23 are two exact doubles, and one operation rounds correctly: W. D. Clinger,
 * PLDI 1990. All else goes the slow way. */
rg_number_kind rg_number_of(double *value, rg_word word)
{
    static const double ten[] = {1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18,
                                 1e19, 1e20, 1e21, 1e22};
    const char *s = word.at, *end = word.at + word.n;
    const bool minus = s < end && *s == '-';
    if (s < end && (*s == '-' || *s == '+')) s++;
    uint64_t digits = 0;
    size_t n_seen = 0;
    long power = 0;
    bool point = false, fits = true;
    for (; s < end && (digit(*s) || (*s == '.' && !point)); s++) {
        if (*s == '.') {
            point = true;
            continue;
        }
        n_seen++;
        if (digits < UINT64_MAX / 10 - 1) digits = 10 * digits + (uint64_t)(*s - '0'), power -= point;
        else fits = false;
    }
    if (n_seen == 0) return says_not_finite(word) ? RG_NOT_FINITE : RG_NO_NUMBER;
    if (s < end && (*s == 'e' || *s == 'E')) {
        long exponent = 0;
        const bool down = ++s < end && *s == '-';
        if (s < end && (*s == '-' || *s == '+')) s++;
        if (s == end) return RG_NO_NUMBER;
        for (; s < end && digit(*s); s++) exponent = exponent < 100000 ? 10 * exponent + (*s - '0') : exponent;
        power += down ? -exponent : exponent;
    }
    if (s != end) return says_not_finite(word) ? RG_NOT_FINITE : RG_NO_NUMBER;
    if (fits && digits <= 1ull << 53 && power >= -22 && power <= 22) {
        const double x = power < 0 ? (double)digits / ten[-power] : (double)digits * ten[power];
        *value = minus ? -x : x;
        return RG_A_NUMBER;
    }
    *value = slow_number(word);
    return isfinite(*value) ? RG_A_NUMBER : RG_NOT_FINITE;
}

bool rg_whole_of(int64_t *value, rg_word word)
{
    const char *s = word.at, *end = word.at + word.n;
    const bool minus = s < end && *s == '-';
    if (s < end && (*s == '-' || *s == '+')) s++;
    if (s == end) return false;
    int64_t n = 0;
    for (; s < end; s++) {
        if (!digit(*s) || n > (INT64_MAX - 9) / 10) return false;
        n = 10 * n + (*s - '0');
    }
    *value = minus ? -n : n;
    return true;
}

const char *rg_shown(char out[48], rg_word word)
{
    size_t n = 0;
    for (; n < word.n && n < 40; n++) out[n] = word.at[n] > 0x20 && word.at[n] < 0x7f ? word.at[n] : '?';
    if (word.n > 40) memcpy(out + n, "...", 3), n += 3;
    out[n] = 0;
    return out;
}
