/* out_file.h - a file that appears under its name only when it is complete */
#ifndef RG_BASE_OUT_FILE_H
#define RG_BASE_OUT_FILE_H
#include <roadglint/status.h>
#include <stdio.h>

typedef struct rg_out_file rg_out_file;

/* path NULL or "-": standard output. Otherwise a temporary file beside path, in the same folder. RG_SYSTEM, RG_NO_MEMORY. */
rg_status rg_out_file_open(rg_out_file **out, const char *path, rg_error *err);
FILE *rg_out_file_stream(rg_out_file *file);
/* Flushes, syncs, renames to path, frees. On failure the temporary file is gone and what stood under path is untouched. */
rg_status rg_out_file_keep(rg_out_file *file, rg_error *err);
/* Removes the temporary file, frees. Takes NULL. */
void rg_out_file_drop(rg_out_file *file);

#endif
