/* read_obj.c - OBJ text: v and f, with o or g and usemtl as names of parts; every other statement is passed over
 *
 * The text is gone through twice, vertices first: faces may then name vertices that follow them.
 */
#include "base/vec3.h"
#include "mesh/readers.h"
#include "mesh/vertex_text.h"
#include <stdlib.h>
#include <string.h>

typedef struct {
    rg_text text;
    int64_t n_before;       /* vertices before this line, for indices that count back */
    rg_word group, material;
    bool renamed;
    uint32_t part;
    uint32_t *corner;
    size_t n_corners, corners_held;
} obj;

static bool at_line_end(const rg_text *text)
{
    const char *s = text->at;
    while (s < text->end && (*s == ' ' || *s == '\t' || *s == '\r')) s++;
    return s == text->end || *s == '\n';
}

/* The next word of a statement, which goes on in the next line after a backslash. */
static rg_word next_word(rg_text *text)
{
    for (;;) {
        rg_word word = rg_word_in_line(text);
        if (word.n == 0 || word.at[word.n - 1] != '\\' || !at_line_end(text)) return word;
        rg_next_line(text);
        if (--word.n) return word;
    }
}

static void skip_statement(rg_text *text)
{
    for (;;) {
        const rg_word line = rg_rest_of_line(text);
        if (line.n == 0 || line.at[line.n - 1] != '\\') return;
    }
}

static rg_status take_vertices(rg_soup *soup, rg_text text, rg_error *err)
{
    double largest = 0.0;
    rg_status status = RG_OK;
    while (text.at < text.end && !status) {
        const rg_word word = rg_word_in_line(&text);
        if (rg_word_is(word, "v")) status = rg_take_vertex(soup, &text, next_word, &largest, err);
        if (word.n && word.at[0] == '#') rg_next_line(&text);
        else skip_statement(&text);
    }
    rg_soup_note_step(soup, largest, false);
    return status;
}

/* "7", "7/2", "7//3", "7/2/3" or "-1": the index before the first slash, from 0 in *corner. */
static rg_status take_corner(uint32_t *corner, const obj *o, size_t n_vertices, rg_word word, rg_error *err)
{
    char shown[48];
    int64_t index;
    rg_word first = word;
    const char *slash = memchr(word.at, '/', word.n);
    if (slash) first.n = (size_t)(slash - word.at);
    if (!rg_whole_of(&index, first) || strspn(word.at, "+-/0123456789") < word.n)
        return rg_fail(err, RG_BAD_INPUT, "line %zu: a face's corner is an index such as 7, 7/2, 7//3 or -1, not \"%s\"", o->text.line,
                       rg_shown(shown, word));
    const int64_t at = index < 0 ? o->n_before + index : index - 1;
    if (index == 0 || at < 0 || at >= (int64_t)n_vertices)
        return rg_fail(err, RG_BAD_INPUT, "line %zu: a face has corner %lld, but there are %zu vertices%s", o->text.line, (long long)index,
                       index < 0 ? (size_t)o->n_before : n_vertices, index < 0 ? " before it" : "");
    *corner = (uint32_t)at;
    return RG_OK;
}

static rg_status take_face(rg_soup *soup, obj *o, rg_error *err)
{
    rg_status status = RG_OK;
    if (o->renamed) status = rg_soup_part_of(soup, &o->part, o->group.at, o->group.n, o->material.at, o->material.n, err);
    o->renamed = false;
    o->n_corners = 0;
    for (rg_word word = next_word(&o->text); word.n && word.at[0] != '#' && !status; word = next_word(&o->text)) {
        if (o->n_corners == o->corners_held) {
            const size_t held = 2 * o->corners_held + 64;
            uint32_t *corner = realloc(o->corner, held * sizeof *corner);
            if (!corner) return rg_fail(err, RG_NO_MEMORY, "no memory for a face of %zu corners", held);
            o->corner = corner;
            o->corners_held = held;
        }
        status = take_corner(&o->corner[o->n_corners++], o, soup->n_vertices, word, err);
    }
    return status ? status : rg_soup_face(soup, o->n_corners, o->corner, o->part, err);
}

static rg_status take_faces(rg_soup *soup, obj *o, rg_error *err)
{
    rg_status status = RG_OK;
    while (o->text.at < o->text.end && !status) {
        const rg_word word = rg_word_in_line(&o->text);
        const bool names_group = rg_word_is(word, "g") || rg_word_is(word, "o"), names_material = rg_word_is(word, "usemtl");
        if (names_group || names_material) {
            *(names_group ? &o->group : &o->material) = rg_rest_of_line(&o->text);
            o->renamed = true;
            continue;
        }
        o->n_before += rg_word_is(word, "v");
        soup->n_not_facets += rg_word_is(word, "l") || rg_word_is(word, "p");
        if (rg_word_is(word, "f") || rg_word_is(word, "fo")) status = take_face(soup, o, err);
        if (word.n && word.at[0] == '#') rg_next_line(&o->text);
        else skip_statement(&o->text);
    }
    return status;
}

rg_status rg_read_obj(rg_soup *soup, const rg_file *file, rg_error *err)
{
    obj o = {.text = {file->text, file->text + file->n, 1}, .group = {"", 0}, .material = {"", 0}, .renamed = true};
    rg_status status = take_vertices(soup, o.text, err);
    if (!status) status = take_faces(soup, &o, err);
    free(o.corner);
    return status;
}

bool rg_is_obj(const rg_file *file)
{
    rg_text text = {file->text, file->text + (file->n < 65536 ? file->n : 65536), 1};
    if (memchr(text.at, 0, (size_t)(text.end - text.at))) return false;
    while (text.at < text.end) {
        double x;
        if (rg_word_is(rg_word_in_line(&text), "v") && rg_number_of(&x, next_word(&text)) == RG_A_NUMBER &&
            rg_number_of(&x, next_word(&text)) == RG_A_NUMBER && rg_number_of(&x, next_word(&text)) == RG_A_NUMBER)
            return true;
        rg_next_line(&text);
    }
    return false;
}
