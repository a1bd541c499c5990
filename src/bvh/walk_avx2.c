/* walk_avx2.c - walk.h for AVX2 */
#include "base/wide.h"
#if RG_HAS_X86 && !defined(__clang__)
#pragma GCC target("avx2,bmi,bmi2")
#endif
#include "bvh/walk.h"

const rg_bvh_kernels rg_bvh_avx2 = {any, closest, any_packet, closest_packet, in_prism};
