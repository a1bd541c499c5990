/* vertex_text.c - a vertex from a text format */
#include "mesh/vertex_text.h"
#include <math.h>

rg_status rg_take_vertex(rg_soup *soup, rg_text *text, rg_next_word *next_word, double *largest, rg_error *err)
{
    double v[3];
    char shown[48];
    for (int i = 0; i < 3; i++) {
        const rg_word word = next_word(text);
        const rg_number_kind kind = rg_number_of(&v[i], word);
        if (kind == RG_NO_NUMBER)
            return rg_fail(err, RG_BAD_INPUT, "line %zu: a vertex is three numbers, not \"%s\"", text->line, rg_shown(shown, word));
        if (kind == RG_NOT_FINITE)
            return rg_fail(err, RG_BAD_INPUT, "line %zu: coordinate \"%s\" is not finite", text->line, rg_shown(shown, word));
        *largest = fmax(*largest, fabs(v[i]));
    }
    return rg_soup_vertex(soup, v[0], v[1], v[2], err);
}
