/* options.h - what a command takes: one table that parser, help, man page and completion read */
#ifndef RG_CLI_OPTIONS_H
#define RG_CLI_OPTIONS_H
#include "base/quantity.h"
#include "base/range.h"
#include <roadglint/mesh.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

#define RG_ARRAY(a) (a), sizeof(a) / sizeof((a)[0])

/* Reads text into the field of a command's job. The message need not name the option: the parser puts it before. */
typedef rg_status rg_take_fn(void *field, const char *text, rg_error *err);

typedef struct {
    const char *name;           /* "--freq" */
    const char *argument;       /* "LIST"; NULL: a flag, and take is called with an empty text where none was given */
    rg_take_fn *take;
    size_t offset;              /* of the field in the job */
    const char *help;           /* one line, no capital, no full stop */
} rg_option;

typedef struct {
    const char *name;           /* "sweep" */
    const char *summary;        /* one line for the list of commands */
    const char *usage;          /* what stands after the name: "MESH [options]" */
    const rg_option *option;
    size_t n_options;
    const char *more;           /* paragraphs below the options, such as examples; may be NULL */
    rg_status (*run)(int argc, char **argv, FILE *out, rg_error *err);   /* argv[0] is the command's name */
} rg_command;

/* Fields: const char *; bool; int (1 to 1024); double in SI units, degrees or decibels. */
rg_take_fn rg_take_string, rg_take_flag, rg_take_count, rg_take_length, rg_take_freq, rg_take_angle, rg_take_level;
/* double: metres in a unit m, cm, mm, in or ft; rg_axis: x, -x, y, -y, z, -z */
rg_take_fn rg_take_unit, rg_take_axis;

/* A list, with the text that it came from, which is lent. */
typedef struct { rg_list list; const char *text; } rg_list_field;
rg_take_fn rg_take_freq_list, rg_take_angle_list;
void rg_list_field_free(rg_list_field *field);

/* Words of a set, joined by commas, to a mask: bit i for word[i]. For take functions that know their words. */
rg_status rg_take_words(unsigned *mask, const char *const word[], size_t n_words, const char *text, rg_error *err);

/* Reads argv[1 ..] into job. An option is "--name VALUE" or "--name=VALUE", whatever VALUE starts with; a flag is "--name", and
 * "--name=false" takes it back; the last of several wins; "--" ends the options. All else goes to positional[0 .. most - 1]; fewer than least or more than most of them is an error that names
 * the usage. RG_BAD_VALUE. */
rg_status rg_take_options(const rg_command *command, int argc, char **argv, void *job, const char *positional[], size_t least, size_t most,
                          size_t *n_positional, rg_error *err);

/* One option by its name without "--", as a job file gives it; the message has no "--" either. A flag takes "true" or "false". RG_BAD_VALUE. */
rg_status rg_take_option(const rg_command *command, const char *name, const char *text, void *job, rg_error *err);

/* Which of the words a slip of the hand turned into the first n characters of typed; n_words if none. */
size_t rg_nearest_word(const char *const word[], size_t n_words, const char *typed, size_t n);

/* Prints what `help COMMAND` says. */
void rg_print_help(const rg_command *command, FILE *out);

extern const rg_command rg_command_sweep, rg_command_inspect, rg_command_shape, rg_command_plot;

/* All commands but help, in the order of the list; ends with NULL. */
extern const rg_command *const rg_commands[];

/* RG_BAD_VALUE, with the command that was meant. */
rg_status rg_no_command(const char *name, rg_error *err);

/* The command help itself. */
rg_status rg_cmd_help(int argc, char **argv, FILE *out, rg_error *err);

#endif
