/* inspect_report.h - what `inspect` found, as text and as JSON */
#ifndef RG_CLI_INSPECT_REPORT_H
#define RG_CLI_INSPECT_REPORT_H
#include <roadglint/fitness.h>
#include <roadglint/mesh.h>
#include <stdio.h>

enum { RG_WARNINGS_MOST = 4 };

typedef struct {
    const char *path;                   /* as the user gave it; lent */
    const rg_mesh *mesh;                /* lent */
    double freq_hz;                     /* 0: none was asked for */
    rg_fitness fitness;                 /* without freq_hz only what does not depend on it has a meaning */
    double *part_sagitta_m;             /* [parts] */
    char verdict[512];
    size_t n_warnings;
    char warning[RG_WARNINGS_MOST][320];
} rg_inspection;

/* Judges the mesh. freq_hz 0: for no frequency. RG_BAD_VALUE, RG_NO_MEMORY as rg_mesh_fitness. */
rg_status rg_inspect(rg_inspection *out, const char *path, const rg_mesh *mesh, double freq_hz, rg_error *err);
void rg_inspection_free(rg_inspection *inspection);     /* what it holds, but for the mesh */

/* RG_SYSTEM (it cannot be written). */
rg_status rg_inspection_print(FILE *out, const rg_inspection *inspection, rg_error *err);
rg_status rg_inspection_json(FILE *out, const rg_inspection *inspection, rg_error *err);

/* "4.5 m x 1.8 m x 1.45 m", for a heading. */
void rg_size_text(char text[128], const rg_mesh_report *report);

#endif
