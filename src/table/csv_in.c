/* csv_in.c - tables from CSV */
#include "base/number.h"
#include "base/room.h"
#include "table/decimal.h"
#include "table/table.h"
#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* What a column holds; the last two families are followed by the polarisations. */
typedef enum { IGNORED, AZ, EL, FREQ, PART, SIGMA, RE = SIGMA + RG_TABLE_N_POL, IM = RE + RG_TABLE_N_POL, N_ROLES = IM + RG_TABLE_N_POL } role;

enum { MOST_COLUMNS = 64, CHUNK = 1 << 16, MOST_RECORD = 1 << 26 };     /* a head line may hold a list of a million angles */

typedef struct {
    const char *path;
    FILE *file;
    char *text;                 /* what is read and not yet used: text[at .. n) */
    size_t at, n, text_room;
    size_t line, n_lines;       /* where the record starts, 1 is the first, and how many lines it takes */
    int n_columns, role[MOST_COLUMNS];
    char *name[MOST_COLUMNS];
    bool has[N_ROLES];
    size_t head_room_keys, head_room_values;
    double *values[N_ROLES];   /* where each role's numbers go */
    size_t room[N_ROLES], part_room;
} reader;

static const char *const role_name[] = {[AZ] = "az_deg", [EL] = "el_deg", [FREQ] = "freq_hz", [PART] = "part"};

static role role_of(const char *name)
{
    char text[40];
    for (role r = AZ; r <= PART; r++)
        if (strcmp(name, role_name[r]) == 0) return r;
    for (int p = 0; p < RG_TABLE_N_POL; p++) {
        static const char *const form[] = {"sigma_%s_dbsm", "re_%s_m", "im_%s_m"};
        for (int k = 0; k < 3; k++) {
            snprintf(text, sizeof text, form[k], rg_table_pol_name[p]);
            if (strcmp(name, text) == 0) return (role)(SIGMA + k * RG_TABLE_N_POL + p);
        }
    }
    return IGNORED;
}

/* The next field of a line, which is written to: quotes and the spaces around taken off (RFC 4180 has no spaces there, people have), *rest
 * set behind its comma, or to NULL at the end. NULL: something stands beside the quotes. */
static char *next_field(char **rest)
{
    char *in = *rest + strspn(*rest, " \t"), *field = in, *end = in;
    if (*in == '"') {
        field = end = ++in;
        for (; *in && !(*in == '"' && in[1] != '"'); in++) {
            if (*in == '"') in++;
            *end++ = *in;
        }
        in += *in == '"';
        in += strspn(in, " \t");
        if (*in && *in != ',') return NULL;
    } else {
        while (*in && *in != ',') in++;
        end = in;
        while (end > field && (end[-1] == ' ' || end[-1] == '\t')) end--;
    }
    *rest = *in == ',' ? in + 1 : NULL;
    *end = 0;
    return field;
}

static rg_status no_memory(const reader *r, rg_error *err) { return rg_fail(err, RG_NO_MEMORY, "%s: no memory for its rows", r->path); }

static rg_status beside_quotes(const reader *r, rg_error *err)
{
    return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: a quoted field goes on behind its quote; a quote within is written twice", r->path, r->line);
}

static rg_status add_head(reader *r, rg_table *t, char *line, rg_error *err)
{
    char *text = line + 1, *colon = strstr(text, ": ");
    while (*text == ' ') text++;
    if (!colon) return RG_OK;                               /* a remark */
    *colon = 0;
    char *key = strdup(text), *value = strdup(colon + 2);
    if (!key || !value || !rg_make_room((void **)&t->head_key, &r->head_room_keys, t->n_head + 1, sizeof *t->head_key) ||
        !rg_make_room((void **)&t->head_value, &r->head_room_values, t->n_head + 1, sizeof *t->head_value)) {
        free(key);
        free(value);
        return no_memory(r, err);
    }
    t->head_key[t->n_head] = key;
    t->head_value[t->n_head++] = value;
    return RG_OK;
}

static rg_status read_header(reader *r, char *line, rg_error *err)
{
    for (char *rest = line; rest; r->n_columns++) {
        const char *name = next_field(&rest);
        if (!name) return beside_quotes(r, err);
        if (r->n_columns == MOST_COLUMNS) return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: more than %d columns", r->path, r->line, MOST_COLUMNS);
        const role found = role_of(name);
        if (found != IGNORED && r->has[found]) return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: column %s stands there twice", r->path, r->line, name);
        if (!(r->name[r->n_columns] = strdup(name))) return no_memory(r, err);
        r->role[r->n_columns] = (int)found;
        r->has[found] = true;
    }
    for (role needed = AZ; needed <= FREQ; needed++)
        if (!r->has[needed])
            return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: no column %s; a table of this program has az_deg, el_deg, freq_hz and levels such as sigma_hh_dbsm",
                           r->path, r->line, role_name[needed]);
    bool any_level = false;
    for (int p = 0; p < RG_TABLE_N_POL; p++) {
        any_level |= r->has[SIGMA + p];
        if (r->has[RE + p] != r->has[IM + p])
            return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: re_%s_m and im_%s_m come together", r->path, r->line, rg_table_pol_name[p], rg_table_pol_name[p]);
    }
    return any_level ? RG_OK : rg_fail(err, RG_BAD_INPUT, "%s: line %zu: no column of levels such as sigma_hh_dbsm", r->path, r->line);
}

static rg_status is_no_number(const reader *r, int column, const char *field, rg_error *err)
{
    return rg_fail(err, RG_BAD_INPUT, "%s: line %zu, column %s: '%.40s' is no number", r->path, r->line, r->name[column], field);
}

static rg_status read_field(reader *r, const rg_table *t, int column, const char *field, rg_error *err)
{
    const int found = r->role[column];
    double value;
    if (!rg_get_decimal(&value, field)) {
        const size_t n = rg_take_number(&value, field);
        if (n == 0 || field[n] || !isfinite(value)) return is_no_number(r, column, field, err);
    }
    if (!rg_make_room((void **)&r->values[found], &r->room[found], t->n_rows + 1, sizeof(double))) return no_memory(r, err);
    r->values[found][t->n_rows] = value;
    return RG_OK;
}

static rg_status read_row(reader *r, rg_table *t, char *line, rg_error *err)
{
    const char *part = NULL;
    int column = 0;
    for (char *rest = line; rest; column++) {
        const char *field = next_field(&rest);
        if (!field) return beside_quotes(r, err);
        if (column == r->n_columns) return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: more fields than the header's %d", r->path, r->line, r->n_columns);
        if (r->role[column] == PART) part = field;
        if (r->role[column] == PART || r->role[column] == IGNORED) continue;
        const rg_status status = read_field(r, t, column, field, err);
        if (status) return status;
    }
    if (column < r->n_columns)
        return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: %d fields where the header has %d", r->path, r->line, column, r->n_columns);
    if (part && (!rg_make_room((void **)&t->part, &r->part_room, t->n_rows + 1, sizeof *t->part) || !(t->part[t->n_rows] = strdup(part))))
        return no_memory(r, err);
    t->n_rows++;
    return RG_OK;
}

/* One chunk more behind text[n). *got 0: the file has ended. */
static rg_status read_chunk(reader *r, size_t *got, rg_error *err)
{
    if (r->at > 0) memmove(r->text, r->text + r->at, r->n - r->at);
    r->n -= r->at;
    r->at = 0;
    if (r->n > MOST_RECORD) return rg_fail(err, RG_BAD_INPUT, "%s: line %zu is longer than %d MB", r->path, r->line, MOST_RECORD >> 20);
    if (!rg_make_room((void **)&r->text, &r->text_room, r->n + CHUNK + 1, 1)) return no_memory(r, err);
    *got = fread(r->text + r->n, 1, CHUNK, r->file);
    r->n += *got;
    return ferror(r->file) ? rg_fail(err, RG_BAD_INPUT, "%s: %s", r->path, strerror(errno)) : RG_OK;
}

/* The next record without its end of line: one line, or several where a quoted field holds the ends between them. NULL: there is none. */
static rg_status next_record(reader *r, char **record, rg_error *err)
{
    size_t length = 0, got = 1;
    bool quoted = false, ended = false;
    r->line += r->n_lines;
    r->n_lines = 1;
    *record = NULL;
    while (!ended && got > 0) {
        const char *text = r->text + r->at;
        const size_t most = r->n - r->at;
        for (; length < most && !ended; length++) {
            const char c = text[length];
            if (c == '"' && text[0] != '#') quoted = !quoted;
            ended = c == '\n' && !quoted;
            r->n_lines += c == '\n' && quoted;
        }
        const rg_status status = ended ? RG_OK : read_chunk(r, &got, err);
        if (status) return status;
    }
    if (quoted) return rg_fail(err, RG_BAD_INPUT, "%s: line %zu: a quote that never ends", r->path, r->line);
    if (length == 0) return RG_OK;
    char *text = r->text + r->at;
    r->at += length;
    length -= ended;
    while (length > 0 && text[length - 1] == '\r') length--;
    text[length] = 0;
    if (memchr(text, 0, length)) return rg_fail(err, RG_BAD_INPUT, "%s: line %zu holds a zero byte: this is no text", r->path, r->line);
    *record = text;
    return RG_OK;
}

static rg_status read_records(reader *r, rg_table *t, rg_error *err)
{
    size_t got;
    rg_status status = read_chunk(r, &got, err);
    if (!status && got >= 3 && memcmp(r->text, "\xef\xbb\xbf", 3) == 0) r->at = 3;      /* a byte order mark */
    while (!status) {
        char *record = NULL;
        status = next_record(r, &record, err);
        if (status || !record) break;
        if (record[0] == '#') status = add_head(r, t, record, err);
        else if (record[0] == 0) continue;
        else status = r->n_columns == 0 ? read_header(r, record, err) : read_row(r, t, record, err);
    }
    if (!status && r->n_columns == 0) status = rg_fail(err, RG_BAD_INPUT, "%s: no table: there is no line with the columns' names", r->path);
    if (!status && t->n_rows == 0) status = rg_fail(err, RG_BAD_INPUT, "%s: a table without rows", r->path);
    return status;
}

/* Hands the columns over; amplitudes are joined from their two. */
static rg_status place_columns(reader *r, rg_table *t, rg_error *err)
{
    t->az_deg = r->values[AZ];
    t->el_deg = r->values[EL];
    t->freq_hz = r->values[FREQ];
    r->values[AZ] = r->values[EL] = r->values[FREQ] = NULL;
    for (int p = 0; p < RG_TABLE_N_POL; p++) {
        t->sigma_dbsm[p] = r->values[SIGMA + p];
        r->values[SIGMA + p] = NULL;
        if (!r->has[RE + p]) continue;
        t->s_m[p] = malloc(t->n_rows * sizeof *t->s_m[p]);
        if (!t->s_m[p]) return no_memory(r, err);
        for (size_t i = 0; i < t->n_rows; i++) t->s_m[p][i] = CMPLX(r->values[RE + p][i], r->values[IM + p][i]);
    }
    return RG_OK;
}

rg_status rg_table_read(rg_table *out, const char *path, rg_error *err)
{
    rg_table table = {0};
    reader r = {.path = path, .file = fopen(path, "rb"), .n_lines = 1};
    if (!r.file) return rg_fail(err, RG_BAD_INPUT, "%s: %s", path, strerror(errno));
    rg_status status = read_records(&r, &table, err);
    if (!status) status = place_columns(&r, &table, err);
    fclose(r.file);
    free(r.text);
    for (int i = 0; i < r.n_columns; i++) free(r.name[i]);
    for (int i = 0; i < N_ROLES; i++) free(r.values[i]);
    if (status) rg_table_free(&table);
    else *out = table;
    return status;
}

void rg_table_free(rg_table *t)
{
    for (int p = 0; p < RG_TABLE_N_POL; p++) {
        free(t->sigma_dbsm[p]);
        free(t->s_m[p]);
    }
    for (size_t i = 0; i < t->n_rows && t->part; i++) free(t->part[i]);
    for (size_t i = 0; i < t->n_head; i++) {
        free(t->head_key[i]);
        free(t->head_value[i]);
    }
    free(t->az_deg);
    free(t->el_deg);
    free(t->freq_hz);
    free(t->part);
    free(t->head_key);
    free(t->head_value);
    *t = (rg_table){0};
}
