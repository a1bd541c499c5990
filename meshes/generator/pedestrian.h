/* pedestrian.h - the invented adult pedestrian dummy */
#ifndef GENERATOR_PEDESTRIAN_H
#define GENERATOR_PEDESTRIAN_H
#include "facets.h"

facets pedestrian_mesh(void);

#endif
