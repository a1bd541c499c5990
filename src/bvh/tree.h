/* tree.h - the tree as it lies in memory, and the kernels that walk it
 *
 * Per facet of a closed surface (measured: 7.4 facets a block, 22 a node): 87 bytes of blocks and 12 of nodes; while building another 32 of
 * references and 12 of unordered nodes, for which 37 are reserved. A block keeps its corners: a ray then waits for ten cache lines in a
 * row instead of twenty-four that are anywhere.
 */
#ifndef RG_BVH_TREE_H
#define RG_BVH_TREE_H
#include "bvh/bvh.h"

enum {
    RG_WIDTH = 8,               /* children a node, facets a block */
    RG_FREE_DEPTH = 48,         /* halvings that may follow the areas; after that a range is cut in equal halves */
    RG_MAX_DEPTH = RG_FREE_DEPTH + 33,
    RG_STACK = 7 * RG_MAX_DEPTH + 8
};

#define RG_BLOCK_BIT 0x80000000u    /* in rg_node.child: a block, not a node */

/* Boxes are single precision, in metres from rg_bvh.middle_m, rounded outward. Unused children stand last, as empty boxes. */
typedef struct {
    float low_m[3][RG_WIDTH], high_m[3][RG_WIDTH];
    uint32_t child[RG_WIDTH];
    uint8_t n_facets[RG_WIDTH];         /* of a child that is a block; 0: it is a node */
    uint32_t n;
    uint32_t unused[5];
} __attribute__((aligned(64))) rg_node;

/* Up to eight facets; those that are missing repeat the last one. */
typedef struct {
    double corner_m[3][3][RG_WIDTH];    /* [corner][axis][facet] */
    uint32_t facet[RG_WIDTH];
    uint32_t n;
    uint32_t unused[7];
} __attribute__((aligned(64))) rg_leaf;

typedef struct {
    bool (*any)(const rg_bvh *bvh, const rg_ray *ray);
    rg_hit (*closest)(const rg_bvh *bvh, const rg_ray *ray);
    void (*any_packet)(const rg_bvh *bvh, size_t n, const rg_ray ray[], bool hit[]);            /* n <= RG_WIDTH */
    void (*closest_packet)(const rg_bvh *bvh, size_t n, const rg_ray ray[], rg_hit hit[]);
    size_t (*in_prism)(const rg_bvh *bvh, const rg_prism *prism, size_t max, uint32_t facet[]);
} rg_bvh_kernels;

/* One for each level of rg_cpu; levels that the machine's family lacks are the portable one. */
extern const rg_bvh_kernels rg_bvh_plain, rg_bvh_wide, rg_bvh_avx2, rg_bvh_avx512;

struct rg_bvh {
    const rg_bvh_kernels *kernels;
    size_t n_vertices, n_facets, n_nodes, n_leaves;
    const double (*vertex_m)[3];        /* lent */
    const uint32_t (*facet)[3];         /* lent */
    rg_node *node;                      /* node[0] is the root */
    rg_leaf *leaf;
    double middle_m[3];
    double half_m[3];                   /* of the box of all facets about middle_m, rounded up */
};

/* To single precision, never up, never down. A rounding of x itself is allowed for. */
static inline float rg_float_step(float x, bool up)
{
    union { float value; uint32_t bits; } f = {x};
    if (x == 0.0f) f.bits = up ? 1u : 0x80000001u;
    else f.bits = (x > 0.0f) == up ? f.bits + 1u : f.bits - 1u;
    return f.value;
}

static inline float rg_float_up(double x)
{
    const float f = (float)x;
    return f - x > 0x1p-51 * (x < 0.0 ? -x : x) || f == __builtin_inff() ? f : rg_float_step(f, true);
}

static inline float rg_float_down(double x) { return -rg_float_up(-x); }

/* Splits n references into nodes in no stated order, node[0] the root; room for n / 7 + 2. A child that is a block holds its first
 * reference until build.c numbers the blocks. Returns how many nodes. */
typedef struct { float low_m[3]; uint32_t facet; float high_m[3]; uint32_t unused; } rg_box_ref;
size_t rg_bvh_split(rg_box_ref ref[], size_t n, rg_node node[]);

#endif
