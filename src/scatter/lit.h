/* lit.h - which portions of which facets does the radar see? */
#ifndef RG_SCATTER_LIT_H
#define RG_SCATTER_LIT_H
#include "scatter/direction.h"
#include "scatter/scene.h"

/* All vertices of a mesh as one aspect sees them: metres along h, v and s from the mesh's own middle. */
typedef struct {
    rg_view view;
    size_t n_vertices;
    double (*at_m)[3];              /* [n_vertices]: along h, v, s */
    double reach_m;                 /* largest coordinate */
} rg_seen;

rg_status rg_seen_new(rg_seen *seen, const rg_mesh *mesh, rg_error *err);   /* room for any aspect */
void rg_seen_turn(rg_seen *seen, const rg_mesh *mesh, const rg_view *view);
void rg_seen_free(rg_seen *seen);

/* Lit pieces: triangles, each a whole facet or a portion of one, as rg_triangle_sum takes them. */
typedef struct {
    size_t n, room;
    double *path_m[3];              /* 2 s.r of the corners */
    double *weight_m2;              /* twice the area that the piece turns toward the radar */
} rg_pieces;

/* Working memory of one thread; grows as needed, keeps nothing from call to call. Start with {0}. */
typedef struct rg_lit_scratch rg_lit_scratch;
rg_lit_scratch *rg_lit_scratch_new(void);
void rg_lit_scratch_free(rg_lit_scratch *scratch);  /* takes NULL */

/* Finds the lit pieces of a block's facets, padded with pieces of weight 0 to a multiple of RG_LANES.
 *
 * Each facet that turns toward the radar is held against every facet that reaches into its shadow prism, so no occluder is too
 * small to be seen. Where few do, the shadow is cut out exactly, as convex polygons; where many do, the facet is halved until few
 * do, or until a piece is no longer than grain_m, which its middle then decides as a whole. The facets of a closed shell scatter
 * and occlude by the side that faces the radar, those of a sheet by both. Of two facets in one plane (nearer than the welding
 * tolerance) the one of the lower index hides the other.
 *
 *    grain_m    longest side of a piece that is not cut any further; a fraction of the wavelength
 *
 * The pieces lie in scratch until its next use. RG_NO_MEMORY. */
rg_status rg_lit_block(const rg_scene *scene, const rg_seen *seen, const rg_block *block, double grain_m,
                       rg_lit_scratch *scratch, const rg_pieces **pieces, rg_error *err);

#endif
