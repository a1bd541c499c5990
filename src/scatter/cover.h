/* cover.h - a raster across the line of sight that proves most facets wholly lit or wholly dark
 *
 * Facets that are seen from one side fall into patches, joined across their common edges; a patch ends at its rim. Each cell keeps the
 * patch that is nearest at its middle. If no rim of that patch runs through the cell, the patch covers the whole cell, and so:
 *   - what lies behind all of the patch's facets in the cell is dark there;
 *   - a facet of the patch is lit there if the patch has one layer only and no facet of another patch reaches before it.
 * What is so in all cells of a facet is so of the facet. Nothing is claimed of other facets, and no claim depends on how fine the cells are.
 */
#ifndef RG_SCATTER_COVER_H
#define RG_SCATTER_COVER_H
#include "scatter/seen.h"

typedef struct rg_cover rg_cover;

/* Room for any aspect of a mesh: some 90 bytes a facet. RG_NO_MEMORY. */
rg_status rg_cover_new(rg_cover **out, const rg_mesh *mesh, rg_error *err);
void rg_cover_free(rg_cover *cover);        /* takes NULL */

/* Draws the mesh as it is seen now. */
void rg_cover_draw(rg_cover *cover, const rg_mesh *mesh, const rg_seen *seen);

typedef enum { RG_COVER_UNKNOWN, RG_COVER_LIT, RG_COVER_DARK } rg_cover_state;

/* What the cover proves of a face. Where that is nothing of the whole, *open tells where light may fall: along h from open[0] to open[1],
 * along v from open[2] to open[3]; all of the face outside is dark. */
rg_cover_state rg_cover_of(const rg_cover *cover, const rg_face *face, double open_m[4]);

#endif
