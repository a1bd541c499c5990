/* main.c - picks the command, and turns a status into an exit code */
#include "cli/options.h"
#include <roadglint/version.h>
#include <ctype.h>
#include <errno.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>

const rg_command *const rg_commands[] = {&rg_command_sweep, &rg_command_inspect, &rg_command_shape, &rg_command_plot, NULL};

static int exit_code(rg_status status)
{
    switch (status) {
    case RG_OK: return 0;
    case RG_BAD_VALUE: return 2;
    case RG_BAD_INPUT: return 3;
    case RG_NO_MEMORY:
    case RG_SYSTEM: return 4;
    case RG_STOPPED: return 130;
    }
    return 4;
}

static rg_status run_command(const rg_command *command, int argc, char **argv, rg_error *err)
{
    for (int i = 1; i < argc && strcmp(argv[i], "--") != 0; i++)
        if (strcmp(argv[i], "--help") == 0 || strcmp(argv[i], "-h") == 0) {
            rg_print_help(command, stdout);
            return RG_OK;
        }
    return command->run(argc, argv, stdout, err);
}

static rg_status run(int argc, char **argv, rg_error *err)
{
    const char *name = argv[1];
    if (strcmp(name, "--version") == 0) {
        printf("roadglint %s\n", rg_version());
        return RG_OK;
    }
    if (strcmp(name, "help") == 0 || strcmp(name, "--help") == 0 || strcmp(name, "-h") == 0) return rg_cmd_help(argc - 1, argv + 1, stdout, err);
    for (const rg_command *const *c = rg_commands; *c; c++)
        if (strcmp((*c)->name, name) == 0) return run_command(*c, argc - 1, argv + 1, err);
    return rg_no_command(name, err);
}

int main(int argc, char **argv)
{
    rg_error err = {{0}};
    signal(SIGPIPE, SIG_IGN);                               /* a closed pipe is a write error, and told as one */
    if (argc < 2) {
        fputs("usage: roadglint COMMAND ...; 'roadglint help' lists the commands\n", stderr);
        return 2;
    }
    rg_status status = run(argc, argv, &err);
    if (!status && (fflush(stdout) != 0 || ferror(stdout))) status = rg_fail(&err, RG_SYSTEM, "standard output cannot be written: %s", strerror(errno));
    if (status) {
        for (char *c = err.text; *c; c++)
            if (iscntrl((unsigned char)*c)) *c = ' ';       /* of a word that the user gave: an error is one line */
        fprintf(stderr, "roadglint %s: %s\n", argv[1], err.text);
    }
    if (status == RG_STOPPED) _Exit(exit_code(status));     /* without the rest of a table for a pipe that nobody reads */
    return exit_code(status);
}
