/* roadglint/shape.h - canonical targets, and meshes written to files */
#ifndef ROADGLINT_SHAPE_H
#define ROADGLINT_SHAPE_H
#include <roadglint/mesh.h>

/** In parentheses: the mesh's parts. Closed shapes face outward; open ones are sheets of no thickness that face as said. */
typedef enum {
    RG_PLATE,               /* size_m: width (y), height (z); in x = 0, middle at the origin, facing +x (plate) */
    RG_DISC,                /* size_m: radius; in x = 0, middle at the origin, facing +x (disc) */
    RG_SPHERE,              /* size_m: radius; middle at the origin, closed (sphere) */
    RG_CYLINDER,            /* size_m: radius, length; axis z, middle at the origin, closed by flat caps (side, top, bottom) */
    RG_CONE,                /* size_m: base radius, top radius (0: a tip), height; axis z, base in z = 0, closed (side, base[, top]) */
    RG_DIHEDRAL,            /* size_m: face width a, height b; fold on the z axis, middle of the fold at the origin, opens toward +x,
                               faces at azimuth +-45 deg (left, right) */
    RG_TRIHEDRAL,           /* size_m: leg; triangular faces, corner at the origin, legs on +x, +y, +z (xy, yz, zx) */
    RG_TRIHEDRAL_SQUARE,
    RG_TRIHEDRAL_CIRCULAR,  /* quarter circles */
    RG_GUARDRAIL            /* size_m: length; W-beam along y on posts, foremost lines in x = 0 and facing +x, ground at z = 0, middle
                               at y = 0, closed, of the sheet's thickness (rail, posts, blockouts, bolts) */
} rg_shape_kind;

/** How fine a shape is. A chord stands for an arc, and a facet for a piece of sphere: sagitta_m is the greatest distance between the
 *  two when the chord's ends lie on the arc. Corners are placed a little outside instead, by no more than that, so that
 *    discs, caps, quarter circles and cross sections of cylinders and cones have the area of their circle, and spheres their volume,
 *  exactly. Flat faces reflect then as they should, and curved surfaces lie in the mean where they should: what they scatter has the
 *  right phase. All of a shape is nearer than sagitta_m to the true surface. (The guardrail's bends have their corners on the true
 *  section.) A flat shape has no use for sagitta_m.
 *
 *  What that costs in physical optics at 77 GHz against closed forms, worst of many aspects: a cylinder of 50 mm radius is up to 0.3 dB off
 *  at lambda/64, 0.17 dB at lambda/256, 0.023 dB at lambda/512. The rest is not phase but pattern: flat facets wider than lambda/2 have
 *  grating lobes of their own. So it follows the radius too and does not fall steadily: at lambda/512 it is 0.15 dB for 70 mm; at
 *  lambda/1024 at most 0.05 dB from 10 to 300 mm. */
typedef struct {
    rg_shape_kind kind;
    double size_m[3];
    double sagitta_m;       /* largest distance between chord and curve; 0: not limited */
    double edge_m;          /* longest edge; 0: not limited, flat faces stay whole */
} rg_shape;

/** Builds a shape as a mesh with named parts. The caller frees *out with rg_mesh_free. On failure *out is as it was.
 *
 *  RG_BAD_VALUE (a size that is not finite or not positive, a curved shape with neither sagitta nor edge, more facets than 100 million,
 *  facets so small beside the shape that a mesh cannot hold them: the text says what would do), RG_NO_MEMORY. */
RG_API rg_status rg_shape_mesh(rg_mesh **out, const rg_shape *shape, rg_error *err);

/** Writes a mesh in metres, where it was read; the ending of path picks the format: .stl (binary, single precision, no parts), .obj (with
 *  parts as groups, digits enough for the same doubles), .ply (binary, doubles; each face has the number of its part as the property
 *  "part", and a line "comment part NUMBER NAME" in the head names it). The file appears under its name only when it is complete.
 *
 *  RG_BAD_VALUE (another ending; facets too small for single precision that far from zero), RG_SYSTEM, RG_NO_MEMORY. */
RG_API rg_status rg_mesh_write(const rg_mesh *mesh, const char *path, rg_error *err);

/** RG_BAD_VALUE unless the ending of path is one that rg_mesh_write knows: to be asked before long work. */
RG_API rg_status rg_mesh_can_write(const char *path, rg_error *err);

#endif
