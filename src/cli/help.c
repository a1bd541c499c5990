/* help.c - help, man page and the words of the completion, all from the option tables */
#include "cli/options.h"
#include <roadglint/version.h>
#include <string.h>

static const char about[] = "roadglint predicts the monostatic radar cross section of vehicles and roadside objects from triangle meshes";

static const char exit_codes[] = "0 done; 2 wrong usage; 3 the input file cannot be used;\n"
                                 "4 a system failure (disk, memory); 130 interrupted";

static const char values[] = "Quantities carry their unit: 77GHz, 76.5e9Hz, 120mm, 0.5m. A bare number is SI, an angle degrees. "
                             "A LIST is 0,15,30 or\n"
                             "START:STOP:STEP or START:STOP/COUNT or a mix of them. --az LIST and --az=LIST are the same, --quiet=false takes a flag\n"
                             "back, and of an option that is given twice the last one wins. -- ends the options.";

static const rg_command *find_command(const char *name)
{
    for (const rg_command *const *c = rg_commands; *c; c++)
        if (strcmp((*c)->name, name) == 0) return *c;
    return NULL;
}

void rg_print_help(const rg_command *command, FILE *out)
{
    fprintf(out, "roadglint %s %s\n%s.\n\n", command->name, command->usage, command->summary);
    for (size_t i = 0; i < command->n_options; i++) {
        const rg_option *o = &command->option[i];
        char name[64];
        snprintf(name, sizeof name, "%s%s%s", o->name, o->argument ? " " : "", o->argument ? o->argument : "");
        fprintf(out, "  %-22s %s\n", name, o->help);
    }
    if (command->more) fprintf(out, "\n%s\n", command->more);
}

static void print_commands(FILE *out)
{
    fprintf(out, "%s.\n\n", about);
    for (const rg_command *const *c = rg_commands; *c; c++) fprintf(out, "  roadglint %-8s %s\n", (*c)->name, (*c)->summary);
    fprintf(out, "  roadglint %-8s %s\n\n", "help", "the options of a command: roadglint help COMMAND");
    fprintf(out, "%s\n\nExit status: %s.\n", values, exit_codes);
}

/* A '-' in a man page's source is a hyphen; options want the minus sign. A '.' or ''' that starts a line is a request. */
static void print_roff(FILE *out, const char *text)
{
    bool line_start = true;
    for (const char *c = text; *c; c++) {
        if (line_start && (*c == '.' || *c == '\'')) fputs("\\&", out);
        if (*c == '-') fputs("\\-", out);
        else if (*c == '\\') fputs("\\e", out);
        else fputc(*c, out);
        line_start = *c == '\n';
    }
}

static void print_man_command(FILE *out, const rg_command *command)
{
    fprintf(out, ".SH ROADGLINT %s\n.B roadglint %s\n", command->name, command->name);
    print_roff(out, command->usage);
    fputs("\n.PP\n", out);
    print_roff(out, command->summary);
    fputs(".\n", out);
    for (size_t i = 0; i < command->n_options; i++) {
        const rg_option *o = &command->option[i];
        fputs(".TP\n.B ", out);
        print_roff(out, o->name);
        if (o->argument) fprintf(out, " \\fI%s\\fR", o->argument);
        fputc('\n', out);
        print_roff(out, o->help);
        fputc('\n', out);
    }
    if (command->more) {
        fputs(".PP\n.nf\n", out);
        print_roff(out, command->more);
        fputs("\n.fi\n", out);
    }
}

static void print_man(FILE *out)
{
    fprintf(out, ".TH ROADGLINT 1 \"\" \"roadglint %s\"\n.SH NAME\nroadglint \\- radar cross section of triangle meshes\n", rg_version());
    fputs(".SH SYNOPSIS\n.B roadglint\n.I COMMAND\n[\\fIARGUMENTS\\fR]\n.SH DESCRIPTION\n", out);
    print_roff(out, about);
    fputs(".\n.PP\n", out);
    print_roff(out, values);
    fputc('\n', out);
    for (const rg_command *const *c = rg_commands; *c; c++) print_man_command(out, *c);
    fputs(".SH EXIT STATUS\n", out);
    print_roff(out, exit_codes);
    fputs(".\n.SH CAUTIONS\nA predicted radar cross section is an estimate. It is no proof of a safety function and no substitute for\n"
          "measurement, for the local radio and road\\-safety rules, or for the judgement of the licensed engineer.\n", out);
}

static void print_words(FILE *out, const rg_command *command)
{
    for (const rg_command *const *c = rg_commands; *c && !command; c++) fprintf(out, "%s\n", (*c)->name);
    if (!command) fputs("help\n--version\n", out);
    for (size_t i = 0; command && i < command->n_options; i++) fprintf(out, "%s\n", command->option[i].name);
}

rg_status rg_no_command(const char *name, rg_error *err)
{
    const char *word[16] = {NULL};
    size_t n = 0;
    for (const rg_command *const *c = rg_commands; *c && n < 16; c++) word[n++] = (*c)->name;
    const size_t nearest = rg_nearest_word(word, n, name, strlen(name));
    if (nearest < n) return rg_fail(err, RG_BAD_VALUE, "there is no command '%s'; did you mean %s?", name, word[nearest]);
    return rg_fail(err, RG_BAD_VALUE, "there is no command '%s'; 'roadglint help' lists them", name);
}

rg_status rg_cmd_help(int argc, char **argv, FILE *out, rg_error *err)
{
    const bool words = argc > 1 && strcmp(argv[1], "--words") == 0;
    const char *name = argc > 1 + words ? argv[1 + words] : NULL;
    if (name && strcmp(name, "--man") == 0) {
        print_man(out);
        return RG_OK;
    }
    if (name && strcmp(name, "help") == 0) name = NULL;
    const rg_command *command = name ? find_command(name) : NULL;
    if (name && !command) return rg_no_command(name, err);
    if (words) print_words(out, command);
    else if (command) rg_print_help(command, out);
    else print_commands(out);
    return RG_OK;
}
