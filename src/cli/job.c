/* job.c - a command's options from a YAML file, by libcyaml */
#include "cli/job.h"
#include <stdlib.h>
#include <string.h>

const char *rg_job_path(int argc, char **argv)
{
    const char *path = NULL;
    for (int i = 1; i < argc && strcmp(argv[i], "--") != 0; i++) {
        if (strncmp(argv[i], "--job=", 6) == 0) path = argv[i] + 6;
        if (strcmp(argv[i], "--job") == 0 && i + 1 < argc) path = argv[i + 1];
    }
    return path;
}

#ifdef ROADGLINT_HAS_CYAML
#include <cyaml/cyaml.h>
#include <stdarg.h>

/* libcyaml tells what is wrong line by line; the first line is the cause, the last ones where. */
typedef struct { char text[200]; } told;

static void keep_log(cyaml_log_t level, void *context, const char *format, va_list args)
{
    told *t = context;
    (void)level;
    const size_t used = strlen(t->text);
    vsnprintf(t->text + used, sizeof t->text - used, format, args);
    for (char *c = t->text + used; *c; c++)
        if (*c == '\n') *c = ' ';
}

/* One optional text for each option: the schema is the option table. */
static cyaml_schema_field_t *make_fields(const rg_command *command)
{
    cyaml_schema_field_t *fields = calloc(command->n_options + 1, sizeof *fields);
    for (size_t i = 0; fields && i < command->n_options; i++)
        fields[i] = (cyaml_schema_field_t){.key = command->option[i].name + 2,
                                           .value = {.type = CYAML_STRING, .flags = CYAML_FLAG_POINTER | CYAML_FLAG_OPTIONAL,
                                                     .data_size = sizeof(char), .string = {.min = 0, .max = CYAML_UNLIMITED}},
                                           .data_offset = (uint32_t)(i * sizeof(char *))};
    return fields;
}

static rg_status take_text(const rg_command *command, size_t i, const char *text, const char *path, void *job, rg_error *err)
{
    const rg_option *option = &command->option[i];
    rg_error why = {{0}};
    if (!option->argument) {
        if (strcmp(text, "false") == 0) return RG_OK;
        if (strcmp(text, "true") != 0) return rg_fail(err, RG_BAD_VALUE, "%s: %s takes true or false, not '%s'", path, option->name + 2, text);
    }
    const rg_status status = option->take((char *)job + option->offset, text, &why);
    return status ? rg_fail(err, status, "%s: %s %s", path, option->name + 2, why.text) : RG_OK;
}

rg_status rg_job_read(rg_job_file *file, const rg_command *command, const char *path, void *job, rg_error *err)
{
    told t = {{0}};
    cyaml_schema_field_t *fields = make_fields(command);
    if (!fields) return rg_fail(err, RG_NO_MEMORY, "no memory to read %s", path);
    const cyaml_schema_value_t top = {.type = CYAML_MAPPING, .flags = CYAML_FLAG_POINTER,
                                      .data_size = (uint32_t)(command->n_options * sizeof(char *)), .mapping = {.fields = fields}};
    const cyaml_config_t config = {.log_fn = keep_log, .log_ctx = &t, .mem_fn = cyaml_mem, .log_level = CYAML_LOG_ERROR};
    char **texts = NULL;
    const cyaml_err_t found = cyaml_load_file(path, &config, &top, (cyaml_data_t **)&texts, NULL);
    free(fields);
    if (found != CYAML_OK)
        return rg_fail(err, found == CYAML_ERR_INVALID_KEY ? RG_BAD_VALUE : RG_BAD_INPUT, "%s: %s%s%s", path, cyaml_strerror(found),
                       t.text[0] ? ": " : "", t.text);
    file->texts = texts;
    file->n = command->n_options;
    rg_status status = RG_OK;
    for (size_t i = 0; texts && i < command->n_options && !status; i++)
        if (texts[i]) status = take_text(command, i, texts[i], path, job, err);
    return status;
}

void rg_job_free(rg_job_file *file)
{
    char **texts = file->texts;
    for (size_t i = 0; texts && i < file->n; i++) cyaml_mem(NULL, texts[i], 0);
    if (texts) cyaml_mem(NULL, texts, 0);
    *file = (rg_job_file){0};
}

#else

rg_status rg_job_read(rg_job_file *file, const rg_command *command, const char *path, void *job, rg_error *err)
{
    (void)file;
    (void)command;
    (void)job;
    return rg_fail(err, RG_BAD_VALUE, "--job %s: this roadglint was built without libcyaml; give the options on the command line", path);
}

void rg_job_free(rg_job_file *file) { *file = (rg_job_file){0}; }

#endif
