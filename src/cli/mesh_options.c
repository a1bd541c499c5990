/* mesh_options.c - what all commands that read a mesh tell about it */
#include "cli/mesh_options.h"

static void tell(const char *path, size_t n, const char *one, const char *many)
{
    if (n > 0) fprintf(stderr, "%s: %zu %s\n", path, n, n == 1 ? one : many);
}

void rg_tell_mesh(const char *path, const rg_mesh *mesh)
{
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    if (r->assumed[0]) fprintf(stderr, "%s: %s\n", path, r->assumed);
    tell(path, r->n_not_facets, "point, line or face without area left out", "points, lines or faces without area left out");
    tell(path, r->n_degenerate, "degenerate facet dropped", "degenerate facets dropped");
    tell(path, r->n_duplicate, "duplicate facet dropped", "duplicate facets dropped");
    tell(path, r->n_facets_turned, "facet turned to agree with its neighbours", "facets turned to agree with their neighbours");
    tell(path, r->n_shells_turned, "closed shell was inside out and is turned", "closed shells were inside out and are turned");
}
