/* facets.h - a growing triangle mesh with named parts, as the generator's steps build it up */
#ifndef GENERATOR_FACETS_H
#define GENERATOR_FACETS_H
#include "base/vec3.h"
#include <stddef.h>
#include <stdint.h>

enum { MAX_PARTS = 64, PART_NAME = 32 };

typedef struct { uint32_t v[3]; uint32_t part; } facet;     /* counter-clockwise seen from outside */

typedef struct {
    size_t n_vertices, room_vertices, n_facets, room_facets, n_parts;
    vec3 *vertex_m;
    facet *facet;
    char part_name[MAX_PARTS][PART_NAME];
} facets;

/* All of them end the program when memory runs out: a generator has nothing to save. */
void *grow_array(void *array, size_t *room, size_t n, size_t size);
/* The part of that name, made when it is new. */
uint32_t facets_part(facets *mesh, const char *name);
uint32_t facets_vertex(facets *mesh, vec3 p);
void facets_triangle(facets *mesh, uint32_t a, uint32_t b, uint32_t c, uint32_t part);
/* Two triangles, parted along the shorter diagonal; the corners run counter-clockwise. */
void facets_quad(facets *mesh, uint32_t a, uint32_t b, uint32_t c, uint32_t d, uint32_t part);
/* Vertex (i, j) of a grid of n_rows * n_columns that starts at first is first + i * n_columns + j; walks its cells as quads.
 * Columns run counter-clockwise when rows run away from the viewer's left: (i, j), (i + 1, j), (i + 1, j + 1), (i, j + 1). */
void facets_grid(facets *mesh, uint32_t first, size_t n_rows, size_t n_columns, uint32_t part);
/* Removes a part's facets; its name stays until the parts are written. */
void facets_remove_part(facets *mesh, uint32_t part);
/* Adds all of other, its parts by name, moved by shift_m. */
void facets_add(facets *mesh, const facets *other, vec3 shift_m);
/* Adds the mirror image in y = 0. A part that ends in _left becomes _right; any other is its own mirror image. */
void facets_mirror_y(facets *mesh);
/* Vertices that are the same to a micrometre become one, facets without area go. */
void facets_weld(facets *mesh);
/* OBJ in metres with six decimals: vertices, then the parts' facets as groups in the order of the parts. 0 when all was written. */
int facets_write_obj(const facets *mesh, const char *path, const char *title);
void facets_free(facets *mesh);

#endif
