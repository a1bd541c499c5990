/* roadglint/mesh.h - a triangle mesh, repaired on the way in, with its parts and shells */
#ifndef ROADGLINT_MESH_H
#define ROADGLINT_MESH_H
#include <roadglint/status.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

typedef struct rg_mesh rg_mesh;

typedef enum { RG_AXIS_DEFAULT, RG_PLUS_X, RG_MINUS_X, RG_PLUS_Y, RG_MINUS_Y, RG_PLUS_Z, RG_MINUS_Z } rg_axis;

/** How to read a file's numbers. All zero means: as the format itself says, else metres, z up and x to the front. */
typedef struct {
    double unit_m;      /* metres in one unit of the file; 0: the format's own unit, else 1 */
    rg_axis up;         /* the file's axis that points up;            default: the format's own, else +z */
    rg_axis front;      /* the file's axis that points to the front;  default: the format's own, else +x */
} rg_mesh_frame;

/** What was found, dropped and turned on the way in. Lengths in metres, after units and axes. */
typedef struct {
    char format[32];                /* the reader that took the file, such as "OBJ" */
    char assumed[256];              /* what was assumed of units and axes, for the user to read */
    char sha256[65];                /* of the file's bytes, hex; empty when the mesh did not come from a file */
    char geometry_sha256[65];       /* of the repaired geometry and its part names, hex */
    double unit_m;
    size_t n_facets_read;           /* triangles after polygons were cut */
    size_t n_polygons_cut;          /* faces of more than three corners */
    size_t n_not_facets;            /* points, lines and faces of fewer than three distinct corners */
    size_t n_degenerate;            /* facets dropped: two corners in one place, or lower than weld_m */
    size_t n_duplicate;             /* facets dropped: same three corners as another one, in either winding */
    size_t n_vertices_welded;       /* vertices that fell together with another one */
    size_t n_facets_turned;         /* wound against their shell's other facets */
    size_t n_shells_turned;         /* closed shells that were inside out */
    size_t n_shells, n_closed_shells;
    size_t n_boundary_edges;        /* edges with one facet */
    size_t n_branch_edges;          /* edges with three facets or more */
    double weld_m;                  /* vertices nearer than this are one: 2^-20 of the largest extent */
    double low_m[3], high_m[3];     /* bounding box, where the user put it */
    double area_m2;
    double coordinate_step_m;       /* spacing of the file's own numbers at the mesh's farthest coordinate */
} rg_mesh_report;

/** Reads a mesh file: STL, OBJ and PLY by readers of double precision, every other format through Assimp. Transforms of the
 *  scene are applied, axes turned to ISO 8855 (x forward, y left, z up), vertices welded, degenerate and duplicate facets
 *  dropped, shells found and turned outside out. The caller frees *out with rg_mesh_free. On failure *out is as it was.
 *
 *    frame   may be NULL: all defaults
 *
 *  RG_BAD_INPUT (no such file, no mesh in it, coordinates that are not finite or absurd, indices out of range, no facet
 *  left: the text names the cause), RG_BAD_VALUE (up and front along one axis), RG_NO_MEMORY, RG_SYSTEM (no process for
 *  the import to run in).
 */
RG_API rg_status rg_mesh_read(rg_mesh **out, const char *path, const rg_mesh_frame *frame, rg_error *err);

/** The same repairs for arrays of the caller's, which are copied.
 *
 *    vertex_m[n_vertices]    metres, ISO 8855 axes
 *    facet[n_facets]         three indices each, counter-clockwise seen from outside
 *    part[n_facets]          index of part_name; NULL: one part, "mesh"
 *
 *  RG_BAD_INPUT, RG_NO_MEMORY as for rg_mesh_read.
 */
RG_API rg_status rg_mesh_from_arrays(rg_mesh **out, size_t n_vertices, const double vertex_m[][3], size_t n_facets,
                                     const uint32_t facet[][3], const uint32_t part[], size_t n_parts,
                                     const char *const part_name[], rg_error *err);

/** Takes NULL. */
RG_API void rg_mesh_free(rg_mesh *mesh);

RG_API size_t rg_mesh_n_facets(const rg_mesh *mesh);
RG_API size_t rg_mesh_n_vertices(const rg_mesh *mesh);
RG_API size_t rg_mesh_n_parts(const rg_mesh *mesh);
/** Lent until rg_mesh_free; NULL for a part that is not there. */
RG_API const char *rg_mesh_part_name(const rg_mesh *mesh, size_t part);
RG_API size_t rg_mesh_part_n_facets(const rg_mesh *mesh, size_t part);
RG_API double rg_mesh_part_area_m2(const rg_mesh *mesh, size_t part);
/** Lent until rg_mesh_free. */
RG_API const rg_mesh_report *rg_mesh_get_report(const rg_mesh *mesh);

/** Verifies the whole structure: indices in range, neighbours mutual, parts contiguous, shells consistent.
 *  RG_BAD_INPUT names the first thing that is wrong; a mesh that the library made never fails. */
RG_API rg_status rg_mesh_check(const rg_mesh *mesh, rg_error *err);

#endif
