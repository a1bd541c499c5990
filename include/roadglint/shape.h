/* roadglint/shape.h - canonical targets, and meshes written to files */
#ifndef ROADGLINT_SHAPE_H
#define ROADGLINT_SHAPE_H
#include <roadglint/mesh.h>

typedef enum {
    RG_PLATE,               /* size_m: width (y), height (z); in x = 0, facing +x */
    RG_DISC,                /* size_m: radius; in x = 0, facing +x */
    RG_SPHERE,              /* size_m: radius */
    RG_CYLINDER,            /* size_m: radius, length; axis z, closed by flat caps */
    RG_CONE,                /* size_m: base radius, top radius (0: a tip), height; axis z, closed, base below */
    RG_DIHEDRAL,            /* size_m: face width a, height b; fold on the z axis, opens toward +x, faces at azimuth +-45 deg */
    RG_TRIHEDRAL,           /* size_m: leg; triangular faces, corner at the origin, legs on +x, +y, +z */
    RG_TRIHEDRAL_SQUARE,
    RG_TRIHEDRAL_CIRCULAR,  /* quarter circles */
    RG_GUARDRAIL            /* size_m: length; W-beam along y on posts, face toward +x, ground at z = 0 */
} rg_shape_kind;

typedef struct {
    rg_shape_kind kind;
    double size_m[3];
    double sagitta_m;       /* largest distance between chord and curve; 0: not limited */
    double edge_m;          /* longest edge; 0: not limited, flat faces stay whole */
} rg_shape;

/** Builds a shape as a mesh with named parts. RG_BAD_VALUE (a size that is not finite or not positive, a curved shape with neither
 *  sagitta nor edge, more facets than 100 million: the text says what would do), RG_NO_MEMORY. */
RG_API rg_status rg_shape_mesh(rg_mesh **out, const rg_shape *shape, rg_error *err);

/** Writes a mesh in metres; the ending of path picks the format: .stl (binary), .obj (with parts as groups), .ply (binary,
 *  doubles). The file appears under its name only when it is complete. RG_BAD_VALUE (another ending), RG_SYSTEM. */
RG_API rg_status rg_mesh_write(const rg_mesh *mesh, const char *path, rg_error *err);

#endif
