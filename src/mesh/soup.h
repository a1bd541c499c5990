/* soup.h - loose facets as a reader finds them: the file's own units and axes, nothing repaired yet */
#ifndef RG_MESH_SOUP_H
#define RG_MESH_SOUP_H
#include <roadglint/status.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Indices are 32 bits wide and two values of them stand for "none" and "many". */
#define RG_FACETS_MAX ((size_t)1 << 31)
#define RG_VERTICES_MAX ((size_t)UINT32_MAX - 2)

enum { RG_NAME_MAX = 256 };     /* bytes of a part's name, with its 0; longer ones are cut */

typedef struct {
    size_t n_vertices, vertices_held;
    double (*vertex)[3];
    size_t n_facets, facets_held;
    uint32_t (*facet)[3];
    uint32_t *part;                     /* [n_facets] */
    size_t n_parts, parts_held;
    char **part_name;
    uint32_t *name_slot;                /* hash table of the names: part + 1, or 0 */
    size_t n_name_slots;
    size_t n_polygons_cut, n_not_facets;
    double coordinate_step;             /* spacing of the file's numbers at its largest coordinate */
    /* What cutting polygons needs; its work is bounded over the file as a whole. */
    size_t cut_held;
    double (*flat)[2];
    uint32_t *ring;                     /* [6 * cut_held] */
    uint64_t cut_work, cut_work_max;
} rg_soup;

void rg_soup_free(rg_soup *soup);   /* and empties it */

/* Makes room for so many more. RG_BAD_INPUT (more than an index can count), RG_NO_MEMORY. */
rg_status rg_soup_reserve(rg_soup *soup, size_t n_vertices, size_t n_facets, rg_error *err);

/* Finds the part of that name or adds it. The name is cleaned first: ends trimmed, control characters and what is no UTF-8
 * replaced; when nothing is left it is "mesh". */
rg_status rg_soup_part(rg_soup *soup, uint32_t *part, const char *name, size_t n, rg_error *err);

/* "group/material", or the one of them that is not empty. */
rg_status rg_soup_part_of(rg_soup *soup, uint32_t *part, const char *group, size_t n_group, const char *material, size_t n_material,
                          rg_error *err);

/* Adds a face of n corners, cut into triangles when there are more than three (cut.c). corner is working space afterwards. Every
 * corner is under n_vertices. RG_BAD_INPUT (the face would take too long to cut), RG_NO_MEMORY. */
rg_status rg_soup_face(rg_soup *soup, size_t n, uint32_t corner[], uint32_t part, rg_error *err);

/* Spacing of the numbers of a type at the file's largest coordinate goes to coordinate_step. */
void rg_soup_note_step(rg_soup *soup, double largest, bool single);

static inline rg_status rg_soup_vertex(rg_soup *soup, double x, double y, double z, rg_error *err)
{
    if (soup->n_vertices == soup->vertices_held) {
        const rg_status status = rg_soup_reserve(soup, 1, 0, err);
        if (status) return status;
    }
    double *const v = soup->vertex[soup->n_vertices++];
    v[0] = x, v[1] = y, v[2] = z;
    return RG_OK;
}

static inline rg_status rg_soup_facet(rg_soup *soup, uint32_t a, uint32_t b, uint32_t c, uint32_t part, rg_error *err)
{
    if (soup->n_facets == soup->facets_held) {
        const rg_status status = rg_soup_reserve(soup, 0, 1, err);
        if (status) return status;
    }
    uint32_t *const corner = soup->facet[soup->n_facets];
    corner[0] = a, corner[1] = b, corner[2] = c;
    soup->part[soup->n_facets++] = part;
    return RG_OK;
}

#endif
