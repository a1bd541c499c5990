/* job.h - a command's options from a YAML file */
#ifndef RG_CLI_JOB_H
#define RG_CLI_JOB_H
#include "cli/options.h"

/* The texts of a job file, which fields of the job point into. Start with {0}; free it after the job. */
typedef struct { void *texts; size_t n; } rg_job_file;

/* Reads a file of lines "name: value", names being the command's options without "--", into job. A flag takes true or false.
 * RG_BAD_INPUT (it cannot be read or is no such file), RG_BAD_VALUE (a name or a value is wrong: the text names file and key). */
rg_status rg_job_read(rg_job_file *file, const rg_command *command, const char *path, void *job, rg_error *err);
void rg_job_free(rg_job_file *file);

/* The value of "--job" in argv, NULL if there is none. The job file comes first, so that the command line wins. */
const char *rg_job_path(int argc, char **argv);

#endif
