/* weld.c - vertices that are one, and facets that are none or were there before */
#include "base/vec3.h"
#include "mesh/repair.h"
#include <stdlib.h>
#include <string.h>

/* Cells are eight weld lengths wide: most vertices then look into one cell alone, and a cell cannot hold more than some hundreds of
 * vertices that lie a weld length apart. */
#define CELL_WIDTHS 8.0
#define CELL_BIAS (1 << 20)     /* makes cell numbers positive: they lie within 2^20/8 of 0 */

/* Open addressing; the tag saves the way to the vertex when the cell is another one. */
typedef struct { uint32_t tag, item; } slot;
typedef struct {
    slot *slots;
    size_t n_slots, n_used;
} hash_table;

#define FREE UINT32_MAX

static uint64_t mix(uint64_t h)     /* the finaliser of splitmix64 (S. Vigna) */
{
    h = (h ^ h >> 30) * 0xbf58476d1ce4e5b9u;
    h = (h ^ h >> 27) * 0x94d049bb133111ebu;
    return h ^ h >> 31;
}

static bool table_start(hash_table *t, size_t n_slots)
{
    t->slots = malloc(n_slots * sizeof *t->slots);
    if (t->slots) memset(t->slots, 0xff, n_slots * sizeof *t->slots);
    t->n_slots = n_slots;
    t->n_used = 0;
    return t->slots != NULL;
}

static void table_put(hash_table *t, uint64_t hash, uint32_t item)
{
    size_t at = hash & (t->n_slots - 1);
    while (t->slots[at].item != FREE) at = (at + 1) & (t->n_slots - 1);
    t->slots[at] = (slot){(uint32_t)(hash >> 32), item};
    t->n_used++;
}

typedef struct { int64_t at[3]; } cell;

static cell cell_of(const double v[3], double per_m)
{
    cell c;
    for (int i = 0; i < 3; i++) c.at[i] = (int64_t)floor(v[i] * per_m) + CELL_BIAS;
    return c;
}

static uint64_t hash_cell(const cell *c)
{
    return mix((uint64_t)c->at[0] | (uint64_t)c->at[1] << 21 | (uint64_t)c->at[2] << 42);
}

/* The nearest kept vertex of a cell within *best_m2, or what best was. */
static uint32_t nearest_in_cell(const hash_table *t, const double vertex_m[][3], const double v[3], uint64_t hash, uint32_t best,
                                double *best_m2)
{
    const uint32_t tag = (uint32_t)(hash >> 32);
    for (size_t at = hash & (t->n_slots - 1); t->slots[at].item != FREE; at = (at + 1) & (t->n_slots - 1)) {
        if (t->slots[at].tag != tag) continue;
        const uint32_t item = t->slots[at].item;
        const vec3 d = vec3_sub(vec3_from(vertex_m[item]), vec3_from(v));
        const double d_m2 = vec3_dot(d, d);
        if (d_m2 < *best_m2 || (d_m2 == *best_m2 && item < best)) {
            best = item;
            *best_m2 = d_m2;
        }
    }
    return best;
}

/* The kept vertex that v becomes, or FREE. Its own cell comes first: vertices of one place are the usual case, and nothing is nearer. */
static uint32_t find_kept(const hash_table *t, const double vertex_m[][3], const double v[3], double per_m, double weld_m,
                          uint64_t own_hash)
{
    double best_m2 = weld_m * weld_m;
    uint32_t best = nearest_in_cell(t, vertex_m, v, own_hash, FREE, &best_m2);
    if (best != FREE && best_m2 == 0.0) return best;
    const double reach = 1.0000001 * weld_m;    /* rounding of a sum can put a vertex at weld_m into the next cell */
    const cell low = cell_of((double[]){v[0] - reach, v[1] - reach, v[2] - reach}, per_m);
    const cell high = cell_of((double[]){v[0] + reach, v[1] + reach, v[2] + reach}, per_m);
    for (int64_t x = low.at[0]; x <= high.at[0]; x++)
        for (int64_t y = low.at[1]; y <= high.at[1]; y++)
            for (int64_t z = low.at[2]; z <= high.at[2]; z++) {
                const uint64_t hash = hash_cell(&(cell){{x, y, z}});
                if (hash != own_hash) best = nearest_in_cell(t, vertex_m, v, hash, best, &best_m2);
            }
    return best;
}

static bool widen_vertices(hash_table *t, const double vertex_m[][3], size_t n, double per_m)
{
    hash_table wide;
    if (!table_start(&wide, 2 * t->n_slots)) return false;
    for (size_t i = 0; i < n; i++) {
        const cell c = cell_of(vertex_m[i], per_m);
        table_put(&wide, hash_cell(&c), (uint32_t)i);
    }
    free(t->slots);
    *t = wide;
    return true;
}

rg_status rg_weld(size_t *n_vertices, double vertex_m[][3], size_t n_facets, uint32_t facet[][3], double weld_m, rg_error *err)
{
    const double per_m = 1.0 / (CELL_WIDTHS * weld_m);
    rg_status status = RG_OK;
    size_t n_kept = 0;
    hash_table table = {0};
    uint32_t *became = malloc((*n_vertices ? *n_vertices : 1) * sizeof *became);
    if (!became || !table_start(&table, 1024)) goto no_memory;
    for (size_t i = 0; i < *n_vertices; i++) {
        const double v[3] = {vertex_m[i][0], vertex_m[i][1], vertex_m[i][2]};
        const cell own = cell_of(v, per_m);
        const uint64_t hash = hash_cell(&own);
        became[i] = find_kept(&table, (const double (*)[3])vertex_m, v, per_m, weld_m, hash);
        if (became[i] != FREE) continue;
        memcpy(vertex_m[n_kept], v, sizeof v);
        became[i] = (uint32_t)n_kept;
        table_put(&table, hash, (uint32_t)n_kept++);
        if (2 * table.n_used > table.n_slots && !widen_vertices(&table, (const double (*)[3])vertex_m, n_kept, per_m)) goto no_memory;
    }
    for (size_t f = 0; f < n_facets; f++)
        for (int i = 0; i < 3; i++) facet[f][i] = became[facet[f][i]];
    *n_vertices = n_kept;
    goto done;
no_memory:
    status = rg_fail(err, RG_NO_MEMORY, "no memory to weld %zu vertices", *n_vertices);
done:
    free(became);
    free(table.slots);
    return status;
}

/* Twice the area over the longest edge. Overlong products cannot overflow: the mesh is under 100 km. */
static bool is_degenerate(const uint32_t corner[3], const double vertex_m[][3], double weld_m)
{
    if (corner[0] == corner[1] || corner[1] == corner[2] || corner[2] == corner[0]) return true;
    const vec3 a = vec3_from(vertex_m[corner[0]]), b = vec3_from(vertex_m[corner[1]]), c = vec3_from(vertex_m[corner[2]]);
    const vec3 ab = vec3_sub(b, a), bc = vec3_sub(c, b), ca = vec3_sub(a, c);
    const double longest_m = sqrt(fmax(vec3_dot(ab, ab), fmax(vec3_dot(bc, bc), vec3_dot(ca, ca))));
    return vec3_norm(vec3_cross(ab, bc)) < weld_m * longest_m;
}

static void sorted_corners(uint32_t out[3], const uint32_t in[3])
{
    const uint32_t low = in[0] < in[1] ? in[0] : in[1], high = in[0] < in[1] ? in[1] : in[0];
    out[0] = low < in[2] ? low : in[2];
    out[2] = high > in[2] ? high : in[2];
    out[1] = in[2] < low ? low : in[2] > high ? high : in[2];
}

static uint64_t hash_corners(const uint32_t corner[3])
{
    return mix(mix((uint64_t)corner[0] << 32 | corner[1]) + corner[2]);
}

/* The table holds kept facets only, and those keep their corners. */
static bool is_known(const hash_table *t, const uint32_t facet[][3], const uint32_t want[3], uint64_t hash)
{
    const uint32_t tag = (uint32_t)(hash >> 32);
    for (size_t at = hash & (t->n_slots - 1); t->slots[at].item != FREE; at = (at + 1) & (t->n_slots - 1)) {
        uint32_t corner[3];
        if (t->slots[at].tag != tag) continue;
        sorted_corners(corner, facet[t->slots[at].item]);
        if (memcmp(corner, want, sizeof corner) == 0) return true;
    }
    return false;
}

rg_status rg_drop_facets(size_t *n_facets, uint32_t facet[][3], uint32_t part[], const double vertex_m[][3], double weld_m,
                         size_t *n_degenerate, size_t *n_duplicate, rg_error *err)
{
    size_t n_slots = 64, n_kept = 0;
    while (2 * n_slots < 3 * *n_facets) n_slots *= 2;
    hash_table table;
    if (!table_start(&table, n_slots)) return rg_fail(err, RG_NO_MEMORY, "no memory to compare %zu facets", *n_facets);
    *n_degenerate = *n_duplicate = 0;
    for (size_t f = 0; f < *n_facets; f++) {
        uint32_t corner[3];
        if (is_degenerate(facet[f], vertex_m, weld_m)) {
            ++*n_degenerate;
            continue;
        }
        sorted_corners(corner, facet[f]);
        const uint64_t hash = hash_corners(corner);
        if (is_known(&table, (const uint32_t (*)[3])facet, corner, hash)) {
            ++*n_duplicate;
            continue;
        }
        memmove(facet[n_kept], facet[f], sizeof facet[f]);
        part[n_kept] = part[f];
        table_put(&table, hash, (uint32_t)n_kept++);
    }
    *n_facets = n_kept;
    free(table.slots);
    return RG_OK;
}
