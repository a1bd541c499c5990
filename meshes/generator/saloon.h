/* saloon.h - the invented saloon */
#ifndef GENERATOR_SALOON_H
#define GENERATOR_SALOON_H
#include "facets.h"

facets saloon_mesh(void);

#endif
