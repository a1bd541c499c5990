/* walk_wide.c - walk.h the portable vector code */
#include "bvh/walk.h"

const rg_bvh_kernels rg_bvh_wide = {any, closest, any_packet, closest_packet, in_prism};
