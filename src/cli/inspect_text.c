/* inspect_text.c - lengths and frequencies in the words of a report */
#include "cli/inspect_text.h"
#include <math.h>
#include <stddef.h>
#include <stdio.h>

typedef struct { double least, factor; const char *unit; } scale;

/* In the unit that suits `like`. */
static const char *in_words(rg_words *words, double value, double like, const scale scales[], size_t n)
{
    size_t i = 0;
    while (i + 1 < n && fabs(like) < 0.99995 * scales[i].least) i++;
    snprintf(words->text, sizeof words->text, "%.4g %s", value * scales[i].factor + 0.0, scales[i].unit);
    return words->text;
}

const char *rg_length_words_like(rg_words *words, double length_m, double like_m)
{
    static const scale scales[] = {{1e4, 1e-3, "km"}, {1.0, 1.0, "m"}, {1e-5, 1e3, "mm"}, {0.0, 1e6, "um"}};
    return like_m == 0.0 ? in_words(words, length_m, 1.0, scales, 4) : in_words(words, length_m, like_m, scales, 4);
}

const char *rg_length_words(rg_words *words, double length_m) { return rg_length_words_like(words, length_m, length_m); }

const char *rg_frequency_words(rg_words *words, double freq_hz)
{
    static const scale scales[] = {{1e12, 1e-12, "THz"}, {1e9, 1e-9, "GHz"}, {1e6, 1e-6, "MHz"}, {1e3, 1e-3, "kHz"}, {0.0, 1.0, "Hz"}};
    return in_words(words, freq_hz, freq_hz, scales, 5);
}
