/* mesh_view.h - a mesh as it looks from one direction: rays, shading, colours of its parts; no text, no files */
#ifndef RG_PLOT_MESH_VIEW_H
#define RG_PLOT_MESH_VIEW_H
#include "base/vec3.h"
#include "mesh/mesh.h"

/* An orthographic picture plane. A point r of the mesh (counted from its origin_m) is at the pixel
 * width/2 + (right.r - middle_m[0])/px_m, height/2 - (up.r - middle_m[1])/px_m. */
typedef struct {
    vec3 toward, right, up;         /* unit; toward the viewer */
    double middle_m[2], px_m;
    double near_m;                  /* toward.r of a plane before the whole mesh */
    int width, height;
} rg_mesh_view;

/* The view from az_rad, el_rad (as in docs/physics.md, 1) in which the mesh just fills width pixels, or max_height; the height follows
 * the mesh, but is never under min_height. */
rg_mesh_view rg_mesh_view_from(const rg_mesh *mesh, double az_rad, double el_rad, int width, int min_height, int max_height);

/* Where a pixel shows nothing. */
#define RG_VIEW_BACKGROUND 0xf4f4f1u

/* The colour of a part, 0xRRGGBB: twenty that stay apart in grey and for the three colour deficiencies when they follow one another, then
 * the same twenty darker, then all again. */
uint32_t rg_part_colour(size_t part);

/* Paints pixel[height][width], 0xffRRGGBB, and counts what is seen of each part: shown_px[n_parts], pixels. Nine rays a pixel; lit from
 * the viewer; the back of an open sheet is hatched; outlines, borders of parts and sharp edges are darker. RG_NO_MEMORY. */
rg_status rg_mesh_view_paint(const rg_mesh *mesh, const rg_mesh_view *view, uint32_t pixel[], double shown_px[], rg_error *err);

#endif
