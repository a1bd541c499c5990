/* edges.h - a mesh's edges, each with the facets beside it */
#ifndef GENERATOR_EDGES_H
#define GENERATOR_EDGES_H
#include "facets.h"

enum { NO_FACET = UINT32_MAX };

/* a < b. facet[0] is the first facet that has the edge, facet[1] the second or NO_FACET; made is free for the user. */
typedef struct { uint32_t a, b, facet[2], made; } edge;

typedef struct {
    size_t n, room, n_slots;
    edge *edge;
    uint32_t *slot;                 /* open addressing: index of an edge, or NO_FACET */
    uint32_t (*of_facet)[3];        /* [n_facets]: the edge from corner c to corner (c + 1) % 3 */
} edges;

edges edges_of(const facets *mesh);
/* Is there an edge between two vertices? */
int edges_have(const edges *all, uint32_t a, uint32_t b);
void edges_free(edges *all);

#endif
