/* patch.h - the pieces of which shapes are put together: grids, triangles and discs cut into facets
 *
 * Every piece brings its own vertices. Where two pieces meet they have the same points, which the weld makes one.
 */
#ifndef RG_MESH_PATCH_H
#define RG_MESH_PATCH_H
#include "base/vec3.h"
#include "mesh/soup.h"

/* A point of a piece; u and v run from 0 to 1, or over a disc whose rim is u^2 + v^2 = 1. 0 and 1 are passed exactly. */
typedef vec3 rg_patch_at(const void *of, double u, double v);

/* n_u by n_v cells of two facets, facing along du x dv. */
rg_status rg_patch_grid(rg_soup *soup, uint32_t part, size_t n_u, size_t n_v, rg_patch_at *at, const void *of, rg_error *err);

/* The half of the unit square with u + v <= 1, each side in n: n^2 facets, facing along du x dv. */
rg_status rg_patch_triangle(rg_soup *soup, uint32_t part, size_t n, rg_patch_at *at, const void *of, rg_error *err);

/* How a disc is cut: n_rings rings of equal width, the outer rim in n_rim chords, the other rims in chords of at most step (radius 1).
 * n_rim is a multiple of 4. One ring is a fan about the centre. */
typedef struct {
    size_t n_rim, n_rings;
    double step;
} rg_disc_plan;

/* Chords of the rim of ring k, 0 for the centre; a multiple of 4. */
size_t rg_disc_n_rim(const rg_disc_plan *plan, size_t k);

/* Facets of one quarter, or a bound that is near them. */
double rg_disc_n_facets(double n_rim, double n_rings, double step);

/* Quarters first .. first + n - 1 of a disc, counted from +u toward +v, facing along du x dv. */
rg_status rg_patch_disc(rg_soup *soup, uint32_t part, int first, int n, const rg_disc_plan *plan, rg_patch_at *at, const void *of,
                        rg_error *err);

/* Into how many pieces of at most step_m a length is cut; step_m 0: one. */
double rg_pieces(double length_m, double step_m);

/* Cells of a rectangle whose diagonals are at most edge_m long; edge_m 0: one. */
typedef struct { double n_u, n_v; } rg_cells;
rg_cells rg_cells_of(double u_m, double v_m, double edge_m);

/* A circle as a regular polygon of the same area: its corners lie on a circle that is larger by the square root of x/sin x,
 * x = 2 pi/n. With the chord height h it runs from h/3 inside of the circle (the chords' middles) to 2h/3 outside (the corners), and its
 * mean distance from the centre is the circle's radius to the order of h: a plane face keeps its area, a curved one its mean phase. */
typedef struct { double n, radius_m; } rg_circle;

/* The fewest corners, a multiple of 4 and at least 8, with h <= sagitta_m and chords of at most chord_m. 0: not limited. */
rg_circle rg_circle_of(double radius_m, double sagitta_m, double chord_m);

#endif
