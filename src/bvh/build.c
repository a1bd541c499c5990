/* build.c - from facets to a tree of nodes and blocks */
#include "bvh/tree.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>

static void find_middle(rg_bvh *bvh)
{
    double low[3] = {INFINITY, INFINITY, INFINITY}, high[3] = {-INFINITY, -INFINITY, -INFINITY};
#pragma omp parallel for reduction(min : low) reduction(max : high)     /* of which no order shows */
    for (size_t i = 0; i < bvh->n_facets; i++)
        for (int c = 0; c < 3; c++)
            for (int axis = 0; axis < 3; axis++) {
                const double x = bvh->vertex_m[bvh->facet[i][c]][axis];
                low[axis] = x < low[axis] ? x : low[axis];
                high[axis] = x > high[axis] ? x : high[axis];
            }
    for (int axis = 0; axis < 3 && bvh->n_facets; axis++) {
        bvh->middle_m[axis] = 0.5 * low[axis] + 0.5 * high[axis];
        bvh->half_m[axis] = fmax(high[axis] - bvh->middle_m[axis], bvh->middle_m[axis] - low[axis]) * (1.0 + 0x1p-50);
    }
}

static void fill_ref(const rg_bvh *bvh, size_t facet, rg_box_ref *ref)
{
    ref->facet = (uint32_t)facet;
    for (int axis = 0; axis < 3; axis++) {
        double low = INFINITY, high = -INFINITY;
        for (int c = 0; c < 3; c++) {
            const double x = bvh->vertex_m[bvh->facet[facet][c]][axis] - bvh->middle_m[axis];
            low = x < low ? x : low;
            high = x > high ? x : high;
        }
        ref->low_m[axis] = rg_float_down(low);
        ref->high_m[axis] = rg_float_up(high);
    }
}

static void fill_leaf(const rg_bvh *bvh, const rg_box_ref ref[], uint32_t n, rg_leaf *leaf)
{
    memset(leaf, 0, sizeof *leaf);
    leaf->n = n;
    for (uint32_t i = 0; i < RG_WIDTH; i++) {
        leaf->facet[i] = ref[i < n ? i : n - 1].facet;
        for (int c = 0; c < 3; c++)
            for (int axis = 0; axis < 3; axis++)
                leaf->corner_m[c][axis][i] = bvh->vertex_m[bvh->facet[leaf->facet[i]][c]][axis];
    }
}

/* Copies the nodes in the order of a walk, children before grandchildren, and gives each block a number: the tree is then the same
 * bytes for any number of threads. first[] and count[] say which references a block takes. */
static void order_nodes(rg_bvh *bvh, const rg_node loose[], uint32_t first[])
{
    size_t n_nodes = 1, n_leaves = 0;
    bvh->node[0] = loose[0];
    for (size_t i = 0; i < n_nodes; i++) {
        rg_node *node = &bvh->node[i];
        for (uint32_t c = 0; c < node->n; c++) {
            if (node->n_facets[c]) {
                first[n_leaves] = node->child[c] & ~RG_BLOCK_BIT;
                node->child[c] = RG_BLOCK_BIT | (uint32_t)n_leaves++;
            } else {
                bvh->node[n_nodes] = loose[node->child[c]];
                node->child[c] = (uint32_t)n_nodes++;
            }
        }
    }
}

static void *take(size_t n, size_t element)
{
    const size_t bytes = (n * element + 63) / 64 * 64;
    return n > (SIZE_MAX - 64) / element ? NULL : aligned_alloc(64, bytes ? bytes : 64);
}

static size_t count_leaves(const rg_node node[], size_t n_nodes)
{
    size_t n = 0;
    for (size_t i = 0; i < n_nodes; i++)
        for (uint32_t c = 0; c < node[i].n; c++) n += node[i].n_facets[c] > 0;
    return n;
}

static bool grow(rg_bvh *bvh)
{
    const size_t n = bvh->n_facets;
    bool enough = false;
    uint32_t *first = NULL;
    rg_box_ref *ref = take(n, sizeof *ref);
    rg_node *loose = take(n / (RG_WIDTH - 1) + 2, sizeof *loose);
    if (!ref || !loose) goto done;
#pragma omp parallel for
    for (size_t i = 0; i < n; i++) fill_ref(bvh, i, &ref[i]);
    bvh->n_nodes = rg_bvh_split(ref, n, loose);
    bvh->n_leaves = count_leaves(loose, bvh->n_nodes);
    bvh->node = take(bvh->n_nodes, sizeof *bvh->node);
    bvh->leaf = take(bvh->n_leaves, sizeof *bvh->leaf);
    first = take(bvh->n_leaves, sizeof *first);
    if (!bvh->node || !bvh->leaf || !first) goto done;
    order_nodes(bvh, loose, first);
#pragma omp parallel for schedule(dynamic, 256)
    for (size_t i = 0; i < bvh->n_nodes; i++)
        for (uint32_t c = 0; c < bvh->node[i].n; c++) {
            const uint32_t leaf = bvh->node[i].child[c] & ~RG_BLOCK_BIT;
            if (bvh->node[i].n_facets[c]) fill_leaf(bvh, ref + first[leaf], bvh->node[i].n_facets[c], &bvh->leaf[leaf]);
        }
    enough = true;
done:
    free(ref);
    free(loose);
    free(first);
    return enough;
}

rg_status rg_bvh_build(rg_bvh **out, size_t n_vertices, const double vertex_m[][3], size_t n_facets, const uint32_t facet[][3],
                       rg_cpu cpu, rg_error *err)
{
    static const rg_bvh_kernels *const kernels[RG_N_CPU] = {&rg_bvh_plain, &rg_bvh_wide, &rg_bvh_avx2, &rg_bvh_avx512};
    rg_bvh *bvh = calloc(1, sizeof *bvh);
    if (bvh) {
        bvh->kernels = kernels[cpu];
        bvh->n_vertices = n_vertices;
        bvh->n_facets = n_facets;
        bvh->vertex_m = vertex_m;
        bvh->facet = facet;
        find_middle(bvh);
    }
    if (!bvh || n_facets >= RG_BLOCK_BIT || !grow(bvh)) {
        rg_bvh_free(bvh);
        return rg_fail(err, RG_NO_MEMORY, "no memory for the search tree of %zu facets", n_facets);
    }
    *out = bvh;
    return RG_OK;
}

void rg_bvh_free(rg_bvh *bvh)
{
    if (!bvh) return;
    free(bvh->node);
    free(bvh->leaf);
    free(bvh);
}
