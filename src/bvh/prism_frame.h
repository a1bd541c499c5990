/* prism_frame.h - a prism made ready: planes of single precision for boxes, and of double precision for facets
 *
 * The prism is bounded by three side planes (an edge and `toward` span each), by the triangle's own plane, and by the axis planes
 * about it. Each normal points out of the prism. What lies beyond one plane altogether cannot reach in; each plane is moved out by
 * a bound on the rounding of the test, so what does reach in is never lost.
 */
#ifndef RG_BVH_PRISM_FRAME_H
#define RG_BVH_PRISM_FRAME_H
#include "bvh/tree.h"
#include <float.h>
#include <math.h>

typedef struct { float normal[3], limit; } rg_box_plane;    /* of points from rg_bvh.middle_m: beyond when normal.x > limit */
typedef struct { double normal[3], limit; } rg_facet_plane; /* of points from corner_m[i % 3]: beyond when normal.x > limit */

typedef struct {
    float low_m[3], high_m[3];      /* of the prism, from rg_bvh.middle_m; infinite along `toward` */
    rg_box_plane plane[4];          /* the sides along edges 0, 1, 2 (edge i runs from corner i to i + 1), then the triangle's own */
    rg_facet_plane side[4];
    double corner_m[3][3];
} rg_prism_frame;

/* a x b, and the sums of the products' absolute values, of which 2^-51 bounds its rounding and that of two rounded factors */
static inline void rg_cross_bound(const double a[3], const double b[3], double out[3], double bound[3])
{
    for (int i = 0; i < 3; i++) {
        const int j = (i + 1) % 3, k = (i + 2) % 3;
        out[i] = a[j] * b[k] - a[k] * b[j];
        bound[i] = fabs(a[j] * b[k]) + fabs(a[k] * b[j]);
    }
}

/* Sets plane p through corner p % 3. bound: as of rg_cross_bound.
 *   Facets: normal.(x - corner) is off by 2^-51 bound.|x - corner| from the normal, half as much from the difference, and as much
 *   again from the products and sums: 2^-49 bound.reach covers it, reach being the farthest that a facet's corner lies from this one.
 *   Boxes: the normal's rounding to a float, the product and two sums are 5 of 2^-24, of |normal|.half; 2^-21 covers it with what
 *   the doubles add. FLT_MIN stands for what underflows. */
static inline void rg_set_plane(rg_prism_frame *f, const rg_bvh *bvh, int p, const double normal[3], const double bound[3])
{
    const double *corner = f->corner_m[p % 3];
    double error = 0.0, box_error = FLT_MIN, offset = 0.0;
    for (int axis = 0; axis < 3; axis++) {
        const double from_middle = corner[axis] - bvh->middle_m[axis], half = bvh->half_m[axis];
        error += 0x1p-49 * bound[axis] * (fabs(from_middle) + half + 0x1p-50 * fabs(bvh->middle_m[axis]));
        box_error += 0x1p-21 * fabs(normal[axis]) * half + 0x1p-49 * fabs(normal[axis] * bvh->middle_m[axis]);
        offset += normal[axis] * from_middle;
        f->side[p].normal[axis] = normal[axis];
        f->plane[p].normal[axis] = (float)normal[axis];
    }
    f->side[p].limit = error;
    f->plane[p].limit = rg_float_up(offset + box_error + 2.0 * error);
}

static inline void rg_no_plane(rg_prism_frame *f, int p)
{
    f->plane[p] = (rg_box_plane){{0.0f, 0.0f, 0.0f}, INFINITY};
    f->side[p] = (rg_facet_plane){{0.0, 0.0, 0.0}, INFINITY};
}

static inline rg_prism_frame rg_prism_frame_of(const rg_bvh *bvh, const rg_prism *prism)
{
    rg_prism_frame f;
    double edge[3][3], out[3], bound[3], shown = 0.0, shown_error = 0.0;
    for (int axis = 0; axis < 3; axis++) {
        const double *s = prism->toward;
        double low = INFINITY, high = -INFINITY;
        for (int i = 0; i < 3; i++) {
            const double x = prism->corner_m[i][axis];
            f.corner_m[i][axis] = x;
            edge[i][axis] = prism->corner_m[(i + 1) % 3][axis] - x;
            low = x < low ? x : low;
            high = x > high ? x : high;
        }
        const double slack = 0x1p-52 * fabs(bvh->middle_m[axis]);
        f.low_m[axis] = s[axis] < 0.0 ? -INFINITY : rg_float_down(low - bvh->middle_m[axis] - slack);
        f.high_m[axis] = s[axis] > 0.0 ? INFINITY : rg_float_up(high - bvh->middle_m[axis] + slack);
    }
    rg_cross_bound(edge[0], edge[1], out, bound);
    for (int axis = 0; axis < 3; axis++) {
        shown += out[axis] * prism->toward[axis];
        shown_error += 0x1p-49 * bound[axis] * fabs(prism->toward[axis]);
    }
    if (!(fabs(shown) > shown_error)) {         /* edge-on: which way is out of it? The box about it must do */
        for (int p = 0; p < 4; p++) rg_no_plane(&f, p);
        return f;
    }
    const double turn = shown > 0.0 ? 1.0 : -1.0;
    for (int axis = 0; axis < 3; axis++) out[axis] *= -turn;
    rg_set_plane(&f, bvh, 3, out, bound);
    for (int p = 0; p < 3; p++) {
        rg_cross_bound(edge[p], prism->toward, out, bound);
        for (int axis = 0; axis < 3; axis++) out[axis] *= turn;
        rg_set_plane(&f, bvh, p, out, bound);
    }
    return f;
}

/* False when all corners of the facet in lane i lie beyond one plane or on it. A corner that is one of the triangle's lies on the
 * planes through that, whatever rounding says: so a facet's neighbours on a convex body are not named. */
static inline bool rg_may_reach(const rg_prism_frame *f, const rg_leaf *leaf, uint32_t i)
{
    bool beyond[4] = {true, true, true, true};
    for (int c = 0; c < 3; c++) {
        double value[4];
        bool same[3];
        for (int k = 0; k < 3; k++) {
            const double x = leaf->corner_m[c][0][i] - f->corner_m[k][0], y = leaf->corner_m[c][1][i] - f->corner_m[k][1],
                         z = leaf->corner_m[c][2][i] - f->corner_m[k][2];
            value[k] = f->side[k].normal[0] * x + f->side[k].normal[1] * y + f->side[k].normal[2] * z;
            if (k == 0) value[3] = f->side[3].normal[0] * x + f->side[3].normal[1] * y + f->side[3].normal[2] * z;
            same[k] = x == 0.0 && y == 0.0 && z == 0.0;
        }
        for (int k = 0; k < 3; k++) beyond[k] &= value[k] > f->side[k].limit || same[k] || same[(k + 1) % 3];
        beyond[3] &= value[3] > f->side[3].limit || same[0] || same[1] || same[2];
    }
    return !(beyond[0] || beyond[1] || beyond[2] || beyond[3]);
}

#endif
