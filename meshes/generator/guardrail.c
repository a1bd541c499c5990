/* guardrail.c - two spans of W-beam guardrail, as the library's canonical shape has it: the section of AASHTO M 180, steel posts
 * W6 x 8.5 every 1.905 m, wooden blockouts, bolts; the figures stand in the shape's source */
#include "guardrail.h"
#include "mesh/mesh.h"
#include "skin.h"
#include <roadglint/shape.h>
#include <stdio.h>
#include <stdlib.h>

static const double length_m = 2 * 3.81;        /* effective length of a piece, 12.5 ft: AASHTO M 180 */
static const double sagitta_m = 0.10e-3, edge_m = 0.060;

/* The facets are where they belong: a new vertex stays on its edge. */
static double as_it_is(vec3 p, const void *shape)
{
    (void)p;
    (void)shape;
    return 0.0;
}

facets guardrail_mesh(void)
{
    const rg_shape shape = {.kind = RG_GUARDRAIL, .size_m = {length_m}, .sagitta_m = sagitta_m, .edge_m = edge_m};
    rg_mesh *made = NULL;
    rg_error err;
    if (rg_shape_mesh(&made, &shape, &err)) {
        fprintf(stderr, "generator: %s\n", err.text);
        exit(EXIT_FAILURE);
    }
    facets mesh = {0};
    for (size_t p = 0; p < made->n_parts; p++) (void)facets_part(&mesh, made->part_name[p]);
    for (size_t i = 0; i < made->n_vertices; i++)
        facets_vertex(&mesh, vec3_add(vec3_from(made->vertex_m[i]), vec3_from(made->origin_m)));
    for (size_t i = 0; i < made->n_facets; i++)
        facets_triangle(&mesh, made->facet[i][0], made->facet[i][1], made->facet[i][2], made->part[i]);
    rg_mesh_free(made);

    /* Where the lapped sheet steps forward it has creases of a few degrees. From the facets alone they look like a coarse curve; narrow
     * facets beside them say that they are none. */
    const skin_limit limit = {.judged_m = 0.235e-3};
    while (skin_halve_judged(&mesh, (field){as_it_is, NULL}, limit) > 0) continue;
    return mesh;
}
