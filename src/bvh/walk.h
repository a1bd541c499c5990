/* walk.h - the queries eight boxes and eight facets at a time: one body for every vector unit
 *
 * Included once by each of walk_wide.c, walk_avx2.c and walk_avx512.c, which say for what instruction set. Boxes only ever prune, and
 * rg_meets and rg_may_reach have the last word, so all of them answer as plain.c does.
 */
#ifndef RG_BVH_WALK_H
#define RG_BVH_WALK_H
#include "bvh/box_ray.h"
#include "bvh/lanes.h"
#include "bvh/prism_frame.h"

typedef struct { float enter_m; uint32_t child, n_facets; } step;

/* Bits of the children that the ray meets up to limit_m, and where it enters them. */
RG_INLINE uint32_t meet_boxes(const rg_node *node, const rg_box_ray *ray, float limit_m, f32x8 *enter_m)
{
    f32x8 first = f32x8_all(0.0f), last = f32x8_all(limit_m);
    for (int axis = 0; axis < 3; axis++) {
        const f32x8 *low = (const void *)node->low_m[axis], *high = (const void *)node->high_m[axis];
        const f32x8 *near = ray->backward[axis] ? high : low, *far = ray->backward[axis] ? low : high;
        first = f32x8_max((*near - ray->enter_m[axis]) * ray->inverse[axis], first);   /* 0 * inf drops out */
        last = f32x8_min((*far - ray->leave_m[axis]) * ray->inverse[axis], last);
    }
    *enter_m = first;
    return f32x8_at_most(first, last * RG_LEAVE) & ((1u << node->n) - 1u);
}

/* Bits of the facets on whose edges the ray keeps to one side: the first half of rg_meets. */
RG_INLINE uint32_t meet_facets(const rg_leaf *leaf, const rg_ray_frame *f)
{
    f64x8 x[3], y[3];
    for (int c = 0; c < 3; c++) {
        const f64x8 *ax = (const void *)leaf->corner_m[c][f->kx], *ay = (const void *)leaf->corner_m[c][f->ky];
        const f64x8 *az = (const void *)leaf->corner_m[c][f->kz];
        const f64x8 z = *az - f->oz;
        x[c] = (*ax - f->ox) - f->sx * z;
        y[c] = (*ay - f->oy) - f->sy * z;
    }
    const f64x8 u = x[2] * y[1] - y[2] * x[1], v = x[0] * y[2] - y[0] * x[2], w = x[1] * y[0] - y[1] * x[0];
    const i64x8 below = (u < 0.0) | (v < 0.0) | (w < 0.0), above = (u > 0.0) | (v > 0.0) | (w > 0.0);
    return ~i64x8_bits(below & above) & ((1u << leaf->n) - 1u);
}

RG_INLINE bool walk_any(const rg_bvh *bvh, const rg_ray *ray)
{
    const rg_ray_frame frame = rg_ray_frame_of(ray);
    const rg_box_ray box = rg_box_ray_of(bvh, ray, &frame);
    const float limit_m = rg_box_limit(&box, ray->t_max_m);
    uint32_t stack[RG_STACK];
    int top = 0;
    stack[top++] = 0;
    while (top > 0) {
        const rg_node *node = &bvh->node[stack[--top]];
        f32x8 enter_m;
        for (uint32_t met = meet_boxes(node, &box, limit_m, &enter_m); met; met &= met - 1) {
            const uint32_t c = (uint32_t)__builtin_ctz(met);
            if (node->n_facets[c] == 0) {
                stack[top++] = node->child[c];
                continue;
            }
            const rg_leaf *leaf = &bvh->leaf[node->child[c] & ~RG_BLOCK_BIT];
            rg_hit hit;
            for (uint32_t lanes = meet_facets(leaf, &frame); lanes; lanes &= lanes - 1)
                if (rg_meets(ray, &frame, leaf, (uint32_t)__builtin_ctz(lanes), &hit)) return true;
        }
    }
    return false;
}

/* Adds the children that were met to the stack, the nearest on top. */
RG_INLINE int push_met(step stack[], int top, const rg_node *node, uint32_t met, const f32x8 *enter_m)
{
    const int bottom = top;
    for (; met; met &= met - 1) {
        const uint32_t c = (uint32_t)__builtin_ctz(met);
        const step s = {((const float *)enter_m)[c], node->child[c], node->n_facets[c]};
        int at = top++;
        for (; at > bottom && stack[at - 1].enter_m < s.enter_m; at--) stack[at] = stack[at - 1];
        stack[at] = s;
    }
    return top;
}

RG_INLINE rg_hit walk_closest(const rg_bvh *bvh, const rg_ray *ray)
{
    const rg_ray_frame frame = rg_ray_frame_of(ray);
    const rg_box_ray box = rg_box_ray_of(bvh, ray, &frame);
    float limit_m = rg_box_limit(&box, ray->t_max_m);
    rg_hit best = {INFINITY, 0.0, 0.0, RG_NO_HIT};
    step stack[RG_STACK];
    int top = 0;
    stack[top++] = (step){0.0f, 0, 0};
    while (top > 0) {
        const step now = stack[--top];
        if (now.enter_m > limit_m * RG_LEAVE) continue;
        if (now.n_facets == 0) {
            const rg_node *node = &bvh->node[now.child];
            f32x8 enter_m;
            const uint32_t met = meet_boxes(node, &box, limit_m, &enter_m);
            top = push_met(stack, top, node, met, &enter_m);
            continue;
        }
        const rg_leaf *leaf = &bvh->leaf[now.child & ~RG_BLOCK_BIT];
        rg_hit hit;
        for (uint32_t lanes = meet_facets(leaf, &frame); lanes; lanes &= lanes - 1)
            if (rg_meets(ray, &frame, leaf, (uint32_t)__builtin_ctz(lanes), &hit) && rg_nearer(&hit, &best)) {
                best = hit;
                limit_m = rg_box_limit(&box, hit.t_m);
            }
    }
    return best;
}

/* Bits of the boxes that no plane of the prism cuts off. */
RG_INLINE uint32_t boxes_in_prism(const rg_node *node, const rg_prism_frame *f)
{
    uint32_t kept = (1u << node->n) - 1u;
    for (int axis = 0; axis < 3; axis++) {
        const f32x8 *low = (const void *)node->low_m[axis], *high = (const void *)node->high_m[axis];
        kept &= f32x8_at_most(f32x8_all(f->low_m[axis]), *high) & f32x8_at_most(*low, f32x8_all(f->high_m[axis]));
    }
    for (int p = 0; p < 4; p++) {
        const rg_box_plane *plane = &f->plane[p];
        f32x8 least = f32x8_all(0.0f);
        for (int axis = 0; axis < 3; axis++) {
            const f32x8 *near = (const void *)(plane->normal[axis] > 0.0f ? node->low_m[axis] : node->high_m[axis]);
            least += plane->normal[axis] * *near;
        }
        kept &= f32x8_at_most(least, f32x8_all(plane->limit));
    }
    return kept;
}

/* rg_may_reach of eight facets. */
RG_INLINE uint32_t facets_in_prism(const rg_leaf *leaf, const rg_prism_frame *f)
{
    i64x8 beyond[4];
    for (int p = 0; p < 4; p++) beyond[p] = (i64x8){-1, -1, -1, -1, -1, -1, -1, -1};
    for (int c = 0; c < 3; c++) {
        const f64x8 *at_x = (const void *)leaf->corner_m[c][0], *at_y = (const void *)leaf->corner_m[c][1];
        const f64x8 *at_z = (const void *)leaf->corner_m[c][2];
        i64x8 far[4], same[3];
        for (int k = 0; k < 3; k++) {
            const double *corner = f->corner_m[k], *n = f->side[k].normal, *own = f->side[3].normal;
            const f64x8 x = *at_x - corner[0], y = *at_y - corner[1], z = *at_z - corner[2];
            far[k] = n[0] * x + n[1] * y + n[2] * z > f->side[k].limit;
            if (k == 0) far[3] = own[0] * x + own[1] * y + own[2] * z > f->side[3].limit;
            same[k] = (x == 0.0) & (y == 0.0) & (z == 0.0);
        }
        for (int k = 0; k < 3; k++) beyond[k] &= far[k] | same[k] | same[(k + 1) % 3];
        beyond[3] &= far[3] | same[0] | same[1] | same[2];
    }
    return ~i64x8_bits(beyond[0] | beyond[1] | beyond[2] | beyond[3]) & ((1u << leaf->n) - 1u);
}

RG_INLINE size_t walk_prism(const rg_bvh *bvh, const rg_prism *prism, size_t max, uint32_t facet[])
{
    const rg_prism_frame frame = rg_prism_frame_of(bvh, prism);
    uint32_t stack[RG_STACK];
    size_t n = 0;
    int top = 0;
    stack[top++] = 0;
    while (top > 0) {
        const rg_node *node = &bvh->node[stack[--top]];
        for (uint32_t kept = boxes_in_prism(node, &frame); kept; kept &= kept - 1) {
            const uint32_t c = (uint32_t)__builtin_ctz(kept);
            if (node->n_facets[c] == 0) {
                stack[top++] = node->child[c];
                continue;
            }
            const rg_leaf *leaf = &bvh->leaf[node->child[c] & ~RG_BLOCK_BIT];
            for (uint32_t lanes = facets_in_prism(leaf, &frame); lanes; lanes &= lanes - 1, n++)
                if (n < max) facet[n] = leaf->facet[__builtin_ctz(lanes)];
        }
    }
    return n;
}

static bool any(const rg_bvh *bvh, const rg_ray *ray) { return walk_any(bvh, ray); }
static rg_hit closest(const rg_bvh *bvh, const rg_ray *ray) { return walk_closest(bvh, ray); }
static size_t in_prism(const rg_bvh *bvh, const rg_prism *prism, size_t max, uint32_t facet[])
{
    return walk_prism(bvh, prism, max, facet);
}
static void any_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], bool hit[])
{
    for (size_t i = 0; i < n; i++) hit[i] = walk_any(bvh, &ray[i]);
}
static void closest_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], rg_hit hit[])
{
    for (size_t i = 0; i < n; i++) hit[i] = walk_closest(bvh, &ray[i]);
}

#endif
