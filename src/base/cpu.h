/* cpu.h - which variant of each kernel runs here */
#ifndef RG_BASE_CPU_H
#define RG_BASE_CPU_H

/* In rising order; a processor that has a level has all under it. PLAIN is the definition, WIDE the portable vector code. */
typedef enum { RG_CPU_PLAIN, RG_CPU_WIDE, RG_CPU_AVX2, RG_CPU_AVX512, RG_N_CPU } rg_cpu;

/* The best level of this machine, or the lower one that ROADGLINT_CPU names (plain, wide, avx2, avx512). Results are the same
 * bits at every level; the variable is for tests. */
rg_cpu rg_cpu_best(void);

const char *rg_cpu_name(rg_cpu cpu);

#endif
