/* edges.c - a mesh's edges, each with the facets beside it */
#include "edges.h"
#include <stdlib.h>
#include <string.h>

/* The slot that holds the edge, or the empty one where it belongs; a < b. */
static size_t slot_of(const edges *all, uint32_t a, uint32_t b)
{
    size_t s = (a * 0x9E3779B97F4A7C15u ^ b * 0xC2B2AE3D27D4EB4Fu) >> 20 & (all->n_slots - 1);
    for (;; s = (s + 1) & (all->n_slots - 1)) {
        const uint32_t e = all->slot[s];
        if (e == NO_FACET || (all->edge[e].a == a && all->edge[e].b == b)) return s;
    }
}

int edges_have(const edges *all, uint32_t a, uint32_t b)
{
    return all->slot[a < b ? slot_of(all, a, b) : slot_of(all, b, a)] != NO_FACET;
}

static uint32_t find_or_add(edges *all, uint32_t a, uint32_t b)
{
    if (a > b) {
        const uint32_t swap = a;
        a = b;
        b = swap;
    }
    const size_t s = slot_of(all, a, b);
    if (all->slot[s] != NO_FACET) return all->slot[s];
    all->edge = grow_array(all->edge, &all->room, all->n + 1, sizeof *all->edge);
    all->edge[all->n] = (edge){a, b, {NO_FACET, NO_FACET}, 0};
    all->slot[s] = (uint32_t)all->n;
    return (uint32_t)all->n++;
}

edges edges_of(const facets *mesh)
{
    edges all = {.n_slots = 64};
    while (all.n_slots < 4 * mesh->n_facets) all.n_slots *= 2;
    size_t room_slots = 0, room_facets = 0;
    all.slot = grow_array(NULL, &room_slots, all.n_slots, sizeof *all.slot);
    memset(all.slot, 0xff, all.n_slots * sizeof *all.slot);
    all.of_facet = grow_array(NULL, &room_facets, mesh->n_facets, sizeof *all.of_facet);
    for (size_t i = 0; i < mesh->n_facets; i++) {
        for (int c = 0; c < 3; c++) {
            const uint32_t e = find_or_add(&all, mesh->facet[i].v[c], mesh->facet[i].v[(c + 1) % 3]);
            all.edge[e].facet[all.edge[e].facet[0] != NO_FACET] = (uint32_t)i;
            all.of_facet[i][c] = e;
        }
    }
    return all;
}

void edges_free(edges *all)
{
    free(all->edge);
    free(all->slot);
    free(all->of_facet);
    *all = (edges){0};
}
