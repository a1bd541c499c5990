/* walk_avx512.c - walk.h for AVX-512 */
#include "base/wide.h"
#if RG_HAS_X86 && !defined(__clang__)
#pragma GCC target("avx2,bmi,bmi2,avx512f,avx512dq,avx512vl")
#endif
#include "bvh/walk.h"

const rg_bvh_kernels rg_bvh_avx512 = {any, closest, any_packet, closest_packet, in_prism};
