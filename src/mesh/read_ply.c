/* read_ply.c - PLY, text and binary in both byte orders, with properties of any type in any order
 *
 * A face's part is its single number "part", when it has one; "comment part I NAME" in the head names part I.
 */
#include "base/vec3.h"
#include "mesh/bytes.h"
#include "mesh/readers.h"
#include "mesh/text.h"
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { MAX_ELEMENTS = 32, MAX_PROPERTIES = 128, MAX_PARTS = 1 << 20 };

typedef enum { NO_TYPE, WHOLE_SIGNED, WHOLE, SINGLE, DOUBLE } number_kind;
typedef struct { number_kind kind; size_t size; } type;
typedef struct {
    type counter;       /* of a list; kind NO_TYPE: a single number */
    type value;
    int axis;           /* of a vertex: 0, 1, 2; else -1 */
    bool corners, part; /* of a face */
} property;
typedef struct {
    size_t n, n_properties;
    property *properties;
} element;

typedef struct {
    bool there;         /* it is named, or a face belongs to it */
    rg_word name;       /* empty: not named */
    uint32_t part;      /* of the soup */
} numbered_part;

typedef struct {
    rg_text text;       /* binary: at alone counts */
    rg_text head;
    bool binary, big_endian;
    size_t n_elements, n_properties;
    element elements[MAX_ELEMENTS];
    property properties[MAX_PROPERTIES];
    const element *vertices, *faces;
    uint32_t *corner;
    size_t corners_held;
    bool has_parts;
    numbered_part *numbered;    /* [n_numbered], by the file's numbers */
    size_t n_numbered, numbered_held;
} ply;

bool rg_is_ply(const rg_file *file) { return file->n >= 4 && memcmp(file->text, "ply", 3) == 0 && (file->text[3] == '\n' || file->text[3] == '\r'); }

static type type_named(rg_word word)
{
    static const struct { const char *name; type is; } names[] = {
        {"char", {WHOLE_SIGNED, 1}}, {"int8", {WHOLE_SIGNED, 1}}, {"uchar", {WHOLE, 1}}, {"uint8", {WHOLE, 1}},
        {"short", {WHOLE_SIGNED, 2}}, {"int16", {WHOLE_SIGNED, 2}}, {"ushort", {WHOLE, 2}}, {"uint16", {WHOLE, 2}},
        {"int", {WHOLE_SIGNED, 4}}, {"int32", {WHOLE_SIGNED, 4}}, {"uint", {WHOLE, 4}}, {"uint32", {WHOLE, 4}},
        {"float", {SINGLE, 4}}, {"float32", {SINGLE, 4}}, {"double", {DOUBLE, 8}}, {"float64", {DOUBLE, 8}}};
    for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
        if (rg_word_is(word, names[i].name)) return names[i].is;
    return (type){NO_TYPE, 0};
}

static rg_status take_format(ply *p, rg_error *err)
{
    char shown[48];
    const rg_word word = rg_word_in_line(&p->text);
    p->binary = !rg_word_is(word, "ascii");
    p->big_endian = rg_word_is(word, "binary_big_endian");
    if (p->binary && !p->big_endian && !rg_word_is(word, "binary_little_endian"))
        return rg_fail(err, RG_BAD_INPUT, "line %zu: the format is ascii, binary_little_endian or binary_big_endian, not \"%s\"",
                       p->text.line, rg_shown(shown, word));
    return RG_OK;
}

static rg_status take_element(ply *p, rg_error *err)
{
    char shown[48];
    const rg_word name = rg_word_in_line(&p->text), count = rg_word_in_line(&p->text);
    int64_t n;
    if (p->n_elements == MAX_ELEMENTS) return rg_fail(err, RG_BAD_INPUT, "line %zu: more than %d elements", p->text.line, MAX_ELEMENTS);
    if (!rg_whole_of(&n, count) || n < 0)
        return rg_fail(err, RG_BAD_INPUT, "line %zu: the element's count is \"%s\", no whole number", p->text.line, rg_shown(shown, count));
    element *e = &p->elements[p->n_elements++];
    *e = (element){.n = (size_t)n, .properties = p->properties + p->n_properties};
    if (rg_word_is(name, "vertex") && !p->vertices) p->vertices = e;
    if (rg_word_is(name, "face") && !p->faces) p->faces = e;
    return RG_OK;
}

static rg_status take_property(ply *p, rg_error *err)
{
    char shown[48];
    element *e = p->n_elements ? &p->elements[p->n_elements - 1] : NULL;
    property prop = {.axis = -1};
    rg_word word = rg_word_in_line(&p->text);
    if (!e) return rg_fail(err, RG_BAD_INPUT, "line %zu: a property before the first element", p->text.line);
    if (p->n_properties == MAX_PROPERTIES) return rg_fail(err, RG_BAD_INPUT, "line %zu: more than %d properties", p->text.line, MAX_PROPERTIES);
    const bool list = rg_word_is(word, "list");
    if (list) {
        word = rg_word_in_line(&p->text);
        prop.counter = type_named(word);
        if (prop.counter.kind != WHOLE && prop.counter.kind != WHOLE_SIGNED)
            return rg_fail(err, RG_BAD_INPUT, "line %zu: \"%s\" is no type to count a list with", p->text.line, rg_shown(shown, word));
        word = rg_word_in_line(&p->text);
    }
    prop.value = type_named(word);
    if (prop.value.kind == NO_TYPE)
        return rg_fail(err, RG_BAD_INPUT, "line %zu: \"%s\" is no type of PLY", p->text.line, rg_shown(shown, word));
    const rg_word name = rg_word_in_line(&p->text);
    if (e == p->vertices && !list && name.n == 1 && name.at[0] >= 'x' && name.at[0] <= 'z') prop.axis = name.at[0] - 'x';
    if (e == p->faces && list) prop.corners = rg_word_is(name, "vertex_indices") || rg_word_is(name, "vertex_index");
    if (e == p->faces && !list && !p->has_parts) p->has_parts = prop.part = rg_word_is(name, "part");
    e->n_properties++;
    p->properties[p->n_properties++] = prop;
    return RG_OK;
}

static rg_status take_head(ply *p, rg_error *err)
{
    bool formatted = false;
    char shown[48];
    rg_next_line(&p->text);
    p->head = p->text;
    for (rg_status status; p->text.at < p->text.end; rg_next_line(&p->text)) {
        const rg_word word = rg_word_in_line(&p->text);
        status = RG_OK;
        if (rg_word_is(word, "end_header")) {
            p->head.end = word.at;
            rg_next_line(&p->text);
            return formatted ? RG_OK : rg_fail(err, RG_BAD_INPUT, "its head does not say its format");
        }
        if (rg_word_is(word, "format")) status = take_format(p, err), formatted = true;
        else if (rg_word_is(word, "element")) status = take_element(p, err);
        else if (rg_word_is(word, "property")) status = take_property(p, err);
        else if (word.n && !rg_word_is(word, "comment") && !rg_word_is(word, "obj_info"))
            status = rg_fail(err, RG_BAD_INPUT, "line %zu: \"%s\" is no word of a PLY head", p->text.line, rg_shown(shown, word));
        if (status) return status;
    }
    return rg_fail(err, RG_BAD_INPUT, "the file ends in its head: end_header is missing");
}

/* A number of a text takes two bytes at least, one of them a blank. */
static size_t least_bytes(const ply *p, const element *e)
{
    size_t n = 0;
    for (size_t i = 0; i < e->n_properties; i++) {
        const property *prop = &e->properties[i];
        n += !p->binary ? 2 : prop->counter.kind ? prop->counter.size : prop->value.size;
    }
    return n;
}

static rg_status check_head(const ply *p, rg_error *err)
{
    size_t left = (size_t)(p->text.end - p->text.at) + 1;
    unsigned axes = 0;
    bool corners = false;
    if (!p->vertices) return rg_fail(err, RG_BAD_INPUT, "it has no element \"vertex\"");
    if (!p->faces) return rg_fail(err, RG_BAD_INPUT, "it has no element \"face\": points alone are no mesh");
    for (size_t i = 0; i < p->vertices->n_properties; i++)
        if (p->vertices->properties[i].axis >= 0) axes |= 1u << p->vertices->properties[i].axis;
    for (size_t i = 0; i < p->faces->n_properties; i++) corners = corners || p->faces->properties[i].corners;
    if (axes != 7) return rg_fail(err, RG_BAD_INPUT, "its vertices lack a property x, y or z");
    if (!corners) return rg_fail(err, RG_BAD_INPUT, "its faces lack the list vertex_indices");
    for (const element *e = p->elements; e < p->elements + p->n_elements; e++) {
        const size_t each = least_bytes(p, e);
        if (each == 0) continue;
        if (e->n > left / each)
            return rg_fail(err, RG_BAD_INPUT, "its head promises %zu records of at least %zu bytes, but only %zu are left: the file is "
                           "cut short or damaged", e->n, each, left - 1);
        left -= e->n * each;
    }
    return RG_OK;
}

static rg_status cut_short(const ply *p, rg_error *err)
{
    return p->binary ? rg_fail(err, RG_BAD_INPUT, "the file ends before its records do: it is cut short or damaged") :
        rg_fail(err, RG_BAD_INPUT, "line %zu: the file ends before its records do: it is cut short or damaged", p->text.line);
}

/* A text's nan and inf come out as NaN. */
static rg_status take_number(ply *p, type is, double *value, rg_error *err)
{
    if (p->binary) {
        const char *at = p->text.at;
        if ((size_t)(p->text.end - at) < is.size) return cut_short(p, err);
        p->text.at += is.size;
        if (is.kind == SINGLE) *value = (double)rg_bytes_single(at, p->big_endian);
        else if (is.kind == DOUBLE) *value = rg_bytes_double(at, p->big_endian);
        else {
            const uint64_t bits = rg_bytes_whole(at, is.size, p->big_endian);
            const unsigned unused = 64 - 8 * (unsigned)is.size;
            *value = is.kind == WHOLE ? (double)bits : (double)((int64_t)(bits << unused) >> unused);
        }
        return RG_OK;
    }
    char shown[48];
    const rg_word word = rg_word_anywhere(&p->text);
    if (word.n == 0) return cut_short(p, err);
    const rg_number_kind kind = rg_number_of(value, word);
    if (kind == RG_NOT_FINITE) *value = NAN;
    return kind == RG_NO_NUMBER ? rg_fail(err, RG_BAD_INPUT, "line %zu: \"%s\" is no number", p->text.line, rg_shown(shown, word)) : RG_OK;
}

/* The length of a list, held against what the file can still hold. */
static rg_status take_count(ply *p, const property *prop, size_t *n, rg_error *err)
{
    double value;
    const rg_status status = take_number(p, prop->counter, &value, err);
    if (status) return status;
    const size_t most = ((size_t)(p->text.end - p->text.at) + 1) / (p->binary ? prop->value.size : 2);
    if (!(value >= 0.0) || value > (double)most || value != floor(value))
        return rg_fail(err, RG_BAD_INPUT, "a list of %g numbers: the file is cut short or damaged", value);
    *n = (size_t)value;
    return RG_OK;
}

static rg_status skip_property(ply *p, const property *prop, rg_error *err)
{
    size_t n = 1;
    double value;
    rg_status status = prop->counter.kind ? take_count(p, prop, &n, err) : RG_OK;
    for (size_t i = 0; i < n && !status; i++) status = take_number(p, prop->value, &value, err);
    return status;
}

static rg_status skip_element(ply *p, const element *e, rg_error *err)
{
    rg_status status = RG_OK;
    for (size_t i = 0; i < e->n && e->n_properties && !status; i++)
        for (size_t k = 0; k < e->n_properties && !status; k++) status = skip_property(p, &e->properties[k], err);
    return status;
}

static rg_status take_vertices(ply *p, rg_soup *soup, rg_error *err)
{
    const element *e = p->vertices;
    double largest = 0.0;
    bool single = false;
    rg_status status = rg_soup_reserve(soup, e->n, 0, err);
    for (size_t i = 0; i < e->n && !status; i++) {
        double v[3] = {0};
        for (size_t k = 0; k < e->n_properties && !status; k++) {
            const property *prop = &e->properties[k];
            if (prop->axis < 0) {
                status = skip_property(p, prop, err);
                continue;
            }
            status = take_number(p, prop->value, &v[prop->axis], err);
            single = single || prop->value.kind == SINGLE;
        }
        if (!status && !p->binary && !(isfinite(v[0]) && isfinite(v[1]) && isfinite(v[2])))
            status = rg_fail(err, RG_BAD_INPUT, "line %zu: a coordinate of vertex %zu is not finite", p->text.line, i + 1);
        largest = fmax(largest, fmax(fabs(v[0]), fmax(fabs(v[1]), fabs(v[2]))));
        if (!status) status = rg_soup_vertex(soup, v[0], v[1], v[2], err);
    }
    rg_soup_note_step(soup, largest, single);
    return status;
}

static rg_status take_corners(ply *p, const property *prop, size_t n_vertices, size_t *n, size_t face, rg_error *err)
{
    rg_status status = take_count(p, prop, n, err);
    if (!status && *n > p->corners_held) {
        uint32_t *corner = realloc(p->corner, 2 * *n * sizeof *corner);
        if (!corner) return rg_fail(err, RG_NO_MEMORY, "no memory for a face of %zu corners", *n);
        p->corner = corner;
        p->corners_held = 2 * *n;
    }
    for (size_t i = 0; i < *n && !status; i++) {
        double value;
        status = take_number(p, prop->value, &value, err);
        if (status) break;
        if (!(value >= 0.0) || value >= (double)n_vertices || value != floor(value))
            return rg_fail(err, RG_BAD_INPUT, "face %zu has corner %.10g, but there are %zu vertices, counted from 0", face + 1, value, n_vertices);
        p->corner[i] = (uint32_t)value;
    }
    return status;
}

static bool is_part(double value) { return value >= 0.0 && value < MAX_PARTS && value == floor(value); }

/* Takes note of the part of that number; is_part of it holds. */
static rg_status note_part(ply *p, size_t number, rg_error *err)
{
    if (number >= p->numbered_held) {
        const size_t held = number < MAX_PARTS / 2 ? 2 * number + 16 : MAX_PARTS;
        numbered_part *numbered = realloc(p->numbered, held * sizeof *numbered);
        if (!numbered) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu parts", number + 1);
        p->numbered = numbered;
        p->numbered_held = held;
    }
    while (p->n_numbered <= number) p->numbered[p->n_numbered++] = (numbered_part){0};
    p->numbered[number].there = true;
    return RG_OK;
}

/* A remark may begin with "part" by chance: only a whole number behind it makes it a name. The first name of a part counts. */
static rg_status take_part_names(ply *p, rg_error *err)
{
    for (rg_text head = p->head; head.at < head.end; rg_next_line(&head)) {
        double number;
        if (!rg_word_is(rg_word_in_line(&head), "comment") || !rg_word_is(rg_word_in_line(&head), "part")) continue;
        if (rg_number_of(&number, rg_word_in_line(&head)) != RG_A_NUMBER || number != floor(number)) continue;
        if (!is_part(number))
            return rg_fail(err, RG_BAD_INPUT, "line %zu: it names part %.10g, but parts are numbered from 0 to %d", head.line, number,
                           MAX_PARTS - 1);
        const rg_status status = note_part(p, (size_t)number, err);
        if (status) return status;
        rg_text rest = head;
        const rg_word name = rg_rest_of_line(&rest);
        if (p->numbered[(size_t)number].name.n == 0) p->numbered[(size_t)number].name = name;
    }
    return RG_OK;
}

static rg_status take_part(ply *p, const property *prop, uint32_t *number, size_t face, rg_error *err)
{
    double value;
    const rg_status status = take_number(p, prop->value, &value, err);
    if (status) return status;
    if (!is_part(value))
        return rg_fail(err, RG_BAD_INPUT, "face %zu belongs to part %.10g, but parts are whole numbers from 0 to %d", face + 1, value,
                       MAX_PARTS - 1);
    *number = (uint32_t)value;
    return note_part(p, *number, err);
}

/* Parts in the order of their numbers, without the numbers that the file does not use; numbers of one name are one part, as in every
 * format. Until here facets have the file's numbers. */
static rg_status settle_parts(ply *p, rg_soup *soup, size_t first_facet, rg_error *err)
{
    rg_status status = RG_OK;
    for (size_t i = 0; i < p->n_numbered && !status; i++) {
        numbered_part *const numbered = &p->numbered[i];
        char bare[32];
        rg_word name = numbered->name;
        if (!numbered->there) continue;
        if (name.n == 0) name = (rg_word){bare, (size_t)snprintf(bare, sizeof bare, "part %zu", i)};
        status = rg_soup_part(soup, &numbered->part, name.at, name.n, err);
    }
    for (size_t f = first_facet; f < soup->n_facets && !status; f++) soup->part[f] = p->numbered[soup->part[f]].part;
    return status;
}

static rg_status take_faces(ply *p, rg_soup *soup, rg_error *err)
{
    const element *e = p->faces;
    const size_t first_facet = soup->n_facets;
    uint32_t part = 0;
    rg_status status = p->has_parts ? take_part_names(p, err) : rg_soup_part(soup, &part, "", 0, err);
    if (!status && e->n <= RG_FACETS_MAX) status = rg_soup_reserve(soup, 0, e->n, err);
    for (size_t i = 0; i < e->n && !status; i++) {
        size_t n = 0;
        bool taken = false;
        for (size_t k = 0; k < e->n_properties && !status; k++) {
            const property *prop = &e->properties[k];
            const bool take = prop->corners && !taken;
            status = take ? take_corners(p, prop, soup->n_vertices, &n, i, err) :
                     prop->part ? take_part(p, prop, &part, i, err) : skip_property(p, prop, err);
            taken = taken || take;
        }
        if (!status) status = rg_soup_face(soup, n, p->corner, part, err);
    }
    return status || !p->has_parts ? status : settle_parts(p, soup, first_facet, err);
}

/* Faces may stand before the vertices: they are passed over, and read when all vertices are there. */
static rg_status take_elements(ply *p, rg_soup *soup, rg_error *err)
{
    rg_status status = RG_OK;
    rg_text early = {0};
    for (const element *e = p->elements; e < p->elements + p->n_elements && !status; e++) {
        if (e == p->vertices) {
            status = take_vertices(p, soup, err);
        } else if (e == p->faces && p->vertices < e) {
            return take_faces(p, soup, err);
        } else {
            if (e == p->faces) early = p->text;
            status = skip_element(p, e, err);
        }
    }
    p->text = early;
    return status ? status : take_faces(p, soup, err);
}

rg_status rg_read_ply(rg_soup *soup, const rg_file *file, rg_error *err)
{
    ply *p = calloc(1, sizeof *p);
    if (!p) return rg_fail(err, RG_NO_MEMORY, "no memory to read a PLY");
    p->text = (rg_text){file->text, file->text + file->n, 1};
    rg_status status = take_head(p, err);
    if (!status) status = check_head(p, err);
    if (!status) status = take_elements(p, soup, err);
    free(p->corner);
    free(p->numbered);
    free(p);
    return status;
}
