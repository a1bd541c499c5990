/* prism_frame.h - a prism made ready: planes of single precision for boxes, and for facets the view along `toward`
 *
 * The prism is bounded by three side planes (an edge and `toward` span each), by the triangle's own plane, and by the axis planes
 * about it. What lies beyond one plane altogether cannot reach in; nor can what one of the facet's own edges, or its own plane, parts
 * from the prism. Each plane is moved out by a bound on the rounding of its test, so what does reach in is never lost.
 *
 * Facets are seen along `toward`: corners relative to the triangle's corner 0 are sheared along the dominant axis of `toward`, which
 * makes points of (x, y) and the prism a triangle. u = 2^-53, L = the farthest that any corner lies from corner 0 along one axis:
 *   a relative coordinate is off by u L, a sheared one by 6 u L and under 2 L (one rounding of the shear's slope, of the product and
 *   of the sum); the difference of two by 16 u L and under 4 L. The cross product of a difference as short as e, which comes of
 *   corners and is off by 16 u e, and one of 4 L is then off by (2*16 + 2*4*16 + 16) u e L < 2^-45 e L.
 */
#ifndef RG_BVH_PRISM_FRAME_H
#define RG_BVH_PRISM_FRAME_H
#include "bvh/tree.h"
#include <float.h>
#include <math.h>

typedef struct { float normal[3], limit; } rg_box_plane;    /* beyond when normal.x > limit; x from rg_bvh.middle_m */

typedef struct {
    float low_m[3], high_m[3];      /* of the prism, from rg_bvh.middle_m; infinite along `toward` */
    rg_box_plane plane[4];          /* the sides along edges 0, 1, 2 (edge i runs from corner i to i + 1), then the triangle's own */
    double corner_m[3][3];
    int kx, ky, kz;                 /* kz: the dominant axis of `toward` */
    double slope_x, slope_y;
    double up;                      /* sign of `toward` along kz */
    double at_m[3][2];              /* the corners as seen */
    double side[3][3];              /* beyond edge i when side[0] x + side[1] y > side[2] */
    double own[4];                  /* behind the triangle's plane when own.r > own[3], r from corner 0 */
    double apart_m2;                /* bound of a cross product's rounding for edges of any facet */
} rg_prism_frame;

static inline double rg_larger(double a, double b) { return a > b ? a : b; }    /* fmax is a call */

/* a x b, and the sums of the products' absolute values, of which 2^-51 bounds its rounding and that of two rounded factors */
static inline void rg_cross_bound(const double a[3], const double b[3], double out[3], double bound[3])
{
    for (int i = 0; i < 3; i++) {
        const int j = (i + 1) % 3, k = (i + 2) % 3;
        out[i] = a[j] * b[k] - a[k] * b[j];
        bound[i] = fabs(a[j] * b[k]) + fabs(a[k] * b[j]);
    }
}

/* For boxes, plane p through corner p % 3: the normal's rounding to a float, the product and two sums are 5 of 2^-24, of |normal|.half;
 * 2^-21 covers it. The doubles add 2^-49 bound.reach, reach being how far a box lies from the corner. FLT_MIN stands for what
 * underflows. Returns the part of the doubles. */
static inline double rg_set_plane(rg_prism_frame *f, const rg_bvh *bvh, int p, const double normal[3], const double bound[3])
{
    double error = 0.0, box_error = FLT_MIN, offset = 0.0;
    for (int axis = 0; axis < 3; axis++) {
        const double from_middle = f->corner_m[p % 3][axis] - bvh->middle_m[axis], half = bvh->half_m[axis];
        error += 0x1p-49 * bound[axis] * (fabs(from_middle) + half + 0x1p-50 * fabs(bvh->middle_m[axis]));
        box_error += 0x1p-21 * fabs(normal[axis]) * half + 0x1p-49 * fabs(normal[axis] * bvh->middle_m[axis]);
        offset += normal[axis] * from_middle;
        f->plane[p].normal[axis] = (float)normal[axis];
    }
    f->plane[p].limit = rg_float_up(offset + box_error + 2.0 * error);
    return error;
}

static inline void rg_no_planes(rg_prism_frame *f)
{
    for (int p = 0; p < 4; p++) f->plane[p] = (rg_box_plane){{0.0f, 0.0f, 0.0f}, INFINITY};
    for (int p = 0; p < 3; p++) f->side[p][0] = f->side[p][1] = 0.0, f->side[p][2] = INFINITY;
    f->own[0] = f->own[1] = f->own[2] = 0.0;
    f->own[3] = INFINITY;
}

static inline void rg_set_boxes(rg_prism_frame *f, const rg_bvh *bvh, const double toward[3])
{
    for (int axis = 0; axis < 3; axis++) {
        const double a = f->corner_m[0][axis], b = f->corner_m[1][axis], c = f->corner_m[2][axis];
        const double ab_low = a < b ? a : b, ab_high = a > b ? a : b, low = ab_low < c ? ab_low : c, high = ab_high > c ? ab_high : c;
        const double slack = 0x1p-52 * fabs(bvh->middle_m[axis]);
        f->low_m[axis] = toward[axis] < 0.0 ? -INFINITY : rg_float_down(low - bvh->middle_m[axis] - slack);
        f->high_m[axis] = toward[axis] > 0.0 ? INFINITY : rg_float_up(high - bvh->middle_m[axis] + slack);
    }
}

/* Sets how the corners are seen; returns the length of their longest edge along one axis, and L of above. */
static inline double rg_set_view(rg_prism_frame *f, const rg_bvh *bvh, const double toward[3], double *reach_m)
{
    const double x = fabs(toward[0]), y = fabs(toward[1]), z = fabs(toward[2]);
    double edge_m = 0.0;
    f->kz = x > y ? (x > z ? 0 : 2) : (y > z ? 1 : 2);
    f->kx = (f->kz + 1) % 3;
    f->ky = (f->kz + 2) % 3;
    f->slope_x = toward[f->kx] / toward[f->kz];
    f->slope_y = toward[f->ky] / toward[f->kz];
    f->up = toward[f->kz] > 0.0 ? 1.0 : -1.0;
    for (int i = 0; i < 3; i++) {
        const double rx = f->corner_m[i][f->kx] - f->corner_m[0][f->kx], ry = f->corner_m[i][f->ky] - f->corner_m[0][f->ky],
                     rz = f->corner_m[i][f->kz] - f->corner_m[0][f->kz];
        f->at_m[i][0] = rx - f->slope_x * rz;
        f->at_m[i][1] = ry - f->slope_y * rz;
        edge_m = rg_larger(edge_m, rg_larger(fabs(rx), rg_larger(fabs(ry), fabs(rz))));
    }
    *reach_m = edge_m;
    for (int axis = 0; axis < 3; axis++)
        *reach_m = rg_larger(*reach_m, (fabs(f->corner_m[0][axis] - bvh->middle_m[axis]) + bvh->half_m[axis]) * (1.0 + 0x1p-40) +
                                  0x1p-50 * fabs(bvh->middle_m[axis]));
    return edge_m;
}

static inline rg_prism_frame rg_prism_frame_of(const rg_bvh *bvh, const rg_prism *prism)
{
    rg_prism_frame f;
    double edge[3][3], out[3], bound[3], reach_m;
    for (int i = 0; i < 3; i++)
        for (int axis = 0; axis < 3; axis++) {
            f.corner_m[i][axis] = prism->corner_m[i][axis];
            edge[i][axis] = prism->corner_m[(i + 1) % 3][axis] - prism->corner_m[i][axis];
        }
    rg_set_boxes(&f, bvh, prism->toward);
    const double edge_m = rg_set_view(&f, bvh, prism->toward, &reach_m);
    f.apart_m2 = 0x1p-43 * reach_m * reach_m;       /* e is 4 L */
    const double area2 = f.at_m[1][0] * f.at_m[2][1] - f.at_m[1][1] * f.at_m[2][0];
    if (!(fabs(area2) > 0x1p-45 * edge_m * edge_m)) {       /* edge-on: which way is out of it? The box about it must do */
        rg_no_planes(&f);
        return f;
    }
    for (int p = 0; p < 3; p++) {
        const double *a = f.at_m[p], *b = f.at_m[(p + 1) % 3], turn = area2 > 0.0 ? 1.0 : -1.0;
        f.side[p][0] = turn * (b[1] - a[1]);
        f.side[p][1] = turn * (a[0] - b[0]);
        f.side[p][2] = (p == 1 ? f.side[p][0] * a[0] + f.side[p][1] * a[1] : 0.0) + 0x1p-44 * edge_m * reach_m;
        rg_cross_bound(edge[p], prism->toward, out, bound);
        for (int axis = 0; axis < 3; axis++) out[axis] *= turn * f.up;
        rg_set_plane(&f, bvh, p, out, bound);
    }
    rg_cross_bound(edge[0], edge[1], out, bound);
    const double turn = (area2 > 0.0) == (f.up > 0.0) ? -1.0 : 1.0;
    for (int axis = 0; axis < 3; axis++) f.own[axis] = out[axis] *= turn;
    f.own[3] = rg_set_plane(&f, bvh, 3, out, bound);
    return f;
}

/* A facet's corners as seen. */
typedef struct { double at_m[3][2]; bool same[3][3]; } rg_seen_facet;     /* same[c][k]: corner c is the prism's corner k */

/* One of the facet's edges, from corner e, has all of the prism on its far side. A corner of both lies on the edge's line, whatever
 * rounding says, and is no obstacle as long as the facet is not seen edge-on. */
static inline bool rg_edge_parts(const rg_prism_frame *f, const rg_seen_facet *s, int e)
{
    const double *p = s->at_m[e], *q = s->at_m[(e + 1) % 3], *third = s->at_m[(e + 2) % 3];
    const double x = q[0] - p[0], y = q[1] - p[1], w = x * (third[1] - p[1]) - y * (third[0] - p[0]);
    const double low = (w < 0.0 ? w : 0.0) - f->apart_m2, high = (w > 0.0 ? w : 0.0) + f->apart_m2;
    bool under = true, over = true;
    for (int k = 0; k < 3; k++) {
        const double value = x * (f->at_m[k][1] - p[1]) - y * (f->at_m[k][0] - p[0]);
        const bool on = s->same[e][k] || s->same[(e + 1) % 3][k];
        under &= value < low || (on && w > f->apart_m2);
        over &= value > high || (on && w < -f->apart_m2);
    }
    return under || over;
}

/* The triangle, and so the prism, lies before the facet's plane, which corner 0 of the facet is taken of. The bound is that of
 * rg_set_plane, doubled for the heights' own rounding. */
static inline bool rg_stands_before(const rg_prism_frame *f, const rg_seen_facet *s, const rg_leaf *leaf, uint32_t i)
{
    double edge[2][3], normal[3], bound[3];
    for (int axis = 0; axis < 3; axis++)
        for (int e = 0; e < 2; e++) edge[e][axis] = leaf->corner_m[e + 1][axis][i] - leaf->corner_m[0][axis][i];
    const double *a = s->at_m[0], *b = s->at_m[1], *c = s->at_m[2];
    const double area2 = (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
    if (!(fabs(area2) > f->apart_m2)) return false;
    rg_cross_bound(edge[0], edge[1], normal, bound);
    const double turn = (area2 > 0.0) == (f->up > 0.0) ? 1.0 : -1.0;
    for (int k = 0; k < 3; k++) {
        double height = 0.0, error = 0.0;
        for (int axis = 0; axis < 3; axis++) {
            const double r = f->corner_m[k][axis] - leaf->corner_m[0][axis][i];
            height += normal[axis] * r;
            error += 0x1p-48 * bound[axis] * fabs(r);
        }
        if (!(turn * height > error || s->same[0][k] || s->same[1][k] || s->same[2][k])) return false;
    }
    return true;
}

/* What the planes of the prism leave over: does the facet itself part the two? */
static inline bool rg_parts(const rg_prism_frame *f, const rg_seen_facet *s, const rg_leaf *leaf, uint32_t i)
{
    return rg_edge_parts(f, s, 0) || rg_edge_parts(f, s, 1) || rg_edge_parts(f, s, 2) || rg_stands_before(f, s, leaf, i);
}

/* False when something parts the facet in lane i from the prism, or they only touch. A corner that is also the prism's lies on the
 * planes through that, whatever rounding says: so a facet's neighbours on a convex body are not named. */
static inline bool rg_may_reach(const rg_prism_frame *f, const rg_leaf *leaf, uint32_t i)
{
    rg_seen_facet s;
    bool beyond[4] = {true, true, true, true};
    for (int c = 0; c < 3; c++) {
        double r[3];
        for (int axis = 0; axis < 3; axis++) r[axis] = leaf->corner_m[c][axis][i] - f->corner_m[0][axis];
        for (int k = 0; k < 3; k++)
            s.same[c][k] = leaf->corner_m[c][0][i] == f->corner_m[k][0] && leaf->corner_m[c][1][i] == f->corner_m[k][1] &&
                           leaf->corner_m[c][2][i] == f->corner_m[k][2];
        const double x = s.at_m[c][0] = r[f->kx] - f->slope_x * r[f->kz], y = s.at_m[c][1] = r[f->ky] - f->slope_y * r[f->kz];
        for (int p = 0; p < 3; p++)
            beyond[p] &= f->side[p][0] * x + f->side[p][1] * y > f->side[p][2] || s.same[c][p] || s.same[c][(p + 1) % 3];
        beyond[3] &= f->own[0] * r[0] + f->own[1] * r[1] + f->own[2] * r[2] > f->own[3] || s.same[c][0] || s.same[c][1] || s.same[c][2];
    }
    return !(beyond[0] || beyond[1] || beyond[2] || beyond[3]) && !rg_parts(f, &s, leaf, i);
}

#endif
