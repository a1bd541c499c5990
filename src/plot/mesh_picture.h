/* mesh_picture.h - a mesh as a PNG: from the radar's direction, with its axes, a length to compare with and the names of its parts */
#ifndef RG_PLOT_MESH_PICTURE_H
#define RG_PLOT_MESH_PICTURE_H
#include "mesh/mesh.h"

enum { RG_PICTURE_LEAST_PX = 300, RG_PICTURE_MOST_PX = 4000 };

typedef struct {
    double az_rad, el_rad;      /* direction from the mesh to the viewer */
    int width_px;               /* RG_PICTURE_LEAST_PX .. RG_PICTURE_MOST_PX; the height follows the mesh */
    const char *title;          /* such as the file's name */
    const char *note[2];        /* lines under it */
} rg_mesh_picture;

/* path as in base/out_file.h. RG_BAD_VALUE (a width out of range, a direction that is not finite), RG_NO_MEMORY, RG_SYSTEM. */
rg_status rg_mesh_picture_write(const rg_mesh *mesh, const rg_mesh_picture *picture, const char *path, rg_error *err);

#endif
