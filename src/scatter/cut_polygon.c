/* cut_polygon.c - convex polygons on a facet, cut by half-planes */
#include "scatter/cut_polygon.h"

/* A polygon of less than this share of the facet is rounding: its corners carry some 2^-50. */
#define SLIVER 0x1p-46

double rg_half_plane_at(const rg_half_plane *plane, double a, double b)
{
    const double *f = plane->at_corner;
    return f[0] * (1.0 - a - b) + f[1] * a + f[2] * b;
}

double rg_polygon_fan_area2(const rg_polygon *p, int i)
{
    return (p->a[i] - p->a[0]) * (p->b[i + 1] - p->b[0]) - (p->b[i] - p->b[0]) * (p->a[i + 1] - p->a[0]);
}

double rg_polygon_area2(const rg_polygon *p)
{
    double sum = 0.0;
    for (int i = 1; i + 1 < p->n; i++) sum += rg_polygon_fan_area2(p, i);
    return sum;
}

/* Corners, and not the room for more. */
static void copy_polygon(rg_polygon *to, const rg_polygon *from)
{
    to->n = from->n;
    for (int i = 0; i < from->n; i++) {
        to->a[i] = from->a[i];
        to->b[i] = from->b[i];
    }
}

static void add_corner(rg_polygon *p, double a, double b)
{
    if (p->n == RG_POLYGON_ROOM) return;                    /* a rounding's zigzag in what should be convex; it has no area */
    p->a[p->n] = a;
    p->b[p->n] = b;
    p->n++;
}

bool rg_polygon_split(const rg_polygon *p, const rg_half_plane *plane, rg_polygon *inside, rg_polygon *outside)
{
    double f[RG_POLYGON_ROOM];
    bool any_in = false, any_out = false;
    for (int i = 0; i < p->n; i++) {
        f[i] = rg_half_plane_at(plane, p->a[i], p->b[i]);
        any_in |= f[i] > 0.0;
        any_out |= f[i] < 0.0;
    }
    inside->n = outside->n = 0;
    if (!any_out || !any_in) {
        copy_polygon(any_in ? inside : outside, p);
        return true;
    }
    for (int i = 0; i < p->n; i++) {
        const int next = i + 1 < p->n ? i + 1 : 0;
        if (f[i] >= 0.0) add_corner(inside, p->a[i], p->b[i]);
        if (f[i] <= 0.0) add_corner(outside, p->a[i], p->b[i]);
        if ((f[i] > 0.0 && f[next] < 0.0) || (f[i] < 0.0 && f[next] > 0.0)) {
            const double t = f[i] / (f[i] - f[next]);
            const double a = p->a[i] + t * (p->a[next] - p->a[i]), b = p->b[i] + t * (p->b[next] - p->b[i]);
            add_corner(inside, a, b);
            add_corner(outside, a, b);
        }
    }
    if (rg_polygon_area2(inside) < SLIVER) inside->n = 0;
    if (rg_polygon_area2(outside) < SLIVER) outside->n = 0;
    return inside->n <= RG_POLYGON_CORNERS && outside->n <= RG_POLYGON_CORNERS;
}

void rg_polygon_part(const rg_polygon *polygon, rg_polygon half[2])
{
    const int middle = polygon->n / 2;
    half[0].n = half[1].n = 0;
    for (int i = 0; i < polygon->n + 2; i++) {              /* 0 .. middle, and middle .. n, where n is 0 again */
        const int corner = (i > middle ? i - 1 : i) % polygon->n;
        add_corner(&half[i > middle], polygon->a[corner], polygon->b[corner]);
    }
}

/* Some edge has all of the polygon on its far side. */
static bool apart(const rg_polygon *p, const rg_region *region)
{
    for (int e = 0; e < region->n; e++) {
        int i = 0;
        while (i < p->n && rg_half_plane_at(&region->edge[e], p->a[i], p->b[i]) <= 0.0) i++;
        if (i == p->n) return true;
    }
    return false;
}

bool rg_polygon_minus(const rg_polygon *polygon, const rg_region *region, size_t room, rg_polygon out[], size_t *n)
{
    rg_polygon kept[2];                                     /* what is left inside of the edges so far, and room for what comes of it */
    const rg_polygon *rest = polygon;
    *n = 0;
    bool meets = !apart(polygon, region);
    for (int e = 0; e < region->n && meets; e++) {
        rg_polygon *inside = &kept[e % 2];
        if (*n == room) return false;
        if (!rg_polygon_split(rest, &region->edge[e], inside, &out[*n])) return false;
        meets = inside->n > 0;
        *n += out[*n].n > 0;
        rest = inside;
    }
    if (meets) return true;
    if (room == 0) return false;
    copy_polygon(&out[0], polygon);                         /* no overlap: the cuts, if any, were for nothing */
    *n = 1;
    return true;
}

void rg_polygon_enclose(const rg_polygon *p, rg_facet_point corner[3])
{
    double least_a = 1.0, least_b = 1.0, most = 0.0;
    for (int i = 0; i < p->n; i++) {
        least_a = p->a[i] < least_a ? p->a[i] : least_a;
        least_b = p->b[i] < least_b ? p->b[i] : least_b;
        most = p->a[i] + p->b[i] > most ? p->a[i] + p->b[i] : most;
    }
    if (least_a <= 0.0 && least_b <= 0.0 && most >= 1.0) {  /* exactly the facet, so that what it shares with others stays shared */
        least_a = least_b = 0.0;
        most = 1.0;
    }
    const double size = most - least_a - least_b;
    corner[0] = (rg_facet_point){least_a, least_b};
    corner[1] = (rg_facet_point){least_a + size, least_b};
    corner[2] = (rg_facet_point){least_a, least_b + size};
}
