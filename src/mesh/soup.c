/* soup.c - room for loose facets, and the names of their parts */
#include "mesh/soup.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>

void rg_soup_free(rg_soup *soup)
{
    for (size_t i = 0; i < soup->n_parts; i++) free(soup->part_name[i]);
    free(soup->part_name);
    free(soup->name_slot);
    free(soup->vertex);
    free(soup->facet);
    free(soup->part);
    free(soup->flat);
    free(soup->ring);
    *soup = (rg_soup){0};
}

/* By half more each time: large blocks move by page tables, and pages that nothing touched cost nothing. */
static bool grow(void *array_at, size_t item_size, size_t held)
{
    void *old, *grown;
    memcpy(&old, array_at, sizeof old);
    grown = realloc(old, held * item_size);
    if (grown) memcpy(array_at, &grown, sizeof grown);
    return grown != NULL;
}

static size_t more(size_t held, size_t want, size_t most)
{
    const size_t next = held + held / 2 + 64;
    return want > next ? want : next < most ? next : most;
}

rg_status rg_soup_reserve(rg_soup *soup, size_t n_vertices, size_t n_facets, rg_error *err)
{
    if (n_facets > RG_FACETS_MAX - soup->n_facets || n_vertices > RG_VERTICES_MAX - soup->n_vertices)
        return rg_fail(err, RG_BAD_INPUT, "more than %zu facets or %zu vertices: split the mesh or coarsen it", RG_FACETS_MAX, RG_VERTICES_MAX);
    const size_t vertices = soup->n_vertices + n_vertices, facets = soup->n_facets + n_facets;
    if (vertices > soup->vertices_held) {
        const size_t held = more(soup->vertices_held, vertices, RG_VERTICES_MAX);
        if (!grow(&soup->vertex, sizeof *soup->vertex, held)) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu vertices", vertices);
        soup->vertices_held = held;
    }
    if (facets > soup->facets_held) {
        const size_t held = more(soup->facets_held, facets, RG_FACETS_MAX);
        if (!grow(&soup->facet, sizeof *soup->facet, held) || !grow(&soup->part, sizeof *soup->part, held))
            return rg_fail(err, RG_NO_MEMORY, "no memory for %zu facets", facets);
        soup->facets_held = held;
    }
    return RG_OK;
}

/* Length of the UTF-8 character at s, or 0 when there is none. */
static size_t utf8_length(const unsigned char *s, size_t n)
{
    const size_t length = s[0] < 0x80 ? 1 : s[0] >= 0xc2 && s[0] < 0xe0 ? 2 : s[0] >= 0xe0 && s[0] < 0xf0 ? 3 :
                          s[0] >= 0xf0 && s[0] < 0xf5 ? 4 : 0;
    if (length > n) return 0;
    for (size_t i = 1; i < length; i++)
        if ((s[i] & 0xc0) != 0x80) return 0;
    const bool overlong = (s[0] == 0xe0 && s[1] < 0xa0) || (s[0] == 0xf0 && s[1] < 0x90);
    const bool surrogate = s[0] == 0xed && s[1] > 0x9f, too_high = s[0] == 0xf4 && s[1] > 0x8f;
    return overlong || surrogate || too_high ? 0 : length;
}

static bool blank(char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\n'; }

/* Fits size bytes with a final 0; returns the length without. */
static size_t clean_name(char out[], size_t size, const char *name, size_t n)
{
    while (n && blank(name[0])) name++, n--;
    while (n && blank(name[n - 1])) n--;
    size_t m = 0;
    for (size_t i = 0; i < n;) {
        const unsigned char *s = (const unsigned char *)name + i;
        const size_t length = utf8_length(s, n - i), used = length ? length : 1;
        if (m + used >= size) break;
        const bool c1 = length == 2 && s[0] == 0xc2 && s[1] < 0xa0;     /* control characters again, from 80 to 9f */
        if (length == 0 || s[0] < 0x20 || s[0] == 0x7f || c1) out[m++] = '_';
        else memcpy(out + m, s, length), m += length;
        i += used;
    }
    while (m && blank(out[m - 1])) m--;     /* a cut can bare one */
    out[m] = 0;
    return m;
}

static size_t hash_name(const char *name)
{
    uint64_t h = 0xcbf29ce484222325u;   /* FNV-1a, the 64-bit one */
    for (; *name; name++) h = (h ^ (unsigned char)*name) * 0x100000001b3u;
    return (size_t)(h ^ h >> 29);
}

static bool widen_names(rg_soup *soup)
{
    const size_t n_slots = soup->n_name_slots ? 2 * soup->n_name_slots : 64;
    uint32_t *slot = calloc(n_slots, sizeof *slot);
    if (!slot) return false;
    for (size_t p = 0; p < soup->n_parts; p++) {
        size_t at = hash_name(soup->part_name[p]) & (n_slots - 1);
        while (slot[at]) at = (at + 1) & (n_slots - 1);
        slot[at] = (uint32_t)p + 1;
    }
    free(soup->name_slot);
    soup->name_slot = slot;
    soup->n_name_slots = n_slots;
    return true;
}

static rg_status part_named(rg_soup *soup, uint32_t *part, const char *name, rg_error *err)
{
    if (2 * (soup->n_parts + 1) > soup->n_name_slots && !widen_names(soup)) return rg_fail(err, RG_NO_MEMORY, "no memory for part names");
    size_t at = hash_name(name) & (soup->n_name_slots - 1);
    for (; soup->name_slot[at]; at = (at + 1) & (soup->n_name_slots - 1))
        if (strcmp(soup->part_name[soup->name_slot[at] - 1], name) == 0) {
            *part = soup->name_slot[at] - 1;
            return RG_OK;
        }
    if (soup->n_parts == soup->parts_held) {
        const size_t held = more(soup->parts_held, soup->n_parts + 1, RG_FACETS_MAX);
        if (!grow(&soup->part_name, sizeof *soup->part_name, held)) return rg_fail(err, RG_NO_MEMORY, "no memory for part names");
        soup->parts_held = held;
    }
    char *copy = strdup(name);
    if (!copy) return rg_fail(err, RG_NO_MEMORY, "no memory for part names");
    soup->part_name[soup->n_parts++] = copy;
    soup->name_slot[at] = (uint32_t)soup->n_parts;
    *part = (uint32_t)soup->n_parts - 1;
    return RG_OK;
}

rg_status rg_soup_part(rg_soup *soup, uint32_t *part, const char *name, size_t n, rg_error *err)
{
    char clean[RG_NAME_MAX];
    return part_named(soup, part, clean_name(clean, sizeof clean, name, n) ? clean : "mesh", err);
}

rg_status rg_soup_part_of(rg_soup *soup, uint32_t *part, const char *group, size_t n_group, const char *material, size_t n_material,
                          rg_error *err)
{
    char name[RG_NAME_MAX], tail[RG_NAME_MAX / 2];
    size_t n = clean_name(name, sizeof name / 2, group, n_group);
    const size_t n_tail = clean_name(tail, sizeof tail, material, n_material);
    if (n && n_tail) name[n++] = '/';
    memcpy(name + n, tail, n_tail + 1);
    return part_named(soup, part, n + n_tail ? name : "mesh", err);
}

void rg_soup_note_step(rg_soup *soup, double largest, bool single)
{
    const double a = fabs(largest);
    if (!isfinite(a)) return;       /* refused later, where the text can say so */
    const double step = single ? (double)(nextafterf((float)a, INFINITY) - (float)a) : nextafter(a, INFINITY) - a;
    if (step > soup->coordinate_step) soup->coordinate_step = step;
}
