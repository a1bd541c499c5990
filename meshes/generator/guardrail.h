/* guardrail.h - two spans of W-beam guardrail, as the library's canonical shape has it */
#ifndef GENERATOR_GUARDRAIL_H
#define GENERATOR_GUARDRAIL_H
#include "facets.h"

facets guardrail_mesh(void);

#endif
