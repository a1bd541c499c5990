/* check.c - is the tree whole? */
#include "bvh/tree.h"
#include <stdlib.h>

static rg_status check_leaf(const rg_bvh *bvh, const rg_node *node, uint32_t c, unsigned char seen[], rg_error *err)
{
    const uint32_t at = node->child[c] & ~RG_BLOCK_BIT;
    if (!(node->child[c] & RG_BLOCK_BIT) || at >= bvh->n_leaves)
        return rg_fail(err, RG_BAD_INPUT, "a node names block %u of %zu", at, bvh->n_leaves);
    const rg_leaf *leaf = &bvh->leaf[at];
    if (leaf->n != node->n_facets[c] || leaf->n > RG_WIDTH) return rg_fail(err, RG_BAD_INPUT, "block %u has %u facets", at, leaf->n);
    for (uint32_t i = 0; i < leaf->n; i++) {
        const uint32_t facet = leaf->facet[i];
        if (facet >= bvh->n_facets || seen[facet]) return rg_fail(err, RG_BAD_INPUT, "facet %u stands in two blocks, or nowhere", facet);
        seen[facet] = 1;
        for (int k = 0; k < 3; k++)
            for (int axis = 0; axis < 3; axis++) {
                const double x = bvh->vertex_m[bvh->facet[facet][k]][axis], at_m = x - bvh->middle_m[axis];
                if (leaf->corner_m[k][axis][i] != x) return rg_fail(err, RG_BAD_INPUT, "facet %u has moved in its block", facet);
                if (at_m < (double)node->low_m[axis][c] || at_m > (double)node->high_m[axis][c])
                    return rg_fail(err, RG_BAD_INPUT, "facet %u stands out of its box", facet);
            }
    }
    return RG_OK;
}

/* Child c is a node: each has one parent, which stands before it, and no box of it stands out of its parent's. */
static rg_status check_node(const rg_bvh *bvh, size_t parent, uint32_t c, unsigned char depth[], rg_error *err)
{
    const rg_node *node = &bvh->node[parent];
    const uint32_t child = node->child[c];
    if (child <= parent || child >= bvh->n_nodes || depth[child])
        return rg_fail(err, RG_BAD_INPUT, "node %zu has node %u below it", parent, child);
    if (depth[parent] > RG_MAX_DEPTH) return rg_fail(err, RG_BAD_INPUT, "the tree is deeper than %d", RG_MAX_DEPTH);
    depth[child] = (unsigned char)(depth[parent] + 1);
    for (uint32_t i = 0; i < bvh->node[child].n; i++)
        for (int axis = 0; axis < 3; axis++)
            if (bvh->node[child].low_m[axis][i] < node->low_m[axis][c] || bvh->node[child].high_m[axis][i] > node->high_m[axis][c])
                return rg_fail(err, RG_BAD_INPUT, "a box of node %u stands out of its parent's", child);
    return RG_OK;
}

rg_status rg_bvh_check(const rg_bvh *bvh, rg_error *err)
{
    rg_status status = RG_OK;
    unsigned char *seen = calloc(bvh->n_facets + 1, 1), *depth = calloc(bvh->n_nodes + 1, 1);
    if (!seen || !depth) status = rg_fail(err, RG_NO_MEMORY, "no memory to check %zu facets", bvh->n_facets);
    for (size_t i = 0; i < bvh->n_nodes && !status; i++) {
        const rg_node *node = &bvh->node[i];
        if (node->n > RG_WIDTH || (i > 0 && !depth[i])) status = rg_fail(err, RG_BAD_INPUT, "node %zu hangs in the air", i);
        for (uint32_t c = 0; c < node->n && !status; c++)
            status = node->n_facets[c] ? check_leaf(bvh, node, c, seen, err) : check_node(bvh, i, c, depth, err);
    }
    for (size_t i = 0; i < bvh->n_facets && !status; i++)
        if (!seen[i]) status = rg_fail(err, RG_BAD_INPUT, "facet %zu stands in no block", i);
    free(seen);
    free(depth);
    return status;
}
