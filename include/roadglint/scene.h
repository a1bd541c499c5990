/* roadglint/scene.h - a mesh made ready to be seen: visibility structure and kernels for this processor */
#ifndef ROADGLINT_SCENE_H
#define ROADGLINT_SCENE_H
#include <roadglint/mesh.h>
#include <roadglint/status.h>

typedef struct rg_scene rg_scene;

/** Direction from the target to the radar, radians: azimuth from +x (front) toward +y (left), elevation from the xy plane
 *  toward +z. (0, 0): the radar looks at the front. */
typedef struct { double az_rad, el_rad; } rg_aspect;

/** Builds the scene of a mesh, which is lent until rg_scene_free. Any number of threads may share a scene.
 *  RG_NO_MEMORY. On failure *out is as it was. */
RG_API rg_status rg_scene_new(rg_scene **out, const rg_mesh *mesh, rg_error *err);

/** Takes NULL. The mesh stays the caller's. */
RG_API void rg_scene_free(rg_scene *scene);

/** The mesh that the scene was built of. */
RG_API const rg_mesh *rg_scene_mesh(const rg_scene *scene);

#endif
