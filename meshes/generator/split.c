/* split.c - facets split where their edges are */
#include "split.h"

static double distance(const facets *mesh, uint32_t a, uint32_t b)
{
    return vec3_norm(vec3_sub(mesh->vertex_m[a], mesh->vertex_m[b]));
}

/* corner[3], with the new vertices between[c] on the edges from corner c to the next, or NO_FACET. Replaces facet i. */
static void split_facet(facets *mesh, size_t i, const uint32_t between[3])
{
    const facet f = mesh->facet[i];
    const uint32_t part = f.part;
    int n = 0, at = 0;                  /* at: the corner before the split edge, or before the whole one */
    for (int c = 0; c < 3; c++) n += between[c] != NO_FACET;
    if (n == 0) return;
    for (int c = 0; c < 3; c++)
        if ((between[c] != NO_FACET) == (n == 1)) at = c;
    const uint32_t a = f.v[at], b = f.v[(at + 1) % 3], c = f.v[(at + 2) % 3];
    const uint32_t ab = between[at], bc = between[(at + 1) % 3], ca = between[(at + 2) % 3];
    if (n == 1) {
        mesh->facet[i] = (facet){{a, ab, c}, part};
        facets_triangle(mesh, ab, b, c, part);
    } else if (n == 2) {                /* ab is whole: the tip at c, and the four corners a, b, bc, ca */
        mesh->facet[i] = (facet){{bc, c, ca}, part};
        const int from_a = distance(mesh, a, bc) <= distance(mesh, b, ca);
        facets_triangle(mesh, a, b, from_a ? bc : ca, part);
        facets_triangle(mesh, from_a ? a : b, bc, ca, part);
    } else {
        mesh->facet[i] = (facet){{ab, bc, ca}, part};
        facets_triangle(mesh, a, ab, ca, part);
        facets_triangle(mesh, b, bc, ab, part);
        facets_triangle(mesh, c, ca, bc, part);
    }
}

void split_edges(facets *mesh, const edges *all)
{
    const size_t n = mesh->n_facets;
    for (size_t i = 0; i < n; i++) {
        uint32_t between[3];
        for (int c = 0; c < 3; c++) between[c] = all->edge[all->of_facet[i][c]].made;
        split_facet(mesh, i, between);
    }
}
