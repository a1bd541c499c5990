/* lit.h - which portions of which facets does the radar see? */
#ifndef RG_SCATTER_LIT_H
#define RG_SCATTER_LIT_H
#include "scatter/cover.h"
#include "scatter/occluder.h"
#include "scatter/scene.h"

/* A growing list of convex polygons on a face. Start with {0}. */
typedef struct { size_t n, room; rg_polygon *polygon; } rg_polygons;

/* Working memory of one thread; grows as needed, keeps nothing from call to call. */
typedef struct rg_lit_scratch rg_lit_scratch;
rg_lit_scratch *rg_lit_scratch_new(void);
void rg_lit_scratch_free(rg_lit_scratch *scratch);  /* takes NULL */

/* Area, across the line of sight, of the pieces that their middle decided as a whole since the last call of this: what the cutting
 * left undecided. 0 wherever all shadows were cut exactly. */
double rg_lit_take_undecided_m2(rg_lit_scratch *scratch);

extern const rg_polygon rg_whole_facet;

/* Appends to lit what is seen of a part of a face.
 *
 * The face is held against every facet that reaches into its shadow prism, so no occluder is too small to be seen. Where few do, the
 * shadow is cut out exactly, as convex polygons; where many do, the part is halved until few do, or until a piece is no longer than
 * grain_m, which its middle then decides as a whole. The facets of a closed shell occlude by the side that faces the viewer, those of a
 * sheet by both. Of two facets in one plane (nearer than the welding tolerance) one hides the other.
 *
 *    horizon    NULL: the viewer is far away
 *    grain_m    longest side of a piece that is not cut any further; a fraction of the wavelength
 *
 * False without memory. */
bool rg_lit_part(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, const rg_horizon *horizon,
                 double grain_m, rg_lit_scratch *scratch, rg_polygons *lit);

/* rg_lit_part where the caller knows named[0 .. n_named - 1], all facets that may hide anything of the part, in any order. */
bool rg_lit_among(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, const rg_horizon *horizon,
                  size_t n_named, const uint32_t named[], double grain_m, rg_lit_scratch *scratch, rg_polygons *lit);

/* rg_lit_part for the radar itself: the cover answers for most faces, what it cannot prove is cut. */
bool rg_lit_from_afar(const rg_scene *scene, const rg_seen *seen, const rg_cover *cover, const rg_face *face, const rg_polygon *part,
                      double grain_m, rg_lit_scratch *scratch, rg_polygons *lit);

/* Lit pieces: triangles, each a whole facet or a portion of one, as rg_triangle_sum takes them. Start with {0}. */
typedef struct {
    size_t n, room;
    double *path_m[3];              /* 2 s.r of the corners */
    double *weight_m2;              /* twice the area that the piece turns toward the radar */
} rg_pieces;

void rg_pieces_free(rg_pieces *pieces);

/* Appends a polygon of a face as a fan of triangles; adds pieces of weight 0 up to a multiple of RG_LANES. False without memory. */
bool rg_pieces_add(rg_pieces *pieces, const rg_face *face, const rg_polygon *polygon);
bool rg_pieces_pad(rg_pieces *pieces);

#endif
