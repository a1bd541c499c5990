/* plot.c - tables in, a picture out */
#include "cli/options.h"
#include "plot/plot.h"
#include "table/decimal.h"
#include "table/table.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { MOST_TABLES = RG_PLOT_MOST_CURVES };

typedef struct {
    const char *out, *title, *part, *kind;
    unsigned pol;
    double low_dbsm, high_dbsm, az_deg, el_deg, freq_hz;
    int width_px;
} plot_job;

static rg_status take_pol(void *field, const char *text, rg_error *err)
{
    return rg_take_words(field, rg_table_pol_name, RG_TABLE_N_POL, text, err);
}

static rg_status take_kind(void *field, const char *text, rg_error *err)
{
    if (strcmp(text, "polar") != 0 && strcmp(text, "cartesian") != 0) return rg_fail(err, RG_BAD_VALUE, "'%s' is no kind; it takes polar or cartesian", text);
    return rg_take_string(field, text, err);
}

static rg_status take_out(void *field, const char *text, rg_error *err)
{
    const rg_status status = rg_plot_check_path(text, err);
    return status ? status : rg_take_string(field, text, err);
}

static rg_status take_width(void *field, const char *text, rg_error *err)
{
    char *end;
    const long n = strtol(text, &end, 10);
    if (end == text || *end || n < RG_PLOT_LEAST_PX || n > RG_PLOT_MOST_PX)
        return rg_fail(err, RG_BAD_VALUE, "'%s' is not a whole number from %d to %d", text, RG_PLOT_LEAST_PX, RG_PLOT_MOST_PX);
    *(int *)field = (int)n;
    return RG_OK;
}

static const rg_option options[] = {
    {"--out", "FILE", take_out, offsetof(plot_job, out), "the picture, .svg, .png or .pdf"},
    {"--kind", "KIND", take_kind, offsetof(plot_job, kind), "polar or cartesian (default: polar for a full circle)"},
    {"--pol", "LIST", take_pol, offsetof(plot_job, pol), "of hh,vv,hv,vh (default: hh and vv, or what the table has)"},
    {"--az", "ANGLE", rg_take_angle, offsetof(plot_job, az_deg), "show the cut at this azimuth"},
    {"--el", "ANGLE", rg_take_angle, offsetof(plot_job, el_deg), "show the cut at this elevation"},
    {"--freq", "FREQ", rg_take_freq, offsetof(plot_job, freq_hz), "show the cut at this frequency"},
    {"--part", "NAME", rg_take_string, offsetof(plot_job, part), "show this part of the mesh (default: the total)"},
    {"--min", "LEVEL", rg_take_level, offsetof(plot_job, low_dbsm), "lowest level shown, dBsm (default: from the table)"},
    {"--max", "LEVEL", rg_take_level, offsetof(plot_job, high_dbsm), "highest level shown, dBsm (default: from the table)"},
    {"--title", "TEXT", rg_take_string, offsetof(plot_job, title), "a line above the picture (default: the table's name, if it is one table)"},
    {"--width", "PX", take_width, offsetof(plot_job, width_px), "width in pixels (default 1200)"},
};

/* The three axes of a table, and what the user fixed of them. */
enum { AZ, EL, FREQ, N_AXES };
static const char *const axis_option[N_AXES] = {"--az", "--el", "--freq"};
static const char *const axis_name[N_AXES] = {"azimuth (deg)", "elevation (deg)", "frequency (GHz)"};

static double axis_value(const rg_table *t, int axis, size_t row) { return axis == AZ ? t->az_deg[row] : axis == EL ? t->el_deg[row] : t->freq_hz[row]; }

typedef struct { double x, level_dbsm; } sample;

static int by_x(const void *a, const void *b)
{
    const sample *p = a, *q = b;
    return (p->x > q->x) - (p->x < q->x);
}

static bool same_value(double a, double b) { return fabs(a - b) <= 1e-9 * fmax(fabs(a), fabs(b)) + 1e-12; }

static bool row_is_wanted(const rg_table *t, const plot_job *job, size_t row)
{
    const double fixed[N_AXES] = {job->az_deg, job->el_deg, job->freq_hz};
    for (int axis = 0; axis < N_AXES; axis++)
        if (!isnan(fixed[axis]) && !same_value(fixed[axis], axis_value(t, axis, row))) return false;
    return !t->part || strcmp(t->part[row], job->part ? job->part : "total") == 0;
}

/* "30" or "77GHz", as an option takes it; "30 deg" or "77 GHz" to read, with spaces. */
static const char *axis_text(char text[RG_DECIMAL_ROOM + 8], int axis, double value, const char *unit_of_angle, const char *unit_of_freq)
{
    *rg_put_shortest(text, axis == FREQ ? value * 1e-9 : value) = 0;
    char tidy[32];
    snprintf(tidy, sizeof tidy, "%.12g", axis == FREQ ? value * 1e-9 : value);
    if (axis == FREQ && strlen(tidy) < strlen(text)) strcpy(text, tidy);       /* 76.123 and not what 1e-9 rounds it to */
    return strcat(text, axis == FREQ ? unit_of_freq : unit_of_angle);
}

/* Why no row is wanted, by what would be right: the nearest value of an axis of which the table has not this one, or the parts. */
static rg_status no_row(const rg_table *t, const plot_job *job, const char *path, rg_error *err)
{
    const double fixed[N_AXES] = {job->az_deg, job->el_deg, job->freq_hz};
    for (int axis = 0; axis < N_AXES; axis++) {
        double nearest = INFINITY;
        if (isnan(fixed[axis])) continue;
        for (size_t row = 0; row < t->n_rows; row++)
            if (fabs(axis_value(t, axis, row) - fixed[axis]) < fabs(nearest - fixed[axis])) nearest = axis_value(t, axis, row);
        char text[RG_DECIMAL_ROOM + 8], there[RG_DECIMAL_ROOM + 8];
        if (!same_value(nearest, fixed[axis]))
            return rg_fail(err, RG_BAD_VALUE, "%s has nothing at %s %s; the nearest is %s", path, axis_option[axis],
                           axis_text(text, axis, fixed[axis], "", "GHz"), axis_text(there, axis, nearest, "", "GHz"));
    }
    const char *part = job->part ? job->part : "total";
    for (size_t row = 0; row < t->n_rows && t->part; row++)
        if (strcmp(t->part[row], part) == 0) return rg_fail(err, RG_BAD_VALUE, "%s has each of --az, --el and --freq, but nowhere together", path);
    char parts[160] = "";
    for (size_t row = 0, last = 0; t->part && row < t->n_rows && row < 1000; row++) {
        const size_t used = strlen(parts);
        if (row > 0 && strcmp(t->part[row], t->part[0]) == 0) break;           /* the next aspect */
        if (row > 0 && strcmp(t->part[row], t->part[last]) == 0) continue;
        snprintf(parts + used, sizeof parts - used, "%s%s", used ? ", " : "", t->part[row]);
        last = row;
    }
    return rg_fail(err, RG_BAD_VALUE, "%s has no part '%.60s'; it has %s", path, part, parts);
}

/* Which axis varies among the rows that are wanted; an error where several do. first: such a row. */
static rg_status find_axis(const rg_table *t, const plot_job *job, const char *path, int *x_axis, size_t *first, rg_error *err)
{
    bool varies[N_AXES] = {false};
    *first = t->n_rows;
    for (size_t row = 0; row < t->n_rows; row++) {
        if (!row_is_wanted(t, job, row)) continue;
        if (*first == t->n_rows) *first = row;
        for (int axis = 0; axis < N_AXES; axis++) varies[axis] |= axis_value(t, axis, row) != axis_value(t, axis, *first);
    }
    if (*first == t->n_rows) return no_row(t, job, path, err);
    *x_axis = varies[AZ] ? AZ : varies[EL] ? EL : varies[FREQ] ? FREQ : AZ;
    for (int axis = 0; axis < N_AXES; axis++)
        if (varies[axis] && axis != *x_axis) {
            char text[RG_DECIMAL_ROOM + 8];
            return rg_fail(err, RG_BAD_VALUE, "%s holds several cuts: pick one, such as %s %s", path, axis_option[axis],
                           axis_text(text, axis, axis_value(t, axis, *first), "", "GHz"));
        }
    return RG_OK;
}

enum { NAME_ROOM = 200, PLACE_ROOM = 120, N_PLACES = N_AXES + 1, LABEL_ROOM = 900 };

/* What the picture is made of; arrays live until free_curves. */
typedef struct {
    size_t n;
    rg_curve curve[RG_PLOT_MOST_CURVES];
    char pol[RG_PLOT_MOST_CURVES][24];          /* "HH", or "HH = VV" */
    char place[RG_PLOT_MOST_CURVES][N_PLACES][PLACE_ROOM];     /* what its other axes stand at, and its part */
    const char *path[RG_PLOT_MOST_CURVES];
    char label[RG_PLOT_MOST_CURVES][LABEL_ROOM];
    int x_axis;
} curves;

static void free_curves(curves *c)
{
    for (size_t i = 0; i < c->n; i++) {
        free((double *)c->curve[i].x);
        free((double *)c->curve[i].level_dbsm);
    }
}

/* Adds the polarisation's curve; *n 0: it is the curve before, bit for bit, and needs no line of its own. */
static rg_status add_curve(curves *c, const rg_table *t, const plot_job *job, int pol, bool first_of_table, rg_error *err)
{
    sample *s = malloc(t->n_rows * sizeof *s);
    double *x = malloc(t->n_rows * sizeof *x), *level = malloc(t->n_rows * sizeof *level);
    rg_status status = s && x && level ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for %zu rows", t->n_rows);
    size_t n = 0;
    for (size_t row = 0; row < t->n_rows && !status; row++)
        if (row_is_wanted(t, job, row))
            s[n++] = (sample){axis_value(t, c->x_axis, row) * (c->x_axis == FREQ ? 1e-9 : 1.0), t->sigma_dbsm[pol][row]};
    if (!status) qsort(s, n, sizeof *s, by_x);
    for (size_t i = 0; i < n; i++) {
        x[i] = s[i].x;
        level[i] = s[i].level_dbsm;
    }
    free(s);
    const char *name = rg_table_pol_name[pol], upper[] = {(char)(name[0] - 'a' + 'A'), (char)(name[1] - 'a' + 'A'), 0};
    const rg_curve *before = c->n > 0 && !first_of_table ? &c->curve[c->n - 1] : NULL;
    const bool same = !status && before && before->n == n && memcmp(before->x, x, n * sizeof *x) == 0 && memcmp(before->level_dbsm, level, n * sizeof *x) == 0;
    if (same) {
        strcat(strcat(c->pol[c->n - 1], " = "), upper);
    } else if (!status && c->n == RG_PLOT_MOST_CURVES) {
        status = rg_fail(err, RG_BAD_VALUE, "more than %d curves: give fewer tables or polarisations", RG_PLOT_MOST_CURVES);
    }
    if (same || status) {
        free(x);
        free(level);
        return status;
    }
    strcpy(c->pol[c->n], upper);
    c->curve[c->n] = (rg_curve){c->label[c->n], n, x, level};
    c->n++;
    return RG_OK;
}

static void describe_place(char place[N_PLACES][PLACE_ROOM], const rg_table *t, const plot_job *job, int x_axis, size_t row)
{
    static const int order[N_AXES] = {FREQ, AZ, EL};
    for (int i = 0; i < N_AXES; i++) {
        char text[RG_DECIMAL_ROOM + 8];
        const int axis = order[i];
        axis_text(text, axis, axis_value(t, axis, row), "\xc2\xb0", " GHz");
        if (axis != x_axis) snprintf(place[i], PLACE_ROOM, "%s%s", axis == FREQ ? "" : axis == AZ ? "azimuth " : "elevation ", text);
    }
    if (job->part) snprintf(place[N_AXES], PLACE_ROOM, "part %.100s", job->part);
}

static rg_status add_table(curves *c, const char *path, const plot_job *job, rg_error *err)
{
    rg_table t = {0};
    int x_axis = AZ;
    size_t row = 0;
    const size_t n_before = c->n;
    rg_status status = rg_table_read(&t, path, err);
    if (!status && job->part && !t.part) status = rg_fail(err, RG_BAD_VALUE, "--part %s: %s has no rows of parts; sweep with --parts", job->part, path);
    if (!status) status = find_axis(&t, job, path, &x_axis, &row, err);
    if (!status && c->n > 0 && x_axis != c->x_axis)
        status = rg_fail(err, RG_BAD_VALUE, "%s runs over %s, the tables before it over %s", path, axis_name[x_axis], axis_name[c->x_axis]);
    c->x_axis = x_axis;
    unsigned there = 0;
    for (int pol = 0; pol < RG_TABLE_N_POL; pol++) there |= t.sigma_dbsm[pol] ? 1u << pol : 0u;
    const unsigned coplanar = there & (1u << RG_TABLE_HH | 1u << RG_TABLE_VV), wanted = job->pol ? job->pol & there : coplanar ? coplanar : there;
    if (!status && !wanted) {
        char has[32] = "";
        for (int pol = 0; pol < RG_TABLE_N_POL; pol++)
            if (there >> pol & 1u) strcat(strcat(has, *has ? "," : ""), rg_table_pol_name[pol]);
        status = rg_fail(err, RG_BAD_VALUE, "%s has no levels of the polarisations that --pol asks for; it has %s", path, has);
    }
    for (int pol = 0; pol < RG_TABLE_N_POL && !status; pol++)
        if (wanted >> pol & 1u) status = add_curve(c, &t, job, pol, c->n == n_before, err);
    for (size_t i = n_before; i < c->n; i++) {
        c->path[i] = path;
        describe_place(c->place[i], &t, job, x_axis, row);
    }
    rg_table_free(&t);
    return status;
}

static const char *file_name(const char *path) { return strrchr(path, '/') ? strrchr(path, '/') + 1 : path; }

static void append(char *text, size_t room, const char *between, const char *more)
{
    const size_t used = strlen(text);
    if (*more) snprintf(text + used, room - used, "%s%s", used ? between : "", more);
}

/* A label says of each curve what tells it from the others; what is common to all of them goes to the note. */
static void make_labels(curves *c, size_t n_tables, char *note, size_t note_room)
{
    bool common[N_PLACES], same_name = false;
    for (int k = 0; k < N_PLACES; k++) {
        common[k] = true;
        for (size_t i = 1; i < c->n; i++) common[k] &= strcmp(c->place[i][k], c->place[0][k]) == 0;
        if (common[k]) append(note, note_room, ", ", c->place[0][k]);
    }
    for (size_t i = 0; i < c->n; i++)
        for (size_t k = 0; k < i; k++) same_name |= c->path[i] != c->path[k] && strcmp(file_name(c->path[i]), file_name(c->path[k])) == 0;
    for (size_t i = 0; i < c->n; i++) {
        append(c->label[i], LABEL_ROOM, "", c->pol[i]);
        if (n_tables > 1) append(c->label[i], LABEL_ROOM, "  ", same_name ? c->path[i] : file_name(c->path[i]));
        for (int k = 0; k < N_PLACES; k++)
            if (!common[k]) append(c->label[i], LABEL_ROOM, "  ", c->place[i][k]);
    }
}

static bool is_full_circle(const curves *c)
{
    const rg_curve *first = &c->curve[0];
    if (c->x_axis != AZ || first->n < 8) return false;
    const double span = first->x[first->n - 1] - first->x[0];
    return span + 1.5 * span / (double)(first->n - 1) >= 360.0;
}

static rg_status draw(curves *c, const plot_job *job, size_t n_tables, rg_error *err)
{
    char title[NAME_ROOM] = "", note[N_PLACES * PLACE_ROOM] = "";
    const bool polar = job->kind ? strcmp(job->kind, "polar") == 0 : is_full_circle(c);
    if (polar && c->x_axis != AZ) return rg_fail(err, RG_BAD_VALUE, "--kind polar needs a table over azimuth, this one runs over %s", axis_name[c->x_axis]);
    if (polar) append(note, sizeof note, "", "radar cross section over azimuth");
    make_labels(c, n_tables, note, sizeof note);
    if (n_tables == 1) {
        snprintf(title, sizeof title, "%s", file_name(c->path[0]));
        char *dot = strrchr(title, '.');
        if (dot && dot > title) *dot = 0;
    }
    const rg_plot plot = {.kind = polar ? RG_PLOT_POLAR : RG_PLOT_CARTESIAN, .title = job->title ? job->title : title, .note = note,
                          .x_name = axis_name[c->x_axis], .x_is_angle = c->x_axis != FREQ, .n_curves = c->n, .curve = c->curve,
                          .low_dbsm = job->low_dbsm, .high_dbsm = job->high_dbsm, .width_px = job->width_px};
    return rg_plot_write(&plot, job->out, err);
}

static rg_status run(int argc, char **argv, FILE *out, rg_error *err)
{
    plot_job job = {.low_dbsm = NAN, .high_dbsm = NAN, .az_deg = NAN, .el_deg = NAN, .freq_hz = NAN, .width_px = 1200};
    const char *path[MOST_TABLES];
    size_t n_tables = 0;
    curves c = {0};
    (void)out;                                              /* the picture goes where --out says */
    rg_status status = rg_take_options(&rg_command_plot, argc, argv, &job, path, 1, MOST_TABLES, &n_tables, err);
    if (!status && !job.out) status = rg_fail(err, RG_BAD_VALUE, "no picture named: add --out FILE.svg, .png or .pdf");
    if (!status && job.low_dbsm >= job.high_dbsm) status = rg_fail(err, RG_BAD_VALUE, "--min %g must be below --max %g", job.low_dbsm, job.high_dbsm);
    for (size_t i = 0; i < n_tables && !status; i++) status = add_table(&c, path[i], &job, err);
    if (!status) status = draw(&c, &job, n_tables, err);
    free_curves(&c);
    return status;
}

const rg_command rg_command_plot = {"plot", "polar and cartesian pictures of one or several tables", "TABLE... --out FILE [options]", RG_ARRAY(options),
                                    "For example:\n  roadglint plot saloon.csv --out saloon.svg\n  roadglint plot before.csv after.csv --kind cartesian --out both.png", run};
