/* range.c - a list of quantities, from text */
#include "base/range.h"
#include "base/number.h"
#include <ctype.h>
#include <math.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define MOST_VALUES 10000000.0

/* A range's step count is whole when it is so to this share of a step: START and STEP are decimals and round. */
#define WHOLE 1e-6

void rg_list_free(rg_list *list)
{
    free(list->value);
    *list = (rg_list){0};
}

static rg_status make_room(rg_list *list, size_t *room, double n_more, rg_error *err)
{
    if ((double)list->n + n_more > MOST_VALUES)
        return rg_fail(err, RG_BAD_VALUE, "a list of more than %.0f values: cut it into several runs", MOST_VALUES);
    const size_t wanted = list->n + (size_t)n_more;
    if (wanted <= *room) return RG_OK;
    const size_t room_wanted = wanted > 2 * *room ? wanted : 2 * *room;
    double *value = realloc(list->value, room_wanted * sizeof *value);
    if (!value) return rg_fail(err, RG_NO_MEMORY, "no memory for a list of %zu values", wanted);
    list->value = value;
    *room = room_wanted;
    return RG_OK;
}

/* Rounds to the 15th digit of largest, so that START + i STEP, which are decimals, give the decimal that was meant: 0.3, not
 * 0.30000000000000004. */
static double snap(double v, double largest)
{
    int digits = 15;
    double scale = 1.0;
    for (double x = largest; x > 1.0; x /= 10.0) digits--;
    for (int i = 0; i < abs(digits); i++) scale *= 10.0;
    return digits >= 0 ? rint(v * scale) / scale : rint(v / scale) * scale;
}

/* n values from start by step, the last one stop itself. */
static rg_status add_range(rg_list *list, size_t *room, double start, double step, double n, bool ends_at_stop, double stop, rg_error *err)
{
    const rg_status status = make_room(list, room, n, err);
    if (status) return status;
    const double largest = fmax(fabs(start), fabs(start + n * step));
    for (size_t i = 0; i < (size_t)n; i++) list->value[list->n++] = i == 0 ? start : snap(start + (double)i * step, largest);
    if (ends_at_stop) list->value[list->n - 1] = stop;
    return RG_OK;
}

/* The same range with the sign of its step turned, as the user would write it. */
static rg_status wrong_sign(const char *text, const char *runs, rg_error *err)
{
    const char *step = strrchr(text, ':') + 1;
    const int n = (int)(step - text);
    while (*step == ' ') step++;
    return rg_fail(err, RG_BAD_VALUE, "%s runs %s, so its step has the wrong sign: write %.*s%s%s", text, runs, n, text,
                   *step == '-' ? "" : "-", *step == '-' || *step == '+' ? step + 1 : step);
}

static rg_status add_stepped(rg_list *list, size_t *room, const char *text, const double v[3], rg_error *err)
{
    const double start = v[0], stop = v[1], step = v[2];
    if (step == 0.0) return rg_fail(err, RG_BAD_VALUE, "%s has a step of 0: write START:STOP:STEP with a step that gets there", text);
    if ((stop - start) * step < 0.0)
        return wrong_sign(text, stop < start ? "downward" : "upward", err);
    const double steps = (stop - start) / step, whole = rint(steps);
    if (!(steps < MOST_VALUES)) return rg_fail(err, RG_BAD_VALUE, "%s has more than %.0f values: cut it into several runs", text, MOST_VALUES);
    const bool lands = fabs(steps - whole) <= WHOLE;
    return add_range(list, room, start, step, (lands ? whole : floor(steps)) + 1.0, lands, stop, err);
}

static rg_status add_counted(rg_list *list, size_t *room, const char *text, const double v[2], const char *count_text, rg_error *err)
{
    double count = 0.0;
    const size_t taken = rg_take_number(&count, count_text);
    if (taken == 0 || count_text[taken] || !(count >= 1.0) || count != floor(count) || count > MOST_VALUES)
        return rg_fail(err, RG_BAD_VALUE, "%s: after '/' stands how many values, 1 to %.0f, such as %.*s/11", text, MOST_VALUES,
                       (int)(count_text - 1 - text), text);
    if (count == 1.0 && v[0] != v[1]) return rg_fail(err, RG_BAD_VALUE, "%s has two ends but one value: write a count of 2 or more", text);
    return add_range(list, room, v[0], count > 1.0 ? (v[1] - v[0]) / (count - 1.0) : 0.0, count, true, v[1], err);
}

/* One item of the list, which this may write to. */
static rg_status add_item(rg_list *list, size_t *room, rg_dimension dimension, char *item, rg_error *err)
{
    char text[128], *field[4] = {item}, *count_text = NULL;
    const char *unit_name[3], *last_unit = "";
    double v[3];
    int n = 1;
    snprintf(text, sizeof text, "%s", item);
    char *slash = strchr(item, '/');
    if (slash) {
        *slash = 0;
        count_text = slash + 1;
    }
    for (char *c = item; *c; c++)
        if (*c == ':') {
            *c = 0;
            if (n < 4) field[n] = c + 1;
            n++;
        }
    if (n > 3 || (count_text && n != 2))
        return rg_fail(err, RG_BAD_VALUE, "'%s' is no range: write START:STOP:STEP or START:STOP/COUNT", text);
    if (n == 2 && !count_text)
        return rg_fail(err, RG_BAD_VALUE, "'%s' has no step: write START:STOP:STEP or START:STOP/COUNT", text);
    rg_status status = RG_OK;
    for (int i = 0; i < n && !status; i++) {
        status = rg_split_quantity(&v[i], &unit_name[i], dimension, field[i], err);
        if (!status && *unit_name[i] && strchr("+-.0123456789", *unit_name[i]))      /* "0 15 30", "0..30" */
            status = rg_fail(err, RG_BAD_VALUE, "'%s' is no list: join values by commas, such as 0,15,30, and write a range as START:STOP:STEP", text);
        if (!status && *unit_name[i]) last_unit = unit_name[i];
    }
    for (int i = 0; i < n && !status; i++) status = rg_apply_unit(&v[i], dimension, *unit_name[i] ? unit_name[i] : last_unit, text, err);
    if (status) return status;
    if (n == 1) return add_range(list, room, v[0], 0.0, 1.0, false, 0.0, err);
    return count_text ? add_counted(list, room, text, v, count_text, err) : add_stepped(list, room, text, v, err);
}

rg_status rg_take_list(rg_list *list, rg_dimension dimension, const char *text, rg_error *err)
{
    rg_list taken = {0};
    size_t room = 0;
    char *copy = strdup(text);
    if (!copy) return rg_fail(err, RG_NO_MEMORY, "no memory for a list");
    rg_status status = RG_OK;
    for (char *item = copy, *next; item && !status; item = next) {
        next = strchr(item, ',');
        if (next) *next++ = 0;
        while (isspace((unsigned char)*item)) item++;
        for (size_t n = strlen(item); n > 0 && isspace((unsigned char)item[n - 1]); n--) item[n - 1] = 0;
        status = *item ? add_item(&taken, &room, dimension, item, err)
                       : rg_fail(err, RG_BAD_VALUE, "a list with nothing between two commas: write it such as 0,15,30");
    }
    free(copy);
    if (status) rg_list_free(&taken);
    else *list = taken;
    return status;
}
