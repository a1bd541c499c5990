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
#include <ctype.h>
#include <errno.h>
#include <stdarg.h>
#include <sys/stat.h>

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

static void trim_end(char *text)
{
    for (size_t n = strlen(text); n > 0 && isspace((unsigned char)text[n - 1]); n--) text[n - 1] = 0;
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

static rg_status take_text(const rg_command *command, const char *name, const char *text, const char *path, void *job, rg_error *err)
{
    rg_error why = {{0}};
    if (strcmp(name, "job") == 0) return rg_fail(err, RG_BAD_VALUE, "%s: a job file cannot take in another one; leave out the line 'job'", path);
    const rg_status status = rg_take_option(command, name, text, job, &why);
    return status ? rg_fail(err, status, "%s: %s", path, why.text) : RG_OK;
}

/* What libcyaml found wrong, in words that say what would be right. */
static rg_status bad_file(const rg_command *command, const char *path, cyaml_err_t found, told *t, void *job, rg_error *err)
{
    static const char key_before[] = "Unexpected key: ", noise[] = " Load: Backtrace: ", gap[] = "  ";
    char *key = found == CYAML_ERR_INVALID_KEY ? strstr(t->text, key_before) : NULL, *end;
    if (key) {
        key += sizeof key_before - 1;
        if ((end = strstr(key, " Load: "))) *end = 0;
        return take_text(command, key, "", path, job, err);
    }
    struct stat about;
    if (stat(path, &about) == 0 && S_ISDIR(about.st_mode)) return rg_fail(err, RG_BAD_INPUT, "%s: this is a folder: name a file of options", path);
    if (found == CYAML_ERR_FILE_OPEN) return rg_fail(err, RG_BAD_INPUT, "%s: %s", path, strerror(errno));
    while ((end = strstr(t->text, noise))) memmove(end + 1, end + sizeof noise - 1, strlen(end + sizeof noise - 1) + 1);
    while ((end = strstr(t->text, gap))) memmove(end, end + 1, strlen(end + 1) + 1);
    trim_end(t->text);
    return rg_fail(err, RG_BAD_INPUT, "%s: no list of options, one a line, such as az: 0,15,30 (%s)", path,
                   strncmp(t->text, "Load: ", 6) == 0 ? t->text + 6 : t->text[0] ? t->text : cyaml_strerror(found));
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
    if (found != CYAML_OK) return bad_file(command, path, found, &t, job, err);
    file->texts = texts;
    file->n = command->n_options;
    rg_status status = RG_OK;
    for (size_t i = 0; texts && i < command->n_options && !status; i++)
        if (texts[i]) {
            trim_end(texts[i]);                             /* a folded text, which suits long lists, ends in a newline */
            status = take_text(command, command->option[i].name + 2, texts[i], path, job, err);
        }
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
