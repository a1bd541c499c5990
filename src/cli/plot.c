/* plot.c - tables in, a picture out */
#include "plot/plot.h"
#include "cli/options.h"
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
    {"--out", "FILE", rg_take_string, offsetof(plot_job, out), "the picture, .svg, .png or .pdf"},
    {"--kind", "KIND", take_kind, offsetof(plot_job, kind), "polar or cartesian (default: polar for a full circle)"},
    {"--pol", "LIST", take_pol, offsetof(plot_job, pol), "of hh,vv,hv,vh (default: the table's first)"},
    {"--az", "ANGLE", rg_take_angle, offsetof(plot_job, az_deg), "show the cut at this azimuth"},
    {"--el", "ANGLE", rg_take_angle, offsetof(plot_job, el_deg), "show the cut at this elevation"},
    {"--freq", "FREQ", rg_take_freq, offsetof(plot_job, freq_hz), "show the cut at this frequency"},
    {"--part", "NAME", rg_take_string, offsetof(plot_job, part), "show this part of the mesh (default: the total)"},
    {"--min", "LEVEL", rg_take_level, offsetof(plot_job, low_dbsm), "lowest level, dBsm"},
    {"--max", "LEVEL", rg_take_level, offsetof(plot_job, high_dbsm), "highest level, dBsm"},
    {"--title", "TEXT", rg_take_string, offsetof(plot_job, title), "a line above the picture"},
    {"--width", "PX", take_width, offsetof(plot_job, width_px), "width in pixels or points (default 1200)"},
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

/* Which axis varies among the rows that are wanted; an error where several do. */
static rg_status find_axis(const rg_table *t, const plot_job *job, const char *path, int *x_axis, rg_error *err)
{
    size_t first = t->n_rows;
    bool varies[N_AXES] = {false};
    for (size_t row = 0; row < t->n_rows; row++) {
        if (!row_is_wanted(t, job, row)) continue;
        if (first == t->n_rows) first = row;
        for (int axis = 0; axis < N_AXES; axis++) varies[axis] |= axis_value(t, axis, row) != axis_value(t, axis, first);
    }
    if (first == t->n_rows) return rg_fail(err, RG_BAD_VALUE, "%s has no row for what --az, --el, --freq and --part ask for", path);
    *x_axis = varies[AZ] ? AZ : varies[EL] ? EL : varies[FREQ] ? FREQ : AZ;
    for (int axis = 0; axis < N_AXES; axis++)
        if (varies[axis] && axis != *x_axis) {
            const double scale = axis == FREQ ? 1e-9 : 1.0;
            return rg_fail(err, RG_BAD_VALUE, "%s holds several cuts: pick one, such as %s %g%s", path, axis_option[axis],
                           axis_value(t, axis, first) * scale, axis == FREQ ? "GHz" : "");
        }
    return RG_OK;
}

/* What the picture is made of; arrays live until free_curves. */
typedef struct {
    size_t n;
    rg_curve curve[RG_PLOT_MOST_CURVES];
    char label[RG_PLOT_MOST_CURVES][160];
    int x_axis;
} curves;

static void free_curves(curves *c)
{
    for (size_t i = 0; i < c->n; i++) {
        free((double *)c->curve[i].x);
        free((double *)c->curve[i].level_dbsm);
    }
}

static rg_status add_curve(curves *c, const rg_table *t, const plot_job *job, int pol, const char *label, rg_error *err)
{
    if (c->n == RG_PLOT_MOST_CURVES) return rg_fail(err, RG_BAD_VALUE, "more than %d curves: give fewer tables or polarisations", RG_PLOT_MOST_CURVES);
    sample *s = malloc(t->n_rows * sizeof *s);
    double *x = malloc(t->n_rows * sizeof *x), *level = malloc(t->n_rows * sizeof *level);
    if (!s || !x || !level) {
        free(s);
        free(x);
        free(level);
        return rg_fail(err, RG_NO_MEMORY, "no memory for %zu rows", t->n_rows);
    }
    size_t n = 0;
    for (size_t row = 0; row < t->n_rows; row++)
        if (row_is_wanted(t, job, row))
            s[n++] = (sample){axis_value(t, c->x_axis, row) * (c->x_axis == FREQ ? 1e-9 : 1.0), t->sigma_dbsm[pol][row]};
    qsort(s, n, sizeof *s, by_x);
    for (size_t i = 0; i < n; i++) {
        x[i] = s[i].x;
        level[i] = s[i].level_dbsm;
    }
    free(s);
    snprintf(c->label[c->n], sizeof c->label[c->n], "%s", label);
    c->curve[c->n] = (rg_curve){c->label[c->n], n, x, level};
    c->n++;
    return RG_OK;
}

static rg_status add_table(curves *c, const char *path, const plot_job *job, bool name_file, rg_error *err)
{
    rg_table t = {0};
    int x_axis = AZ;
    bool any = false;
    rg_status status = rg_table_read(&t, path, err);
    if (!status && job->part && !t.part) status = rg_fail(err, RG_BAD_VALUE, "--part %s: %s has no rows of parts; sweep with --parts", job->part, path);
    if (!status) status = find_axis(&t, job, path, &x_axis, err);
    if (!status && c->n > 0 && x_axis != c->x_axis)
        status = rg_fail(err, RG_BAD_VALUE, "%s runs over another axis than the tables before it", path);
    c->x_axis = x_axis;
    const char *slash = strrchr(path, '/');
    for (int pol = 0; pol < RG_TABLE_N_POL && !status; pol++) {
        char label[160], upper[3] = {(char)(rg_table_pol_name[pol][0] - 32), (char)(rg_table_pol_name[pol][1] - 32), 0};
        const bool wanted = job->pol ? job->pol >> pol & 1u : !any;
        if (!wanted || !t.sigma_dbsm[pol]) continue;
        any = true;
        snprintf(label, sizeof label, "%s%s%.100s%s%s", upper, name_file ? "  " : "", name_file ? (slash ? slash + 1 : path) : "",
                 job->part ? "  " : "", job->part ? job->part : "");
        status = add_curve(c, &t, job, pol, label, err);
    }
    if (!status && !any) status = rg_fail(err, RG_BAD_VALUE, "%s has no column of the polarisations that --pol asks for", path);
    rg_table_free(&t);
    return status;
}

static bool is_full_circle(const curves *c)
{
    const rg_curve *first = &c->curve[0];
    if (c->x_axis != AZ || first->n < 8) return false;
    const double span = first->x[first->n - 1] - first->x[0];
    return span + 1.5 * span / (double)(first->n - 1) >= 360.0;
}

static rg_status run(int argc, char **argv, FILE *out, rg_error *err)
{
    plot_job job = {.title = "", .low_dbsm = NAN, .high_dbsm = NAN, .az_deg = NAN, .el_deg = NAN, .freq_hz = NAN, .width_px = 1200};
    const char *path[MOST_TABLES];
    size_t n_tables = 0;
    curves c = {0};
    (void)out;
    rg_status status = rg_take_options(&rg_command_plot, argc, argv, &job, path, 1, MOST_TABLES, &n_tables, err);
    if (!status && !job.out) status = rg_fail(err, RG_BAD_VALUE, "no picture named: add --out FILE.svg, .png or .pdf");
    for (size_t i = 0; i < n_tables && !status; i++) status = add_table(&c, path[i], &job, n_tables > 1, err);
    if (!status) {
        const bool polar = job.kind ? strcmp(job.kind, "polar") == 0 : is_full_circle(&c);
        if (polar && c.x_axis != AZ) status = rg_fail(err, RG_BAD_VALUE, "--kind polar needs a table over azimuth");
        const rg_plot plot = {.kind = polar ? RG_PLOT_POLAR : RG_PLOT_CARTESIAN, .title = job.title, .x_name = axis_name[c.x_axis],
                              .n_curves = c.n, .curve = c.curve, .low_dbsm = job.low_dbsm, .high_dbsm = job.high_dbsm, .width_px = job.width_px};
        if (!status) status = rg_plot_write(&plot, job.out, err);
    }
    free_curves(&c);
    return status;
}

const rg_command rg_command_plot = {"plot", "polar and cartesian pictures of one or several tables", "TABLE... --out FILE [options]", RG_ARRAY(options),
                                    "For example:\n  roadglint plot saloon.csv --out saloon.svg\n  roadglint plot before.csv after.csv --kind cartesian --out both.png", run};
