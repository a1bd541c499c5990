/* split.c - cuts a range of boxes into the nodes of a tree, by binned surface areas (I. Wald, IEEE Symp. Interactive Ray Tracing 2007)
 *
 * A node takes its range, and cuts the piece of the largest area until it has eight. Which cut is taken depends on minima, maxima and
 * counts alone, so the tree is the same for any number of threads; only the order of the nodes is not, and build.c sets that.
 * Every cut costs one pass over the range. RG_FREE_DEPTH cuts may be as unequal as the areas like; below that ranges are halved, which
 * bounds depth and time for any input.
 */
#include "bvh/tree.h"
#include <math.h>
#include <string.h>

enum { BINS = 16, TASK = 4096 };

typedef struct { float low[3], high[3]; } box;
typedef struct { box bounds, middles; size_t first, n; int depth; } range;     /* middles: of twice the boxes' middles */
typedef struct { box bounds; size_t n; } bin;
typedef struct { rg_box_ref *ref; rg_node *node; uint32_t n_nodes; } forest;

static const box nothing = {{INFINITY, INFINITY, INFINITY}, {-INFINITY, -INFINITY, -INFINITY}};

static inline void box_add(box *b, const float low[3], const float high[3])
{
    for (int i = 0; i < 3; i++) {
        b->low[i] = low[i] < b->low[i] ? low[i] : b->low[i];
        b->high[i] = high[i] > b->high[i] ? high[i] : b->high[i];
    }
}

static inline float half_area(const box *b)
{
    const float x = b->high[0] - b->low[0], y = b->high[1] - b->low[1], z = b->high[2] - b->low[2];
    return x * y + y * z + z * x;
}

static range measure(const rg_box_ref ref[], size_t first, size_t n, int depth)
{
    range r = {nothing, nothing, first, n, depth};
    for (size_t i = first; i < first + n; i++) {
        float middle[3];
        for (int axis = 0; axis < 3; axis++) middle[axis] = ref[i].low_m[axis] + ref[i].high_m[axis];
        box_add(&r.bounds, ref[i].low_m, ref[i].high_m);
        box_add(&r.middles, middle, middle);
    }
    return r;
}

/* Twice the middle of a box falls into bin (middle - low) * scale. */
typedef struct { float low[3], scale[3]; } binning;

static inline int bin_of(const binning *b, const rg_box_ref *ref, int axis)
{
    const int i = (int)((ref->low_m[axis] + ref->high_m[axis] - b->low[axis]) * b->scale[axis]);
    return i < BINS ? i : BINS - 1;
}

/* scale 0: all in one bin, so this axis cannot be cut. */
static binning binning_of(const range *r)
{
    binning b;
    for (int axis = 0; axis < 3; axis++) {
        const float extent = r->middles.high[axis] - r->middles.low[axis], scale = (float)BINS * 0.9999f / extent;
        b.low[axis] = r->middles.low[axis];
        b.scale[axis] = extent > 0.0f && scale < INFINITY && extent < INFINITY ? scale : 0.0f;
    }
    return b;
}

static void fill_bins(const binning *how, const rg_box_ref ref[], size_t n, bin bins[3][BINS])
{
    for (int axis = 0; axis < 3; axis++)
        for (int i = 0; i < BINS; i++) bins[axis][i] = (bin){nothing, 0};
    for (size_t i = 0; i < n; i++)
        for (int axis = 0; axis < 3; axis++) {
            bin *b = &bins[axis][bin_of(how, &ref[i], axis)];
            box_add(&b->bounds, ref[i].low_m, ref[i].high_m);
            b->n++;
        }
}

typedef struct { int axis, bin; float cost; } cut;     /* bin is the first on the high side */

/* Facets are met eight at a time, so a side costs its area times its blocks. */
static inline float cost_of(const box *bounds, size_t n) { return half_area(bounds) * (float)((n + RG_WIDTH - 1) / RG_WIDTH); }

static cut best_cut(const bin bins[3][BINS])
{
    cut best = {-1, 0, INFINITY};
    for (int axis = 0; axis < 3; axis++) {
        float high_cost[BINS];
        box side = nothing;
        size_t n = 0;
        for (int i = BINS - 1; i > 0; i--) {
            box_add(&side, bins[axis][i].bounds.low, bins[axis][i].bounds.high);
            n += bins[axis][i].n;
            high_cost[i] = n ? cost_of(&side, n) : INFINITY;
        }
        side = nothing;
        n = 0;
        for (int i = 1; i < BINS; i++) {
            box_add(&side, bins[axis][i - 1].bounds.low, bins[axis][i - 1].bounds.high);
            n += bins[axis][i - 1].n;
            const float cost = n ? cost_of(&side, n) + high_cost[i] : INFINITY;
            if (cost < best.cost) best = (cut){axis, i, cost};
        }
    }
    return best;
}

/* Moves the low side to the front; returns how many it has. */
static size_t part_refs(rg_box_ref ref[], size_t n, const binning *how, cut at)
{
    size_t low = 0, high = n;
    for (;;) {
        while (low < high && bin_of(how, &ref[low], at.axis) < at.bin) low++;
        while (low < high && bin_of(how, &ref[high - 1], at.axis) >= at.bin) high--;
        if (low == high) return low;
        const rg_box_ref swap = ref[low];
        ref[low++] = ref[--high];
        ref[high] = swap;
    }
}

static void cut_range(rg_box_ref ref[], const range *whole, range *low, range *high)
{
    bin bins[3][BINS];
    const binning how = binning_of(whole);
    size_t n_low = 0;
    if (whole->depth < RG_FREE_DEPTH) {
        fill_bins(&how, ref + whole->first, whole->n, bins);
        const cut at = best_cut(bins);
        if (at.axis >= 0) n_low = part_refs(ref + whole->first, whole->n, &how, at);
    }
    if (n_low == 0 || n_low == whole->n) n_low = whole->n / 2;
    const size_t first = whole->first, n = whole->n;
    const int depth = whole->depth + 1;
    *low = measure(ref, first, n_low, depth);
    *high = measure(ref, first + n_low, n - n_low, depth);
}

static int widest_to_cut(const range piece[], int n)
{
    int widest = -1;
    for (int i = 0; i < n; i++)
        if (piece[i].n > RG_WIDTH && (widest < 0 || half_area(&piece[i].bounds) > half_area(&piece[widest].bounds))) widest = i;
    return widest;
}

static void split_node(forest *f, uint32_t index, const range *whole)
{
    range piece[RG_WIDTH] = {*whole};
    int n = whole->n > 0;
    for (int i; n && n < RG_WIDTH && (i = widest_to_cut(piece, n)) >= 0; n++) {
        const range old = piece[i];
        cut_range(f->ref, &old, &piece[i], &piece[n]);
    }
    rg_node *node = &f->node[index];
    memset(node, 0, sizeof *node);
    node->n = (uint32_t)n;
    for (int i = 0; i < RG_WIDTH; i++)
        for (int axis = 0; axis < 3; axis++) {
            node->low_m[axis][i] = i < n ? piece[i].bounds.low[axis] : INFINITY;
            node->high_m[axis][i] = i < n ? piece[i].bounds.high[axis] : -INFINITY;
        }
    for (int i = 0; i < n; i++) {
        const range part = piece[i];
        uint32_t child;
        if (part.n <= RG_WIDTH) {
            node->child[i] = RG_BLOCK_BIT | (uint32_t)part.first;
            node->n_facets[i] = (uint8_t)part.n;
            continue;
        }
#pragma omp atomic capture
        child = f->n_nodes++;
        node->child[i] = child;
        if (part.n > TASK) {
#pragma omp task firstprivate(child, part) shared(f)
            split_node(f, child, &part);
        } else split_node(f, child, &part);
    }
#pragma omp taskwait
}

size_t rg_bvh_split(rg_box_ref ref[], size_t n, rg_node node[])
{
    forest f = {ref, node, 1};
    const range all = measure(ref, 0, n, 0);
#pragma omp parallel
#pragma omp single
    split_node(&f, 0, &all);
    return f.n_nodes;
}
