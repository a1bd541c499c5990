/* cut_polygon.h - convex polygons on a facet, cut by half-planes
 *
 * Points are barycentric: (a, b) weighs the facet's corners 1 and 2. A half-plane is given by its values at the facet's three
 * corners, so nothing here knows the facet's shape, and a facet seen almost edge-on is cut as well as any.
 */
#ifndef RG_SCATTER_CUT_POLYGON_H
#define RG_SCATTER_CUT_POLYGON_H
#include <stdbool.h>
#include <stddef.h>

/* A polygon to be cut has up to RG_POLYGON_CORNERS corners; there is room for those that one cut more adds. */
enum { RG_POLYGON_CORNERS = 12, RG_POLYGON_ROOM = RG_POLYGON_CORNERS + 2, RG_REGION_EDGES = 5 };

typedef struct { int n; double a[RG_POLYGON_ROOM], b[RG_POLYGON_ROOM]; } rg_polygon;

/* Positive inside. */
typedef struct { double at_corner[3]; } rg_half_plane;

/* A convex region: what one occluder hides of the facet. */
typedef struct { int n; rg_half_plane edge[RG_REGION_EDGES]; } rg_region;

double rg_half_plane_at(const rg_half_plane *plane, double a, double b);

/* Twice the area as a share of twice the facet's; positive for counter-clockwise. */
double rg_polygon_area2(const rg_polygon *polygon);

/* The two sides of a cut; a side without area comes out with n = 0. False when one has more than RG_POLYGON_CORNERS corners, which is
 * one more at the most. */
bool rg_polygon_split(const rg_polygon *polygon, const rg_half_plane *plane, rg_polygon *inside, rg_polygon *outside);

/* Triangle i of the polygon as a fan, of corners 0, i and i + 1: its share of rg_polygon_area2. Under 0 only by rounding. */
double rg_polygon_fan_area2(const rg_polygon *polygon, int i);

/* Two polygons of about half the corners each, parted from the first corner to the middle one. */
void rg_polygon_part(const rg_polygon *polygon, rg_polygon half[2]);

/* Writes polygon without region as convex polygons to out[0 .. *n - 1]; exactly polygon itself where they do not overlap. Returns false,
 * with *n of no meaning, when room polygons do not suffice or one would have more than RG_POLYGON_CORNERS corners. */
bool rg_polygon_minus(const rg_polygon *polygon, const rg_region *region, size_t room, rg_polygon out[], size_t *n);

/* A triangle of the facet's shape that holds the polygon, no larger than it must be: the facet itself, or one with sides along its sides. */
typedef struct { double a, b; } rg_facet_point;
void rg_polygon_enclose(const rg_polygon *polygon, rg_facet_point corner[3]);

#endif
