/* target.h - meshes from the words of a reference table, such as "disc 0.06 sagitta 0.00006 roll 45" */
#ifndef RG_TESTS_TARGET_H
#define RG_TESTS_TARGET_H
#include <roadglint/mesh.h>

/** Builds the mesh that text names; the words stand in README.md. The caller frees *out with rg_mesh_free.
 *
 *    folder   where the files of "mesh FILE" lie
 *
 *  RG_BAD_VALUE (a word that is not known, a number missing or left over: the text says what would be right), and what building the mesh
 *  returned. */
rg_status reference_target(rg_mesh **out, const char *text, const char *folder, rg_error *err);

#endif
