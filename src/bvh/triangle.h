/* triangle.h - where does a ray meet a facet? The definition that all variants of the ray kernels end in
 *
 * S. Woop, C. Benthin, I. Wald, "Watertight Ray/Triangle Intersection", JCGT 2(1), 2013. Corners are taken relative to the origin and
 * sheared so that the ray runs along its dominant axis; three edge functions in the plane across it then say whether the origin lies
 * inside. An edge function changes its sign, and nothing else, with the order of its two ends (contraction is off), so the two
 * facets of an edge agree on which side the ray passes, and 0 counts for both: no ray slips between.
 */
#ifndef RG_BVH_TRIANGLE_H
#define RG_BVH_TRIANGLE_H
#include "bvh/tree.h"
#include <float.h>
#include <math.h>

typedef struct {
    int kx, ky, kz;             /* kz: the direction's dominant axis */
    double ox, oy, oz;          /* the origin's coordinates along them */
    double sx, sy, sz;          /* shear and scale */
} rg_ray_frame;

static inline rg_ray_frame rg_ray_frame_of(const rg_ray *ray)
{
    const double *d = ray->direction;
    const double x = fabs(d[0]), y = fabs(d[1]), z = fabs(d[2]);
    rg_ray_frame f = {.kz = x > y ? (x > z ? 0 : 2) : (y > z ? 1 : 2)};
    f.kx = (f.kz + 1) % 3;
    f.ky = (f.kz + 2) % 3;
    f.ox = ray->origin_m[f.kx];
    f.oy = ray->origin_m[f.ky];
    f.oz = ray->origin_m[f.kz];
    f.sx = d[f.kx] / d[f.kz];
    f.sy = d[f.ky] / d[f.kz];
    f.sz = 1.0 / d[f.kz];
    return f;
}

static inline double rg_max3(double a, double b, double c)
{
    const double ab = a > b ? a : b;
    return ab > c ? ab : c;
}

/* How far t may be off when the origin is a rounded point and all else is rounded too. e = 2^-52, twice the unit roundoff; X, Y, Z are
 * the largest coordinates of the three corners relative to the origin o.
 *   A relative coordinate is off by e (X + |ox|) at most: one rounding of the difference, and the origin's own two.
 *   After the shear (|sx| <= 1, three more roundings)   Ex = e (2X + 4Z + |ox| + |oz|), and the coordinate is under Mx = X + Z.
 *   An edge function, a difference of two products, is off by   Ee = 2 (Mx Ey + My Ex) + 2 e Mx My.
 *   t = sz (u z0 + v z1 + w z2)/(u + v + w) is a mean of z with weights that are each off by Ee/|det|, and so is their sum, by 3 Ee/|det|:
 *   dt = |sz| (8 e Z + e |oz| + 8 Z Ee/|det|),  where 6 Z Ee is the first order and the rest covers the second. */
static inline double rg_distance_error(const rg_ray_frame *f, double x, double y, double z, double det)
{
    const double ox = fabs(f->ox), oy = fabs(f->oy), oz = fabs(f->oz);
    const double ex = 2.0 * x + 4.0 * z + ox + oz, ey = 2.0 * y + 4.0 * z + oy + oz, mx = x + z, my = y + z;
    const double edge = 2.0 * (mx * ey + my * ex) + 2.0 * mx * my;
    return fabs(f->sz) * DBL_EPSILON * (8.0 * z + oz + 8.0 * z * edge / fabs(det));
}

/* A hit whose error is under this share of its distance is as good as exact for the boxes, which allow for as much. */
#define RG_T_SLACK 0x1p-30

/* t moved into the stretch of the ray that runs through the facet's box. Of a facet seen nearly edge-on t is any distance between its
 * corners'; a box test would then lose the hit or not by the order of the walk. */
static inline double rg_into_box(const rg_ray *ray, const rg_leaf *leaf, uint32_t i, double t)
{
    double first = -INFINITY, last = INFINITY;
    for (int axis = 0; axis < 3; axis++) {
        const double d = ray->direction[axis], o = ray->origin_m[axis];
        double near = INFINITY, far = -INFINITY;
        for (int c = 0; c < 3 && d != 0.0; c++) {
            const double at = (leaf->corner_m[c][axis][i] - o) / d;
            near = at < near ? at : near;
            far = at > far ? at : far;
        }
        first = d != 0.0 && near > first ? near : first;
        last = d != 0.0 && far < last ? far : last;
    }
    t = t < last ? t : last;
    return t > first ? t : first;
}

/* The facet in lane i of a leaf. True when the ray meets it farther than rounding and not farther than t_max_m. */
static inline bool rg_meets(const rg_ray *ray, const rg_ray_frame *f, const rg_leaf *leaf, uint32_t i, rg_hit *hit)
{
    double x[3], y[3], z[3], big_x = 0.0, big_y = 0.0, big_z = 0.0;
    for (int c = 0; c < 3; c++) {
        const double ax = leaf->corner_m[c][f->kx][i] - f->ox, ay = leaf->corner_m[c][f->ky][i] - f->oy;
        z[c] = leaf->corner_m[c][f->kz][i] - f->oz;
        x[c] = ax - f->sx * z[c];
        y[c] = ay - f->sy * z[c];
        big_x = fabs(ax) > big_x ? fabs(ax) : big_x;
        big_y = fabs(ay) > big_y ? fabs(ay) : big_y;
        big_z = fabs(z[c]) > big_z ? fabs(z[c]) : big_z;
    }
    const double u = x[2] * y[1] - y[2] * x[1], v = x[0] * y[2] - y[0] * x[2], w = x[1] * y[0] - y[1] * x[0];
    if ((u < 0.0 || v < 0.0 || w < 0.0) && (u > 0.0 || v > 0.0 || w > 0.0)) return false;
    const double det = u + v + w;
    if (det == 0.0 || leaf->facet[i] == ray->from) return false;        /* 0: seen edge-on */
    const double error = rg_distance_error(f, big_x, big_y, big_z, det);
    double t = f->sz * ((u * z[0] + v * z[1] + w * z[2]) / det);
    if (!(t > error)) return false;
    if (error > RG_T_SLACK * t) t = rg_into_box(ray, leaf, i, t);
    if (!(t <= ray->t_max_m)) return false;
    *hit = (rg_hit){t, v / det, w / det, leaf->facet[i]};
    return true;
}

/* Nearest first, then the lowest index: what is best does not depend on the order of the walk. */
static inline bool rg_nearer(const rg_hit *a, const rg_hit *b)
{
    return a->t_m < b->t_m || (a->t_m == b->t_m && a->facet < b->facet);
}

#endif
