/* scene.c - a mesh made ready to be seen */
#include "scatter/scene.h"
#include <stdlib.h>

/* Facets of a block: long enough to keep eight lanes busy, short enough to share one aspect between threads. */
enum { BLOCK = 1024 };

static rg_status cut_blocks(rg_scene *scene, rg_error *err)
{
    const rg_mesh *mesh = scene->mesh;
    scene->block = calloc(mesh->n_facets / BLOCK + mesh->n_parts + 1, sizeof *scene->block);
    if (!scene->block) return rg_fail(err, RG_NO_MEMORY, "no memory for the blocks of %zu facets", mesh->n_facets);
    for (size_t part = 0; part < mesh->n_parts; part++)
        for (size_t first = mesh->part_first[part]; first < mesh->part_first[part + 1]; first += BLOCK) {
            const size_t left = mesh->part_first[part + 1] - first;
            scene->block[scene->n_blocks++] =
                (rg_block){(uint32_t)first, (uint32_t)(left < BLOCK ? left : BLOCK), (uint32_t)part};
        }
    return RG_OK;
}

rg_status rg_scene_new_for(rg_scene **out, const rg_mesh *mesh, rg_cpu cpu, rg_error *err)
{
    rg_scene *scene = calloc(1, sizeof *scene);
    if (!scene) return rg_fail(err, RG_NO_MEMORY, "no memory for a scene");
    scene->mesh = mesh;
    scene->triangle_sum = rg_triangle_sum_for(cpu);
    rg_status status = cut_blocks(scene, err);
    if (!status)
        status = rg_bvh_build(&scene->bvh, mesh->n_vertices, mesh->vertex_m, mesh->n_facets, mesh->facet, cpu, err);
    if (status) rg_scene_free(scene);
    else *out = scene;
    return status;
}

rg_status rg_scene_new(rg_scene **out, const rg_mesh *mesh, rg_error *err) { return rg_scene_new_for(out, mesh, rg_cpu_best(), err); }

void rg_scene_free(rg_scene *scene)
{
    if (!scene) return;
    rg_bvh_free(scene->bvh);
    free(scene->block);
    free(scene);
}

const rg_mesh *rg_scene_mesh(const rg_scene *scene) { return scene->mesh; }
