/* split.h - facets split where their edges are */
#ifndef GENERATOR_SPLIT_H
#define GENERATOR_SPLIT_H
#include "edges.h"

/* Every edge with made != NO_FACET has got the new vertex made on it; its facets are split in two, three or four. */
void split_edges(facets *mesh, const edges *all);

#endif
