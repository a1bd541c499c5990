/* mesh.h - the mesh as the rest of the library reads it */
#ifndef RG_MESH_MESH_H
#define RG_MESH_MESH_H
#include <roadglint/mesh.h>

/* Instead of a neighbour: the edge has no second facet, or it has several. */
#define RG_NO_FACET UINT32_MAX
#define RG_MANY_FACETS (UINT32_MAX - 1u)

typedef struct {
    bool closed;        /* every edge is used as often in one direction as in the other */
    size_t n_facets;
} rg_shell;

struct rg_mesh {
    size_t n_vertices, n_facets, n_parts, n_shells;
    double origin_m[3];             /* vertex_m counts from here: the middle of the bounding box */
    double (*vertex_m)[3];
    uint32_t (*facet)[3];           /* counter-clockwise seen from outside; sorted by part */
    uint32_t *part;                 /* [n_facets], never falling */
    uint32_t *shell;                /* [n_facets] */
    uint32_t (*neighbour)[3];       /* [n_facets]: the facet across the edge from corner i to corner (i + 1) % 3 */
    rg_shell *shells;
    size_t *part_first;             /* [n_parts + 1]: part p owns the facets part_first[p] .. part_first[p + 1] - 1 */
    char **part_name;
    rg_mesh_report report;
};

#endif
