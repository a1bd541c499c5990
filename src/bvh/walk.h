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

/* Most rays of a large tree wait for memory: what will be looked at is fetched as soon as that is known. */
RG_INLINE void fetch(const rg_bvh *bvh, uint32_t child, uint32_t n_facets)
{
    const char *at = n_facets ? (const char *)&bvh->leaf[child & ~RG_BLOCK_BIT] : (const char *)&bvh->node[child];
    const int size = n_facets ? (int)sizeof(rg_leaf) : (int)sizeof(rg_node);
    for (int i = 0; i < size; i += 64) __builtin_prefetch(at + i);
}

/* Bits of the children that the ray meets up to limit_m, and where it enters them. */
RG_INLINE uint32_t meet_boxes(const rg_node *node, const rg_box_ray *ray, float limit_m, float enter_m[RG_WIDTH])
{
    uint32_t met = 0;
    for (int i = 0; i < RG_WIDTH; i += RG_FLOATS) {
        floats first = floats_all(0.0f), last = floats_all(limit_m);
        for (int axis = 0; axis < 3; axis++) {
            const float *near = ray->backward[axis] ? node->high_m[axis] : node->low_m[axis];
            const float *far = ray->backward[axis] ? node->low_m[axis] : node->high_m[axis];
            first = floats_max((floats_at(near + i) - ray->enter_m[axis]) * ray->inverse[axis], first);     /* 0 * inf drops out */
            last = floats_min((floats_at(far + i) - ray->leave_m[axis]) * ray->inverse[axis], last);
        }
        *(floats *)(enter_m + i) = first;
        met |= floats_at_most(first, last * RG_LEAVE) << i;
    }
    return met & ((1u << node->n) - 1u);
}

/* Bits of the facets on whose edges the ray keeps to one side: the first half of rg_meets. */
RG_INLINE uint32_t meet_facets(const rg_leaf *leaf, const rg_ray_frame *f)
{
    uint32_t missed = 0;
    for (int i = 0; i < RG_WIDTH; i += RG_DOUBLES) {
        doubles x[3], y[3];
        for (int c = 0; c < 3; c++) {
            const doubles z = doubles_at(leaf->corner_m[c][f->kz] + i) - f->oz;
            x[c] = (doubles_at(leaf->corner_m[c][f->kx] + i) - f->ox) - f->sx * z;
            y[c] = (doubles_at(leaf->corner_m[c][f->ky] + i) - f->oy) - f->sy * z;
        }
        const doubles u = x[2] * y[1] - y[2] * x[1], v = x[0] * y[2] - y[0] * x[2], w = x[1] * y[0] - y[1] * x[0], zero = {0};
        missed |= (doubles_over(zero, doubles_min(u, doubles_min(v, w))) & doubles_over(doubles_max(u, doubles_max(v, w)), zero)) << i;
    }
    return ~missed & ((1u << leaf->n) - 1u);
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
        float enter_m[RG_WIDTH];
        uint32_t met = meet_boxes(node, &box, limit_m, enter_m);
        for (uint32_t ahead = met; ahead; ahead &= ahead - 1) fetch(bvh, node->child[__builtin_ctz(ahead)], node->n_facets[__builtin_ctz(ahead)]);
        for (; met; met &= met - 1) {
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
RG_INLINE int push_met(const rg_bvh *bvh, step stack[], int top, const rg_node *node, uint32_t met, const float enter_m[])
{
    const int bottom = top;
    for (; met; met &= met - 1) {
        const uint32_t c = (uint32_t)__builtin_ctz(met);
        const step s = {enter_m[c], node->child[c], node->n_facets[c]};
        int at = top++;
        fetch(bvh, s.child, s.n_facets);
        for (; at > bottom && stack[at - 1].enter_m < s.enter_m; at--) stack[at] = stack[at - 1];
        stack[at] = s;
    }
    return top;
}

/* One ray on its way. */
typedef struct {
    const rg_ray *ray;
    rg_ray_frame frame;
    rg_box_ray box;
    rg_hit best;
    float limit_m;
    int top;
    step stack[RG_STACK];
} walker;

RG_INLINE void set_out(const rg_bvh *bvh, walker *w, const rg_ray *ray)
{
    w->ray = ray;
    w->frame = rg_ray_frame_of(ray);
    w->box = rg_box_ray_of(bvh, ray, &w->frame);
    w->best = (rg_hit){INFINITY, 0.0, 0.0, RG_NO_HIT};
    w->limit_m = rg_box_limit(&w->box, ray->t_max_m);
    w->top = 1;
    w->stack[0] = (step){0.0f, 0, 0};
}

/* One node or one leaf. False at the journey's end. */
RG_INLINE bool advance(const rg_bvh *bvh, walker *w)
{
    if (w->top == 0) return false;
    const step now = w->stack[--w->top];
    if (now.enter_m > w->limit_m * RG_LEAVE) return true;
    if (now.n_facets == 0) {
        const rg_node *node = &bvh->node[now.child];
        float enter_m[RG_WIDTH];
        const uint32_t met = meet_boxes(node, &w->box, w->limit_m, enter_m);
        w->top = push_met(bvh, w->stack, w->top, node, met, enter_m);
        return true;
    }
    const rg_leaf *leaf = &bvh->leaf[now.child & ~RG_BLOCK_BIT];
    rg_hit hit;
    for (uint32_t lanes = meet_facets(leaf, &w->frame); lanes; lanes &= lanes - 1)
        if (rg_meets(w->ray, &w->frame, leaf, (uint32_t)__builtin_ctz(lanes), &hit) && rg_nearer(&hit, &w->best)) {
            w->best = hit;
            w->limit_m = rg_box_limit(&w->box, hit.t_m);
        }
    return true;
}

RG_INLINE rg_hit walk_closest(const rg_bvh *bvh, const rg_ray *ray)
{
    walker w;
    for (set_out(bvh, &w, ray); advance(bvh, &w);) continue;
    return w.best;
}

/* All rays take a step in turn, so that while one waits for memory the others go on. */
RG_INLINE void walk_together(const rg_bvh *bvh, size_t n, const rg_ray ray[], bool any, rg_hit hit[])
{
    walker w[RG_WIDTH];
    uint32_t going = (1u << n) - 1u;
    for (size_t i = 0; i < n; i++) set_out(bvh, &w[i], &ray[i]);
    while (going)
        for (uint32_t left = going; left; left &= left - 1) {
            const uint32_t i = (uint32_t)__builtin_ctz(left);
            if (!advance(bvh, &w[i]) || (any && w[i].best.facet != RG_NO_HIT)) going &= ~(1u << i);
        }
    for (size_t i = 0; i < n; i++) hit[i] = w[i].best;
}

/* Bits of the boxes that no plane of the prism cuts off. */
RG_INLINE uint32_t boxes_in_prism(const rg_node *node, const rg_prism_frame *f)
{
    uint32_t kept = (1u << node->n) - 1u;
    for (int i = 0; i < RG_WIDTH; i += RG_FLOATS) {
        uint32_t these = kept >> i;
        for (int axis = 0; axis < 3; axis++)
            these &= floats_at_most(floats_all(f->low_m[axis]), floats_at(node->high_m[axis] + i)) &
                     floats_at_most(floats_at(node->low_m[axis] + i), floats_all(f->high_m[axis]));
        for (int p = 0; p < 4; p++) {
            const rg_box_plane *plane = &f->plane[p];
            floats least = floats_all(0.0f);
            for (int axis = 0; axis < 3; axis++)
                least += plane->normal[axis] * floats_at((plane->normal[axis] > 0.0f ? node->low_m[axis] : node->high_m[axis]) + i);
            these &= floats_at_most(least, floats_all(plane->limit));
        }
        kept &= ~(((1u << RG_FLOATS) - 1u) << i) | these << i;
    }
    return kept;
}

/* rg_seen_facet of all facets of a leaf: bit i of same is of facet i. */
typedef struct { double at_m[3][2][RG_WIDTH]; uint32_t same[3][3]; } seen_leaf;

/* Bits of the facets that no plane of the prism cuts off: rg_may_reach but for its last line. */
RG_INLINE uint32_t facets_in_prism(const rg_leaf *leaf, const rg_prism_frame *f, seen_leaf *seen)
{
    uint32_t beyond[4] = {~0u, ~0u, ~0u, ~0u};
    for (int c = 0; c < 3; c++) {
        uint32_t over[4] = {0}, same[3] = {0};
        for (int i = 0; i < RG_WIDTH; i += RG_DOUBLES) {
            doubles at[3], r[3];
            for (int axis = 0; axis < 3; axis++) {
                at[axis] = doubles_at(leaf->corner_m[c][axis] + i);
                r[axis] = at[axis] - f->corner_m[0][axis];
            }
            const doubles rx = doubles_at(leaf->corner_m[c][f->kx] + i) - f->corner_m[0][f->kx],
                          ry = doubles_at(leaf->corner_m[c][f->ky] + i) - f->corner_m[0][f->ky],
                          rz = doubles_at(leaf->corner_m[c][f->kz] + i) - f->corner_m[0][f->kz];
            const doubles x = rx - f->slope_x * rz, y = ry - f->slope_y * rz;
            *(doubles *)(seen->at_m[c][0] + i) = x;
            *(doubles *)(seen->at_m[c][1] + i) = y;
            for (int p = 0; p < 3; p++) over[p] |= doubles_over(f->side[p][0] * x + f->side[p][1] * y, doubles_all(f->side[p][2])) << i;
            over[3] |= doubles_over(f->own[0] * r[0] + f->own[1] * r[1] + f->own[2] * r[2], doubles_all(f->own[3])) << i;
            for (int k = 0; k < 3; k++)
                same[k] |= (doubles_same(at[0], doubles_all(f->corner_m[k][0])) & doubles_same(at[1], doubles_all(f->corner_m[k][1])) &
                            doubles_same(at[2], doubles_all(f->corner_m[k][2]))) << i;
        }
        for (int p = 0; p < 3; p++) beyond[p] &= over[p] | same[p] | same[(p + 1) % 3];
        beyond[3] &= over[3] | same[0] | same[1] | same[2];
        for (int k = 0; k < 3; k++) seen->same[c][k] = same[k];
    }
    return ~(beyond[0] | beyond[1] | beyond[2] | beyond[3]) & ((1u << leaf->n) - 1u);
}

RG_INLINE rg_seen_facet facet_of(const seen_leaf *seen, uint32_t i)
{
    rg_seen_facet s;
    for (int c = 0; c < 3; c++) {
        s.at_m[c][0] = seen->at_m[c][0][i];
        s.at_m[c][1] = seen->at_m[c][1][i];
        for (int k = 0; k < 3; k++) s.same[c][k] = seen->same[c][k] >> i & 1u;
    }
    return s;
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
            seen_leaf seen;
            for (uint32_t lanes = facets_in_prism(leaf, &frame, &seen); lanes; lanes &= lanes - 1) {
                const uint32_t i = (uint32_t)__builtin_ctz(lanes);
                const rg_seen_facet s = facet_of(&seen, i);
                if (!rg_parts(&frame, &s, leaf, i) && n++ < max) facet[n - 1] = leaf->facet[i];
            }
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
    rg_hit first[RG_WIDTH];
    walk_together(bvh, n, ray, true, first);
    for (size_t i = 0; i < n; i++) hit[i] = first[i].facet != RG_NO_HIT;
}
static void closest_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], rg_hit hit[]) { walk_together(bvh, n, ray, false, hit); }

#endif
