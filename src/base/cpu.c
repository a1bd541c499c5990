/* cpu.c - which variant of each kernel runs here */
#include "base/cpu.h"
#include "base/wide.h"
#include <stdlib.h>
#include <string.h>

static const char *const name[RG_N_CPU] = {"plain", "wide", "avx2", "avx512"};

static rg_cpu found_level(void)
{
#if RG_HAS_X86
    if (__builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq") && __builtin_cpu_supports("avx512vl"))
        return RG_CPU_AVX512;
    if (__builtin_cpu_supports("avx2")) return RG_CPU_AVX2;
#endif
    return RG_CPU_WIDE;
}

rg_cpu rg_cpu_best(void)
{
    const rg_cpu found = found_level();
    const char *asked = getenv("ROADGLINT_CPU");
    for (int level = 0; asked && level < (int)found; level++)
        if (strcmp(asked, name[level]) == 0) return (rg_cpu)level;
    return found;
}

const char *rg_cpu_name(rg_cpu cpu) { return name[cpu]; }
