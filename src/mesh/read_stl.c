/* read_stl.c - STL, binary and text; several solids are several parts */
#include "base/vec3.h"
#include "mesh/bytes.h"
#include "mesh/readers.h"
#include "mesh/vertex_text.h"
#include <stdlib.h>
#include <string.h>
#include <strings.h>

enum { HEAD = 84, RECORD = 50, NORMAL = 12 };     /* bytes; a record is normal, three corners and two bytes of no fixed meaning */

static bool size_fits(const rg_file *file)
{
    return file->n >= HEAD && file->n == HEAD + RECORD * rg_bytes_whole(file->text + HEAD - 4, 4, false);
}

/* Binary files begin with "solid" now and then, so the word alone says nothing. */
static bool is_text(const rg_file *file)
{
    const char *s = file->text, *end = s + file->n;
    while (s < end && (*s == ' ' || *s == '\t' || *s == '\r' || *s == '\n')) s++;
    const size_t n = end - s < 512 ? (size_t)(end - s) : 512;
    return n >= 5 && strncasecmp(s, "solid", 5) == 0 && memchr(s, 0, n) == NULL;
}

bool rg_is_stl(const rg_file *file)
{
    if (size_fits(file)) return true;
    if (!is_text(file)) return false;
    rg_text text = {file->text, file->text + file->n, 1};
    rg_next_line(&text);
    const rg_word word = rg_word_anywhere(&text);
    return rg_word_is_caseless(word, "facet") || rg_word_is_caseless(word, "endsolid");
}

static rg_status read_binary(rg_soup *soup, const rg_file *file, rg_error *err)
{
    if (file->n < HEAD) return rg_fail(err, RG_BAD_INPUT, "an STL file has %d bytes or more, this one %zu: it is cut short", HEAD, file->n);
    const size_t n = rg_bytes_whole(file->text + HEAD - 4, 4, false);
    if (!size_fits(file))
        return rg_fail(err, RG_BAD_INPUT, "its head counts %zu facets, which take %zu bytes, but the file has %zu: it is damaged or no "
                       "STL", n, HEAD + RECORD * n, file->n);
    uint32_t part;
    float largest = 0.0f;
    rg_status status = 3 * n > RG_VERTICES_MAX ? rg_fail(err, RG_BAD_INPUT, "%zu facets are too many: at most %zu", n, RG_VERTICES_MAX / 3) :
        rg_soup_reserve(soup, 3 * n, n, err);
    if (!status) status = rg_soup_part(soup, &part, "", 0, err);
    for (size_t f = 0; f < n && !status; f++) {
        const char *at = file->text + HEAD + RECORD * f + NORMAL;
        const uint32_t first = (uint32_t)soup->n_vertices;
        for (int i = 0; i < 3; i++, at += 12) {
            const float x = rg_bytes_single(at, false), y = rg_bytes_single(at + 4, false), z = rg_bytes_single(at + 8, false);
            largest = fmaxf(largest, fmaxf(fabsf(x), fmaxf(fabsf(y), fabsf(z))));
            status = rg_soup_vertex(soup, x, y, z, err);
        }
        if (!status) status = rg_soup_facet(soup, first, first + 1, first + 2, part, err);
    }
    rg_soup_note_step(soup, largest, true);
    return status;
}

/* The loop's corners are the vertices from first on. */
static rg_status end_loop(rg_soup *soup, size_t first, uint32_t part, rg_error *err)
{
    const size_t n = soup->n_vertices - first;
    if (n == 3) return rg_soup_facet(soup, (uint32_t)first, (uint32_t)first + 1, (uint32_t)first + 2, part, err);
    uint32_t *corner = malloc((n + 1) * sizeof *corner);
    if (!corner) return rg_fail(err, RG_NO_MEMORY, "no memory for a loop of %zu corners", n);
    for (size_t i = 0; i < n; i++) corner[i] = (uint32_t)(first + i);
    const rg_status status = rg_soup_face(soup, n, corner, part, err);
    free(corner);
    return status;
}

static rg_status read_text(rg_soup *soup, const rg_file *file, rg_error *err)
{
    enum { OUTSIDE, IN_SOLID, IN_FACET, IN_LOOP } state = OUTSIDE;
    rg_text text = {file->text, file->text + file->n, 1};
    rg_status status = RG_OK;
    double largest = 0.0;
    size_t first = 0;
    uint32_t part = 0;
    for (rg_word word = rg_word_anywhere(&text); word.n && !status; word = status ? word : rg_word_anywhere(&text)) {
        char shown[48];
        if (state <= IN_SOLID && rg_word_is_caseless(word, "solid")) {
            const rg_word name = rg_rest_of_line(&text);
            status = rg_soup_part(soup, &part, name.at, name.n, err);
            state = IN_SOLID;
        } else if (state == IN_SOLID && rg_word_is_caseless(word, "endsolid")) {
            rg_next_line(&text);
            state = OUTSIDE;
        } else if (state == IN_SOLID && rg_word_is_caseless(word, "facet")) {
            rg_next_line(&text);        /* the normal follows from the corners, and files get it wrong */
            state = IN_FACET;
        } else if (state == IN_FACET && rg_word_is_caseless(word, "outer")) {
            rg_next_line(&text);
            first = soup->n_vertices;
            state = IN_LOOP;
        } else if (state == IN_LOOP && rg_word_is_caseless(word, "vertex")) {
            status = rg_take_vertex(soup, &text, rg_word_anywhere, &largest, err);
        } else if (state == IN_LOOP && rg_word_is_caseless(word, "endloop")) {
            status = end_loop(soup, first, part, err);
            state = IN_FACET;
        } else if (state == IN_FACET && rg_word_is_caseless(word, "endfacet")) {
            state = IN_SOLID;
        } else {
            static const char *const wanted[] = {"solid", "facet or endsolid", "outer loop or endfacet", "vertex or endloop"};
            status = rg_fail(err, RG_BAD_INPUT, "line %zu: %s should stand here, not \"%s\"", text.line, wanted[state],
                             rg_shown(shown, word));
        }
    }
    rg_soup_note_step(soup, largest, false);
    if (!status && state != OUTSIDE) status = rg_fail(err, RG_BAD_INPUT, "line %zu: the file ends before endsolid: it is cut short", text.line);
    return status;
}

rg_status rg_read_stl(rg_soup *soup, const rg_file *file, rg_error *err)
{
    return !size_fits(file) && is_text(file) ? read_text(soup, file, err) : read_binary(soup, file, err);
}
