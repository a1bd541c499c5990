/* skin.h - facets on the surface of a field: laid out, refined until they are smooth, and cut along the borders of regions */
#ifndef GENERATOR_SKIN_H
#define GENERATOR_SKIN_H
#include "facets.h"
#include "field.h"

/* Where a box of lattice points is put before it falls onto the surface; u, w, t run from 0 to 1. */
typedef vec3 skin_cage_fn(double u, double w, double t);

/* Shorter edges are never split: on this scale only a fold would still ask for it, and no splitting heals it. */
static const double skin_least_edge_m = 0.003;

/* How smooth: no edge strays farther from the surface, none is longer, and the fitness that the library finds is no worse than judged_m. */
typedef struct { double sagitta_m, edge_m, judged_m; } skin_limit;

/* The surface of the box 0..n_u, 0..n_w, 0..n_t of lattice cells, but for w = 0 when it is half of a symmetrical body. */
void skin_box(facets *mesh, field body, skin_cage_fn *cage, const int n_cells[3], int is_half, uint32_t part);
/* A closed egg about centre: a cube's lattice, blown up by radius_m and put onto the surface; for any body that centre sees whole. */
void skin_egg(facets *mesh, field body, vec3 centre, vec3 radius_m, int n_cells, skin_limit limit, uint32_t part);
/* Splits edges, and the facets beside them, until the limit holds. */
void skin_refine(facets *mesh, field body, skin_limit limit);
/* Halves the facets that the library's measure of fitness finds too coarse, once; how many edges were split. */
size_t skin_halve_judged(facets *mesh, field body, skin_limit limit);
/* Halves facets until the library's measure of fitness is content too. */
void skin_finish(facets *mesh, field body, skin_limit limit);
/* Turns edges between facets of one part where that makes the smaller facet angle wider and the edge no farther from the surface. */
void skin_turn_edges(facets *mesh, field body, skin_limit limit);
/* Gives the facets of from where region < 0 to the part to. Edges that the border crosses are split there; near the border no edge
 * stays longer than detail_m. */
void skin_cut(facets *mesh, field body, field region, double detail_m, skin_limit limit, uint32_t from, uint32_t to);

/* Parts of the same panel stay together; each panel is lowered below the surface by its depth, with walls where panels meet. */
typedef struct { int panel; double depth_m; } skin_panel;
/* panel[n_parts of the mesh]. The walls belong to the deeper part. */
void skin_part_panels(facets *mesh, field body, const skin_panel panel[]);

#endif
