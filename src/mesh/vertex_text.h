/* vertex_text.h - a vertex from a text format */
#ifndef RG_MESH_VERTEX_TEXT_H
#define RG_MESH_VERTEX_TEXT_H
#include "mesh/soup.h"
#include "mesh/text.h"

/* How a format finds its next word. */
typedef rg_word rg_next_word(rg_text *text);

/* Takes three words as a vertex; *largest grows to the largest absolute coordinate. RG_BAD_INPUT (line and word named), RG_NO_MEMORY. */
rg_status rg_take_vertex(rg_soup *soup, rg_text *text, rg_next_word *next_word, double *largest, rg_error *err);

#endif
