/* cut.c - faces of many corners become triangles */
#include "base/vec3.h"
#include "mesh/soup.h"
#include <stdlib.h>

/* Steps (one corner held against one ear) that a file may cost beside what grows with its corners alone: about a second. */
#define WORK_MAX 400000000u
#define WORK_PER_CORNER 64u

#define NONE UINT32_MAX

/* One polygon while ears are cut off it. Corners are numbered 0 .. n - 1 as the face lists them. A corner that is no strict left turn
 * is blunt: only those can lie in an ear's way. */
typedef struct {
    const double (*at)[2];                      /* counter-clockwise */
    uint32_t *next, *prev, *blunt, *where, *queue, *waits;
    uint32_t n, n_left, n_blunt, first, n_waiting;
} polygon;

static double turn2(const double a[2], const double b[2], const double c[2])
{
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
}

static bool same2(const double a[2], const double b[2]) { return a[0] == b[0] && a[1] == b[1]; }

static void set_blunt(polygon *p, uint32_t i, bool blunt)
{
    if (blunt && p->where[i] == NONE) {
        p->where[i] = p->n_blunt;
        p->blunt[p->n_blunt++] = i;
    } else if (!blunt && p->where[i] != NONE) {
        const uint32_t last = p->blunt[--p->n_blunt];
        p->blunt[p->where[i]] = last;
        p->where[last] = p->where[i];
        p->where[i] = NONE;
    }
}

static void measure_corner(polygon *p, uint32_t i)
{
    set_blunt(p, i, !(turn2(p->at[p->prev[i]], p->at[i], p->at[p->next[i]]) > 0.0));
    if (!p->waits[i]) {
        p->waits[i] = 1;
        p->queue[(p->first + p->n_waiting++) % p->n] = i;
    }
}

/* No blunt corner lies in the triangle or on its border; a corner in the same place as one of the three is a bridge to a hole, and no
 * obstacle. */
static bool is_ear(const polygon *p, uint32_t i)
{
    const double *a = p->at[p->prev[i]], *b = p->at[i], *c = p->at[p->next[i]];
    if (p->where[i] != NONE) return false;
    for (uint32_t k = 0; k < p->n_blunt; k++) {
        const double *r = p->at[p->blunt[k]];
        if (turn2(a, b, r) < 0.0 || turn2(b, c, r) < 0.0 || turn2(c, a, r) < 0.0) continue;
        if (!same2(r, a) && !same2(r, b) && !same2(r, c)) return false;
    }
    return true;
}

static void cut_off(polygon *p, uint32_t i)
{
    const uint32_t a = p->prev[i], c = p->next[i];
    set_blunt(p, i, false);
    p->next[a] = c;
    p->prev[c] = a;
    p->next[i] = NONE;
    p->n_left--;
    measure_corner(p, a);
    measure_corner(p, c);
}

/* Where no corner is an ear the outline crosses itself: any sharp corner goes then, or any at all. */
static uint32_t any_corner(const polygon *p)
{
    uint32_t any = NONE;
    for (uint32_t i = 0; i < p->n; i++) {
        if (p->next[i] == NONE) continue;
        if (p->where[i] == NONE) return i;
        if (any == NONE) any = i;
    }
    return any;
}

static rg_status clip_ears(rg_soup *soup, uint32_t n, const uint32_t corner[], uint32_t part, rg_error *err)
{
    uint32_t *ring = soup->ring;
    polygon p = {.at = (const double (*)[2])soup->flat, .next = ring, .prev = ring + n, .blunt = ring + 2 * (size_t)n,
                 .where = ring + 3 * (size_t)n, .queue = ring + 4 * (size_t)n, .waits = ring + 5 * (size_t)n, .n = n, .n_left = n};
    for (uint32_t i = 0; i < n; i++) {
        p.next[i] = i + 1 < n ? i + 1 : 0;
        p.prev[i] = i ? i - 1 : n - 1;
        p.where[i] = NONE;
        p.waits[i] = 0;
    }
    for (uint32_t i = 0; i < n; i++) measure_corner(&p, i);
    while (p.n_left > 3) {
        uint32_t i = NONE;
        soup->cut_work += p.n_waiting ? p.n_blunt + 1 : n;
        if (soup->cut_work > soup->cut_work_max)
            return rg_fail(err, RG_BAD_INPUT, "a face of %u corners is too intricate to be cut into triangles (over a second): "
                           "triangulate the mesh where it was made", n);
        if (p.n_waiting) {
            i = p.queue[p.first];
            p.first = (p.first + 1) % n;
            p.n_waiting--;
            p.waits[i] = 0;
            if (p.next[i] == NONE || !is_ear(&p, i)) continue;
        } else {
            i = any_corner(&p);
        }
        const rg_status status = rg_soup_facet(soup, corner[p.prev[i]], corner[i], corner[p.next[i]], part, err);
        if (status) return status;
        cut_off(&p, i);
    }
    uint32_t i = 0;
    while (p.next[i] == NONE) i++;
    return rg_soup_facet(soup, corner[i], corner[p.next[i]], corner[p.next[p.next[i]]], part, err);
}

static rg_status cut_fan(rg_soup *soup, uint32_t n, const uint32_t corner[], uint32_t part, rg_error *err)
{
    rg_status status = RG_OK;
    for (uint32_t i = 2; i < n && !status; i++) status = rg_soup_facet(soup, corner[0], corner[i - 1], corner[i], part, err);
    return status;
}

/* Every corner a strict left turn, and once round: the edges change between leftward and rightward no more than twice. */
static bool is_convex(const double at[][2], uint32_t n)
{
    int n_changes = 0, before = 0, first = 0;
    for (uint32_t i = 0; i < n; i++) {
        const double *a = at[i], *b = at[i + 1 < n ? i + 1 : 0], *c = at[i + 2 < n ? i + 2 : i + 2 - n];
        const int way = (b[0] > a[0]) - (b[0] < a[0]);
        if (!(turn2(a, b, c) > 0.0)) return false;
        if (way == 0) continue;
        n_changes += before && way != before;
        before = way;
        if (!first) first = way;
    }
    return n_changes + (before != first) <= 2;
}

/* Drops a coordinate: the one in which the face's Newell normal is longest. False when the normal is none (or not finite). */
static bool flatten(rg_soup *soup, uint32_t n, const uint32_t corner[])
{
    const vec3 origin = vec3_from(soup->vertex[corner[0]]);
    double normal[3] = {0};
    vec3 a = vec3_sub(vec3_from(soup->vertex[corner[n - 1]]), origin);
    for (uint32_t i = 0; i < n; i++) {
        const vec3 b = vec3_sub(vec3_from(soup->vertex[corner[i]]), origin);
        normal[0] += (a.y - b.y) * (a.z + b.z);
        normal[1] += (a.z - b.z) * (a.x + b.x);
        normal[2] += (a.x - b.x) * (a.y + b.y);
        a = b;
    }
    int axis = fabs(normal[1]) > fabs(normal[0]) ? 1 : 0;
    if (fabs(normal[2]) > fabs(normal[axis])) axis = 2;
    const double length = fabs(normal[0]) + fabs(normal[1]) + fabs(normal[2]);
    if (!isfinite(length) || length == 0.0) return false;
    const int u = (axis + (normal[axis] > 0.0 ? 1 : 2)) % 3, v = 3 - axis - u;
    for (uint32_t i = 0; i < n; i++) {
        const double *r = soup->vertex[corner[i]], *o = soup->vertex[corner[0]];
        soup->flat[i][0] = r[u] - o[u];
        soup->flat[i][1] = r[v] - o[v];
    }
    return true;
}

static bool same_place(const rg_soup *soup, uint32_t a, uint32_t b)
{
    const double *r = soup->vertex[a], *q = soup->vertex[b];
    return a == b || (r[0] == q[0] && r[1] == q[1] && r[2] == q[2]);
}

static size_t drop_repeats(const rg_soup *soup, size_t n, uint32_t corner[])
{
    size_t n_kept = 0;
    for (size_t i = 0; i < n; i++)
        if (n_kept == 0 || !same_place(soup, corner[i], corner[n_kept - 1])) corner[n_kept++] = corner[i];
    while (n_kept > 1 && same_place(soup, corner[0], corner[n_kept - 1])) n_kept--;
    return n_kept;
}

static rg_status hold_corners(rg_soup *soup, size_t n, rg_error *err)
{
    if (n <= soup->cut_held) return RG_OK;
    free(soup->flat);
    free(soup->ring);
    soup->cut_held = 0;
    soup->flat = malloc(2 * n * sizeof *soup->flat);
    soup->ring = malloc(12 * n * sizeof *soup->ring);
    if (!soup->flat || !soup->ring) return rg_fail(err, RG_NO_MEMORY, "no memory for a face of %zu corners", n);
    soup->cut_held = 2 * n;
    return RG_OK;
}

rg_status rg_soup_face(rg_soup *soup, size_t n, uint32_t corner[], uint32_t part, rg_error *err)
{
    if (n == 3 && corner[0] != corner[1] && corner[1] != corner[2] && corner[2] != corner[0])
        return rg_soup_facet(soup, corner[0], corner[1], corner[2], part, err);
    n = n > 3 ? drop_repeats(soup, n, corner) : 0;
    if (n < 3) {
        soup->n_not_facets++;
        return RG_OK;
    }
    if (n == 3) return rg_soup_facet(soup, corner[0], corner[1], corner[2], part, err);
    rg_status status = rg_soup_reserve(soup, 0, n - 2, err);    /* bounds n, too */
    if (!status) status = hold_corners(soup, n, err);
    if (status) return status;
    soup->n_polygons_cut++;
    soup->cut_work_max += WORK_PER_CORNER * n + (soup->cut_work_max ? 0 : WORK_MAX);
    const bool flat = flatten(soup, (uint32_t)n, corner);
    if (!flat || is_convex((const double (*)[2])soup->flat, (uint32_t)n)) return cut_fan(soup, (uint32_t)n, corner, part, err);
    return clip_ears(soup, (uint32_t)n, corner, part, err);
}
