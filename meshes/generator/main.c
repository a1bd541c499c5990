/* main.c - writes one of the demo meshes */
#include "guardrail.h"
#include "pedestrian.h"
#include "saloon.h"
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static const struct { const char *name, *title; facets (*make)(void); } objects[] = {
    {"saloon", "Saloon", saloon_mesh},
    {"pedestrian", "Pedestrian dummy, an adult in mid-stride", pedestrian_mesh},
    {"guardrail", "Guardrail, two spans of W-beam on steel posts", guardrail_mesh},
};

int main(int argc, char **argv)
{
    const size_t n = sizeof objects / sizeof objects[0];
    for (size_t i = 0; argc == 3 && i < n; i++) {
        if (strcmp(argv[1], objects[i].name) != 0) continue;
        facets mesh = objects[i].make();
        const int failed = facets_write_obj(&mesh, argv[2], objects[i].title);
        if (failed) perror(argv[2]);
        else printf("%s: %zu facets, %zu vertices\n", argv[2], mesh.n_facets, mesh.n_vertices);
        facets_free(&mesh);
        return failed ? EXIT_FAILURE : EXIT_SUCCESS;
    }
    fprintf(stderr, "usage: %s OBJECT OUT.obj, with OBJECT one of:", argv[0]);
    for (size_t i = 0; i < n; i++) fprintf(stderr, " %s", objects[i].name);
    fprintf(stderr, "\n");
    return 2;
}
