/* scene.c - a mesh made ready to be seen */
#include "scatter/scene.h"
#include <stdlib.h>

/* Facets of a block: long enough to keep eight lanes busy, short enough to share one aspect between threads. */
enum { BLOCK = 1024 };

static void add_blocks(rg_scene *scene, rg_block_kind kind, size_t first, size_t end, size_t part)
{
    for (; first < end; first += BLOCK) {
        const size_t n = end - first < BLOCK ? end - first : BLOCK;
        scene->block[scene->n_blocks++] = (rg_block){kind, (uint32_t)first, (uint32_t)n, (uint32_t)part};
    }
}

static rg_status cut_blocks(rg_scene *scene, rg_error *err)
{
    const rg_mesh *mesh = scene->mesh;
    size_t edge = 0;
    scene->block = calloc((mesh->n_facets + scene->n_edges) / BLOCK + 2 * mesh->n_parts, sizeof *scene->block);
    if (!scene->block) return rg_fail(err, RG_NO_MEMORY, "no memory for the blocks of %zu facets", mesh->n_facets);
    for (size_t part = 0; part < mesh->n_parts; part++) {
        const size_t first_edge = edge;
        while (edge < scene->n_edges && scene->edge[edge].part == part) edge++;
        add_blocks(scene, RG_FACET_BLOCK, mesh->part_first[part], mesh->part_first[part + 1], part);
        add_blocks(scene, RG_EDGE_BLOCK, first_edge, edge, part);
    }
    return RG_OK;
}

rg_status rg_scene_new_for(rg_scene **out, const rg_mesh *mesh, rg_cpu cpu, rg_error *err)
{
    rg_scene *scene = calloc(1, sizeof *scene);
    if (!scene) return rg_fail(err, RG_NO_MEMORY, "no memory for a scene");
    scene->mesh = mesh;
    scene->triangle_sum = rg_triangle_sum_for(cpu);
    scene->segment_sum = rg_segment_sum_for(cpu);
    rg_status status = rg_edges_find(&scene->edge, &scene->n_edges, mesh, RG_FEATURE_TURN_RAD, err);
    if (!status) status = cut_blocks(scene, err);
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
    free(scene->edge);
    free(scene);
}

const rg_mesh *rg_scene_mesh(const rg_scene *scene) { return scene->mesh; }
