/* mesh_options.h - what all commands that read a mesh take, and tell about it */
#ifndef RG_CLI_MESH_OPTIONS_H
#define RG_CLI_MESH_OPTIONS_H
#include "cli/options.h"

/* The rows for a job struct with a field `frame` of type rg_mesh_frame. */
#define RG_MESH_OPTIONS(job) \
    {"--units", "UNIT", rg_take_unit, offsetof(job, frame) + offsetof(rg_mesh_frame, unit_m), "the mesh's unit: m, cm, mm, in or ft (default: the format's own, else m)"}, \
    {"--up", "AXIS", rg_take_axis, offsetof(job, frame) + offsetof(rg_mesh_frame, up), "the file's axis that points up: x, -x, y, -y, z or -z (default: the format's own, else z)"}, \
    {"--front", "AXIS", rg_take_axis, offsetof(job, frame) + offsetof(rg_mesh_frame, front), "the file's axis that points to the front (default: the format's own, else x)"}

/* Says on stderr what was assumed of a mesh, and what was dropped and turned; nothing where there is nothing to say. */
void rg_tell_mesh(const char *path, const rg_mesh *mesh);

#endif
