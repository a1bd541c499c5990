/* readers.h - from the bytes of a file to loose facets; each reader names the line or the number that is wrong */
#ifndef RG_MESH_READERS_H
#define RG_MESH_READERS_H
#include "mesh/soup.h"
#include <roadglint/mesh.h>

/* A file in memory. A 0 that does not count stands behind the last byte. */
typedef struct {
    const char *path, *text;
    size_t n;
} rg_file;

/* What a format says of units and axes. Fields of 0 are not said. */
typedef struct {
    char format[32];
    rg_mesh_frame own;
    char unit_from[48], axes_from[48];  /* who says it, for the report; empty: nobody */
} rg_origin;

bool rg_is_ply(const rg_file *file);
bool rg_is_stl(const rg_file *file);    /* by its content; a damaged one may not be known */
bool rg_is_obj(const rg_file *file);    /* the first lines look like it */

/* All: RG_BAD_INPUT, RG_NO_MEMORY. What they found so far is in the soup also on failure. */
rg_status rg_read_ply(rg_soup *soup, const rg_file *file, rg_error *err);
rg_status rg_read_stl(rg_soup *soup, const rg_file *file, rg_error *err);
rg_status rg_read_obj(rg_soup *soup, const rg_file *file, rg_error *err);

/* Everything else that Assimp knows. by_content: forget the file's ending. A damaged file may break the process. */
rg_status rg_read_assimp(rg_soup *soup, rg_origin *origin, const rg_file *file, bool by_content, rg_error *err);

/* The same, in a process of its own, which may break. RG_SYSTEM (no process to be had), and as above. */
rg_status rg_read_apart(rg_soup *soup, rg_origin *origin, const rg_file *file, bool by_content, rg_error *err);

#endif
