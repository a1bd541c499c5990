/* box_ray.h - a ray made ready for boxes of single precision; no box that the ray meets is missed
 *
 * The ray is moved forward to just before the box of all facets (t0_m), so that a far origin costs no digits. Its new origin is kept
 * rounded up and rounded down: the plane through which the ray enters a box is held against the one, the plane through which it leaves
 * against the other, whichever makes the stretch longer. What is left are three roundings of relative size 2^-24 on either side, which
 * RG_LEAVE covers on the far side alone: T. Ize, "Robust BVH Ray Traversal", JCGT 2(2), 2013.
 */
#ifndef RG_BVH_BOX_RAY_H
#define RG_BVH_BOX_RAY_H
#include "bvh/triangle.h"

#define RG_LEAVE (1.0f + 0x1p-20f)  /* over (1 + 3 * 2^-24)/(1 - 3 * 2^-24) */

typedef struct {
    float enter_m[3], leave_m[3];   /* origin, for the near and the far plane of each axis */
    float inverse[3];
    int backward[3];                /* 1: the near plane is the high one */
    double t0_m;
} rg_box_ray;

static inline rg_box_ray rg_box_ray_of(const rg_bvh *bvh, const rg_ray *ray, const rg_ray_frame *frame)
{
    const double size_m = bvh->half_m[0] + bvh->half_m[1] + bvh->half_m[2];
    const int k = frame->kz;
    const double along = (ray->origin_m[k] - bvh->middle_m[k]) * frame->sz;     /* distance from the middle's plane across axis k */
    const double before = -along - bvh->half_m[k] * fabs(frame->sz) - 0x1p-10 * size_m;
    rg_box_ray b = {.t0_m = before > 0.0 ? before : 0.0};
    for (int axis = 0; axis < 3; axis++) {
        const double o = ray->origin_m[axis], d = ray->direction[axis], step = b.t0_m * d;
        const double at = (o - bvh->middle_m[axis]) + step;
        double error = 0x1p-51 * (fabs(o) + fabs(bvh->middle_m[axis]) + fabs(step));
        if (fabs(d) < 1e-30) {          /* as good as along the planes: 1/d may not be a float */
            error += 1e-30 * 8.0 * size_m;
            b.inverse[axis] = INFINITY;
        } else {
            b.inverse[axis] = (float)(1.0 / d);
            b.backward[axis] = d < 0.0;
        }
        const float up = rg_float_up(at + error), down = rg_float_down(at - error);
        b.enter_m[axis] = b.backward[axis] ? down : up;
        b.leave_m[axis] = b.backward[axis] ? up : down;
    }
    return b;
}

/* A hit at t_m stays within it, and so does every hit that is as near. */
static inline float rg_box_limit(const rg_box_ray *b, double t_m)
{
    return rg_float_up(((t_m - b->t0_m) + RG_T_SLACK * t_m) * (1.0 + 0x1p-21));
}

#endif
