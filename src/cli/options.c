/* options.c - the one parser of all commands */
#include "cli/options.h"
#include <stdlib.h>
#include <string.h>

rg_status rg_take_string(void *field, const char *text, rg_error *err)
{
    (void)err;
    *(const char **)field = text;
    return RG_OK;
}

rg_status rg_take_flag(void *field, const char *text, rg_error *err)
{
    if (*text && strcmp(text, "true") != 0 && strcmp(text, "false") != 0)
        return rg_fail(err, RG_BAD_VALUE, "takes true or false, not '%s'", text);
    *(bool *)field = strcmp(text, "false") != 0;
    return RG_OK;
}

rg_status rg_take_count(void *field, const char *text, rg_error *err)
{
    char *end;
    const long n = strtol(text, &end, 10);
    if (end == text || *end || n < 1 || n > 1024) return rg_fail(err, RG_BAD_VALUE, "'%s' is not a whole number from 1 to 1024", text);
    *(int *)field = (int)n;
    return RG_OK;
}

static rg_status take_positive(double *value, rg_dimension dimension, const char *text, rg_error *err)
{
    double taken;
    rg_status status = rg_take_quantity(&taken, dimension, text, err);
    if (!status && taken <= 0.0) status = rg_fail(err, RG_BAD_VALUE, "%s must be above 0", text);
    if (!status) *value = taken;
    return status;
}

rg_status rg_take_length(void *field, const char *text, rg_error *err) { return take_positive(field, RG_LENGTH, text, err); }
rg_status rg_take_freq(void *field, const char *text, rg_error *err) { return take_positive(field, RG_FREQUENCY, text, err); }
rg_status rg_take_angle(void *field, const char *text, rg_error *err) { return rg_take_quantity(field, RG_ANGLE, text, err); }
rg_status rg_take_level(void *field, const char *text, rg_error *err) { return rg_take_quantity(field, RG_LEVEL, text, err); }

rg_status rg_take_unit(void *field, const char *text, rg_error *err)
{
    static const struct { const char *name; double m; } unit[] = {{"m", 1.0}, {"cm", 1e-2}, {"mm", 1e-3}, {"in", 0.0254}, {"ft", 0.3048}};
    for (size_t i = 0; i < sizeof unit / sizeof unit[0]; i++)
        if (strcmp(text, unit[i].name) == 0) {
            *(double *)field = unit[i].m;
            return RG_OK;
        }
    return rg_fail(err, RG_BAD_VALUE, "'%s' is no unit here; it takes m, cm, mm, in or ft", text);
}

rg_status rg_take_axis(void *field, const char *text, rg_error *err)
{
    static const struct { const char *name; rg_axis axis; } axis[] = {{"x", RG_PLUS_X}, {"-x", RG_MINUS_X}, {"y", RG_PLUS_Y},
                                                                      {"-y", RG_MINUS_Y}, {"z", RG_PLUS_Z}, {"-z", RG_MINUS_Z}};
    for (size_t i = 0; i < sizeof axis / sizeof axis[0]; i++)
        if (strcmp(*text == '+' ? text + 1 : text, axis[i].name) == 0) {
            *(rg_axis *)field = axis[i].axis;
            return RG_OK;
        }
    return rg_fail(err, RG_BAD_VALUE, "'%s' is no axis; it takes x, -x, y, -y, z or -z", text);
}

static rg_status take_list(rg_list_field *field, rg_dimension dimension, const char *text, rg_error *err)
{
    rg_list taken = {0};
    const rg_status status = rg_take_list(&taken, dimension, text, err);
    if (status) return status;
    rg_list_free(&field->list);
    *field = (rg_list_field){taken, text};
    return RG_OK;
}

rg_status rg_take_freq_list(void *field, const char *text, rg_error *err) { return take_list(field, RG_FREQUENCY, text, err); }
rg_status rg_take_angle_list(void *field, const char *text, rg_error *err) { return take_list(field, RG_ANGLE, text, err); }

void rg_list_field_free(rg_list_field *field) { rg_list_free(&field->list); }

/* "a, b or c" */
static void join_words(char *out, size_t room, const char *const word[], size_t n)
{
    out[0] = 0;
    for (size_t i = 0; i < n; i++) {
        const size_t used = strlen(out);
        snprintf(out + used, room - used, "%s%s", i == 0 ? "" : i + 1 == n ? " or " : ", ", word[i]);
    }
}

rg_status rg_take_words(unsigned *mask, const char *const word[], size_t n_words, const char *text, rg_error *err)
{
    unsigned taken = 0;
    for (const char *item = text; item; item = strchr(item, ',') ? strchr(item, ',') + 1 : NULL) {
        const size_t n = strcspn(item, ",");
        size_t i = 0;
        while (i < n_words && (strlen(word[i]) != n || strncmp(item, word[i], n) != 0)) i++;
        if (i == n_words) {
            char words[160];
            join_words(words, sizeof words, word, n_words);
            return rg_fail(err, RG_BAD_VALUE, "'%.*s' is none of its words: %s, joined by commas", (int)n, item, words);
        }
        taken |= 1u << i;
    }
    *mask = taken;
    return RG_OK;
}

static size_t smallest(size_t a, size_t b, size_t c) { return a < b ? (a < c ? a : c) : (b < c ? b : c); }

/* Edits that turn a into b (V. Levenshtein, 1966); names are short. */
static size_t distance(const char *a, size_t n_a, const char *b)
{
    enum { MOST = 40 };
    const size_t n_b = strlen(b);
    size_t row[MOST + 1];
    if (n_a > MOST || n_b > MOST) return MOST;
    for (size_t k = 0; k <= n_b; k++) row[k] = k;
    for (size_t i = 1; i <= n_a; i++) {
        size_t diagonal = row[0];
        row[0] = i;
        for (size_t k = 1; k <= n_b; k++) {
            const size_t above = row[k];
            row[k] = smallest(above + 1, row[k - 1] + 1, diagonal + (a[i - 1] != b[k - 1]));
            diagonal = above;
        }
    }
    return row[n_b];
}

size_t rg_nearest_word(const char *const word[], size_t n_words, const char *typed, size_t n)
{
    size_t nearest = n_words, least = n / 2 < 4 ? n / 2 : 4;    /* half of the letters, or four, is no slip of the hand */
    for (size_t i = 0; i < n_words; i++) {
        const size_t n_word = strlen(word[i]), d = distance(typed, n, word[i]);
        if (d < least) {
            least = d;
            nearest = i;
        }
        if (nearest == n_words && n > 3 && strncmp(typed, word[i], n < n_word ? n : n_word) == 0) nearest = i;   /* --azimuth: --az */
    }
    return nearest;
}

/* dashes: "--", or nothing for the names in a job file. */
static rg_status unknown_option(const rg_command *command, const char *dashes, const char *name, size_t n, rg_error *err)
{
    enum { MOST = 64 };
    const char *word[MOST] = {NULL};
    const size_t n_words = command->n_options < MOST ? command->n_options : MOST, n_dashes = strlen(dashes);
    for (size_t i = 0; i < n_words; i++) word[i] = command->option[i].name + 2 - n_dashes;
    size_t nearest = 0;
    while (nearest < n_words && !(n_dashes > 0 && strlen(word[nearest]) == n + 1 && strncmp(word[nearest] + 1, name, n) == 0)) nearest++;   /* -az */
    if (nearest == n_words) nearest = rg_nearest_word(word, n_words, name, n);
    if (nearest < n_words) return rg_fail(err, RG_BAD_VALUE, "there is no option %.*s; did you mean %s?", (int)n, name, word[nearest]);
    return rg_fail(err, RG_BAD_VALUE, "there is no option %.*s; 'roadglint help %s' lists them", (int)n, name, command->name);
}

static const rg_option *find_option(const rg_command *command, const char *name, size_t n)
{
    for (size_t i = 0; i < command->n_options; i++)
        if (strlen(command->option[i].name) == n && strncmp(command->option[i].name, name, n) == 0) return &command->option[i];
    return NULL;
}

/* name: the option as the user wrote it. */
static rg_status take(const rg_option *option, const char *name, const char *text, void *job, rg_error *err)
{
    rg_error why = {{0}};
    if (!*text && option->argument) return rg_fail(err, RG_BAD_VALUE, "%s needs a value, not an empty one: %s", name, option->help);
    const rg_status status = option->take((char *)job + option->offset, text, &why);
    return status ? rg_fail(err, status, "%s %s", name, why.text) : RG_OK;
}

rg_status rg_take_option(const rg_command *command, const char *name, const char *text, void *job, rg_error *err)
{
    for (size_t i = 0; i < command->n_options; i++) {
        const rg_option *option = &command->option[i];
        if (strcmp(option->name + 2, name) != 0) continue;
        return take(option, name, *text || option->argument ? text : "an empty text", job, err);
    }
    return unknown_option(command, "", name, strlen(name), err);
}

rg_status rg_take_options(const rg_command *command, int argc, char **argv, void *job, const char *positional[], size_t least, size_t most,
                          size_t *n_positional, rg_error *err)
{
    bool options_end = false;
    *n_positional = 0;
    for (int i = 1; i < argc; i++) {
        const char *word = argv[i];
        if (!options_end && strcmp(word, "--") == 0) {
            options_end = true;
        } else if (!options_end && word[0] == '-' && word[1]) {
            const size_t n = strcspn(word, "=");
            const rg_option *option = find_option(command, word, n);
            const char *text = word[n] ? word + n + 1 : NULL;
            if (!option) return unknown_option(command, "--", word, n, err);
            if (option->argument && !text) {
                if (i + 1 == argc) return rg_fail(err, RG_BAD_VALUE, "%s needs a value: %s", option->name, option->help);
                text = argv[++i];
            }
            const rg_status status = take(option, option->name, text ? text : "", job, err);
            if (status) return status;
        } else if (*n_positional == most) {
            return rg_fail(err, RG_BAD_VALUE, "'%s' is one word too many: roadglint %s %s", word, command->name, command->usage);
        } else {
            positional[(*n_positional)++] = word;
        }
    }
    if (*n_positional < least)
        return rg_fail(err, RG_BAD_VALUE, "%.*s is missing: roadglint %s %s", (int)strcspn(command->usage, " ."), command->usage, command->name,
                       command->usage);
    return RG_OK;
}
