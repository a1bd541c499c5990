/* sweep.c - the main job: a mesh in, a table out */
#include "base/out_file.h"
#include "base/progress.h"
#include "cli/job.h"
#include "cli/mesh_options.h"
#include "table/table.h"
#include <roadglint/sweep.h>
#include <roadglint/version.h>
#include <math.h>
#include <signal.h>
#include <string.h>
#include <strings.h>
#include <unistd.h>

#define TOTAL "total"                   /* the part column of the sum over all parts */
#define LIGHT_M_S 299792458.0
#define MOST_DEG 1e6                    /* farther round, a double keeps no fine step */
#define MOST_ROWS 1099511627776.0       /* 2^40, a petabyte of text: nobody means it */

typedef struct {
    rg_mesh_frame frame;
    rg_list_field freq, az, el;
    unsigned pol, mechanisms;
    int n_bounces;                      /* 0: not given */
    int n_threads;
    bool complex_columns, parts, quiet;
    const char *out, *job_file;
} sweep_job;

static int bounces_of(const sweep_job *job) { return job->n_bounces > 0 ? job->n_bounces : 4; }

static const char *const mechanism_name[] = {"surface", "edge", "bounce"};     /* bit i is RG_SURFACE << i */

static rg_status take_pol(void *field, const char *text, rg_error *err)
{
    return rg_take_words(field, rg_table_pol_name, RG_TABLE_N_POL, text, err);
}

static rg_status take_mechanisms(void *field, const char *text, rg_error *err) { return rg_take_words(field, RG_ARRAY(mechanism_name), text, err); }

static rg_status take_bounces(void *field, const char *text, rg_error *err)
{
    int n = 0;
    if (rg_take_count(&n, text, NULL) || n < 2 || n > 16) return rg_fail(err, RG_BAD_VALUE, "'%s' is not a whole number from 2 to 16", text);
    *(int *)field = n;
    return RG_OK;
}

static rg_status take_out(void *field, const char *text, rg_error *err)
{
    const size_t n = strlen(text);
    if (strcmp(text, "-") != 0 && (n < 5 || strcasecmp(text + n - 4, ".csv") != 0))
        return rg_fail(err, RG_BAD_VALUE, "%s: the table is written as CSV; end the name in .csv", text);
    return rg_take_string(field, text, err);
}

static const rg_option options[] = {
    {"--freq", "LIST", rg_take_freq_list, offsetof(sweep_job, freq), "frequencies, such as 77GHz or 76GHz:81GHz/101"},
    {"--az", "LIST", rg_take_angle_list, offsetof(sweep_job, az), "azimuths, degrees from the front toward the left, such as 0:359.9:0.1"},
    {"--el", "LIST", rg_take_angle_list, offsetof(sweep_job, el), "elevations, degrees (default 0)"},
    {"--pol", "LIST", take_pol, offsetof(sweep_job, pol), "of hh,vv,hv,vh; first letter received, second transmitted (default hh,vv)"},
    {"--mechanisms", "LIST", take_mechanisms, offsetof(sweep_job, mechanisms), "of surface,edge,bounce (default surface)"},
    {"--bounces", "N", take_bounces, offsetof(sweep_job, n_bounces), "reflections that the mechanism bounce follows, 2 to 16 (default 4)"},
    RG_MESH_OPTIONS(sweep_job),
    {"--complex", NULL, rg_take_flag, offsetof(sweep_job, complex_columns), "add the amplitudes' columns"},
    {"--parts", NULL, rg_take_flag, offsetof(sweep_job, parts), "add one row for each part of the mesh"},
    {"--out", "FILE", take_out, offsetof(sweep_job, out), "the table, .csv (default: standard output)"},
    {"--threads", "N", rg_take_count, offsetof(sweep_job, n_threads), "threads (default: one per processor)"},
    {"--job", "FILE", rg_take_string, offsetof(sweep_job, job_file), "these options from a YAML file; the command line wins"},
    {"--quiet", NULL, rg_take_flag, offsetof(sweep_job, quiet), "no progress, nothing about the mesh"},
};

static const char more[] =
    "For example, the whole circle at 77 GHz in steps of 0.1 degrees:\n"
    "  roadglint sweep meshes/saloon.obj --freq 77GHz --az 0:359.9:0.1 --out saloon.csv\n"
    "and as a job file, the same:\n"
    "  freq: 77GHz\n"
    "  az: 0:359.9:0.1\n"
    "  out: saloon.csv";

static volatile sig_atomic_t stop, has_file;                /* a signal's handler has nothing else to speak through */

/* Reading and building cannot be stopped, but there is nothing to clean up yet either. */
static void on_signal(int number)
{
    static const char text[] = "roadglint sweep: interrupted\n";
    (void)number;
    stop = 1;
    if (has_file) return;
    const ssize_t told = write(STDERR_FILENO, text, sizeof text - 1);
    (void)told;                                             /* who would hear of it */
    _exit(130);
}

/* No SA_RESTART: a write to a pipe that nobody reads must end too. */
static void listen_for_stop(void)
{
    struct sigaction action = {.sa_handler = on_signal}, before;
    sigemptyset(&action.sa_mask);
    sigaction(SIGINT, &action, NULL);
    sigaction(SIGTERM, &action, NULL);
    if (sigaction(SIGHUP, NULL, &before) == 0 && before.sa_handler != SIG_IGN) sigaction(SIGHUP, &action, NULL);   /* nohup stays */
}

typedef struct {
    FILE *out;
    rg_row_format format;
    const sweep_job *job;
    const rg_mesh *mesh;
    rg_progress progress;
    size_t done;
    bool on_terminal;           /* rows and progress share the screen */
    double undecided_m2;        /* of the worst aspect */
} row_writer;

static rg_status write_aspect(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    row_writer *w = user;
    const rg_list *freq = &w->job->freq.list;
    rg_status status = RG_OK;
    if (w->on_terminal) rg_progress_hide(&w->progress);
    for (size_t f = 0; f < aspect->n_freq && !status; f++)
        for (size_t slot = 0; slot < aspect->n_slots && !status; slot++)
            status = rg_csv_row(w->out, &w->format, aspect->az_deg, aspect->el_deg, freq->value[f],
                                slot == 0 ? TOTAL : rg_mesh_part_name(w->mesh, slot - 1), aspect->s_m[slot * aspect->n_freq + f], err);
    if (aspect->undecided_m2 > w->undecided_m2) w->undecided_m2 = aspect->undecided_m2;
    rg_progress_show(&w->progress, ++w->done);
    return status;
}

static void words_of(char *out, size_t room, unsigned mask, const char *const word[], size_t n)
{
    out[0] = 0;
    for (size_t i = 0; i < n; i++)
        if (mask >> i & 1u) snprintf(out + strlen(out), room - strlen(out), "%s%s", out[0] ? "," : "", word[i]);
}

/* Everything that the numbers depend on, and nothing else: equal work gives equal bytes. */
static rg_status write_head(FILE *out, const sweep_job *job, const char *path, const rg_mesh *mesh, rg_error *err)
{
    const rg_mesh_report *report = rg_mesh_get_report(mesh);
    const char *slash = strrchr(path, '/');
    char file[600], geometry[80], pol[32], mechanisms[32], bounces[16];
    snprintf(file, sizeof file, "%s sha256 %s", slash ? slash + 1 : path, report->sha256);
    snprintf(geometry, sizeof geometry, "sha256 %s", report->geometry_sha256);
    words_of(pol, sizeof pol, job->pol, rg_table_pol_name, RG_TABLE_N_POL);
    words_of(mechanisms, sizeof mechanisms, job->mechanisms, RG_ARRAY(mechanism_name));
    snprintf(bounces, sizeof bounces, "%d", bounces_of(job));
    const struct { const char *key, *value; } line[] = {
        {"roadglint", rg_version()}, {"mesh", file}, {"geometry", geometry}, {"frame", report->assumed}, {"el", job->el.text},
        {"az", job->az.text}, {"freq", job->freq.text}, {"pol", pol}, {"mechanisms", mechanisms},
        {"bounces", job->mechanisms & RG_BOUNCE ? bounces : NULL}, {"parts", job->parts ? "one row each, after the total" : NULL},
        {"angles", "degrees; direction from the target to the radar; azimuth from +x (front) toward +y (left), elevation toward +z (up)"},
        {"phase", "e^{+jwt}; S in metres, sigma = |S|^2; reference at the mesh's origin"}};
    rg_status status = RG_OK;
    for (size_t i = 0; i < sizeof line / sizeof line[0] && !status; i++)
        if (line[i].value && line[i].value[0]) status = rg_csv_head(out, line[i].key, line[i].value, err);
    return status;
}

static rg_status sweep_to(FILE *out, const sweep_job *job, const char *path, const rg_mesh *mesh, const rg_scene *scene, rg_error *err)
{
    const rg_sweep_plan plan = {.n_el = job->el.list.n, .n_az = job->az.list.n, .n_freq = job->freq.list.n, .el_deg = job->el.list.value,
                                .az_deg = job->az.list.value, .freq_hz = job->freq.list.value, .parts = job->parts,
                                .n_threads = job->n_threads, .mechanisms = job->mechanisms, .n_bounces = bounces_of(job)};
    row_writer writer = {.out = out, .format = {.complex_columns = job->complex_columns, .part_column = job->parts}, .job = job, .mesh = mesh,
                         .on_terminal = isatty(fileno(out))};
    for (int p = 0; p < RG_TABLE_N_POL; p++) writer.format.pol[p] = job->pol >> p & 1u;
    rg_status status = write_head(out, job, path, mesh, err);
    if (!status) status = rg_csv_header(out, &writer.format, err);
    if (status) return status;
    writer.progress = rg_progress_start(stderr, job->quiet, "aspects", plan.n_el * plan.n_az);
    status = rg_sweep(scene, &plan, write_aspect, &writer, &stop, err);
    rg_progress_end(&writer.progress);
    if (!status && !job->quiet && writer.undecided_m2 > 0.0)
        fprintf(stderr, "%s: where shadows crowd, up to %.2g m2 an aspect was taken as lit or dark in pieces under lambda/8\n", path,
                writer.undecided_m2);
    if (status == RG_SYSTEM) {
        const rg_error why = *err;
        rg_fail(err, status, "%s: %s", job->out ? job->out : "standard output", why.text);
    }
    if (status && stop) status = rg_fail(err, RG_STOPPED, "interrupted after %zu of %zu aspects", writer.done, plan.n_el * plan.n_az);
    return status;
}

static rg_status check_parts(const sweep_job *job, const char *path, const rg_mesh *mesh, rg_error *err)
{
    const double n_rows = (double)job->el.list.n * (double)job->az.list.n * (double)job->freq.list.n *
                          (double)(1 + (job->parts ? rg_mesh_n_parts(mesh) : 0));
    if (n_rows > MOST_ROWS)
        return rg_fail(err, RG_BAD_VALUE, "--el, --az, --freq and --parts make a table of %.3g rows, more than %.3g: cut it into several runs", n_rows,
                       MOST_ROWS);
    for (size_t p = 0; job->parts && p < rg_mesh_n_parts(mesh); p++)
        if (strcmp(rg_mesh_part_name(mesh, p), TOTAL) == 0)
            return rg_fail(err, RG_BAD_INPUT, "%s: a part has the name '" TOTAL "', which the table keeps for the sum: rename it, or leave out --parts",
                           path);
    return RG_OK;
}

/* What is allowed and hardly meant: a decimal comma (77,5GHz) and a forgotten unit (77) both end far below the mesh's own size. */
static void tell_doubts(const sweep_job *job, const char *path, const rg_mesh *mesh)
{
    const rg_mesh_report *report = rg_mesh_get_report(mesh);
    double lowest_hz = job->freq.list.value[0], size2_m2 = 0.0;
    for (size_t f = 1; f < job->freq.list.n; f++) lowest_hz = fmin(lowest_hz, job->freq.list.value[f]);
    for (int i = 0; i < 3; i++) size2_m2 += (report->high_m[i] - report->low_m[i]) * (report->high_m[i] - report->low_m[i]);
    if (LIGHT_M_S / lowest_hz > sqrt(size2_m2))
        fprintf(stderr, "%s: at %g Hz the wavelength is %.3g m and the mesh only %.3g m, too small for physical optics: a frequency has a unit "
                "(77GHz) and a decimal point (76.5GHz)\n", path, lowest_hz, LIGHT_M_S / lowest_hz, sqrt(size2_m2));
    if (job->n_bounces > 0 && !(job->mechanisms & RG_BOUNCE))
        fprintf(stderr, "%s: --bounces %d changes nothing without --mechanisms surface,bounce\n", path, job->n_bounces);
}

static rg_status run_job(const sweep_job *job, const char *path, rg_error *err)
{
    rg_mesh *mesh = NULL;
    rg_scene *scene = NULL;
    rg_out_file *file = NULL;
    listen_for_stop();
    rg_status status = rg_mesh_read(&mesh, path, &job->frame, err);
    if (!status && !job->quiet) rg_tell_mesh(path, mesh);
    if (!status) status = check_parts(job, path, mesh, err);
    if (!status && !job->quiet) tell_doubts(job, path, mesh);
    if (!status) status = rg_scene_new(&scene, mesh, err);
    has_file = 1;
    if (!status) status = rg_out_file_open(&file, job->out, err);
    if (!status) {
        status = sweep_to(rg_out_file_stream(file), job, path, mesh, scene, err);
        if (!status) status = rg_out_file_keep(file, err);
        else rg_out_file_drop(file);
        if (status && stop) status = RG_STOPPED;            /* a write that the signal broke off */
    }
    rg_scene_free(scene);
    rg_mesh_free(mesh);
    return status;
}

/* Here and not in the sweep, which begins when the table's head is written. */
static rg_status check_angles(const char *option, const rg_list_field *field, rg_error *err)
{
    for (size_t i = 0; i < field->list.n; i++)
        if (fabs(field->list.value[i]) > MOST_DEG)
            return rg_fail(err, RG_BAD_VALUE, "%s %g is too far round: an angle lies within a million degrees", option, field->list.value[i]);
    return RG_OK;
}

static rg_status check_job(sweep_job *job, rg_error *err)
{
    if (job->freq.list.n == 0) return rg_fail(err, RG_BAD_VALUE, "no frequency: add --freq 77GHz, or a list such as --freq 76GHz:81GHz/101");
    if (job->az.list.n == 0) return rg_fail(err, RG_BAD_VALUE, "no azimuth: add --az 0, or the whole circle with --az 0:359.9:0.1");
    for (size_t f = 0; f < job->freq.list.n; f++)
        if (job->freq.list.value[f] <= 0.0) return rg_fail(err, RG_BAD_VALUE, "--freq %s: a frequency must be above 0", job->freq.text);
    rg_status status = job->el.list.n > 0 ? RG_OK : rg_take_angle_list(&job->el, "0", err);
    if (!status) status = check_angles("--el", &job->el, err);
    if (!status) status = check_angles("--az", &job->az, err);
    return status;
}

static rg_status run(int argc, char **argv, FILE *out, rg_error *err)
{
    sweep_job job = {.pol = 3u, .mechanisms = RG_SURFACE};
    rg_job_file file = {0};
    const char *path = NULL, *job_path = rg_job_path(argc, argv);
    size_t n_positional;
    (void)out;                                              /* the table goes where --out says */
    rg_status status = job_path ? rg_job_read(&file, &rg_command_sweep, job_path, &job, err) : RG_OK;
    if (!status) status = rg_take_options(&rg_command_sweep, argc, argv, &job, &path, 1, 1, &n_positional, err);
    if (!status) status = check_job(&job, err);
    if (!status) status = run_job(&job, path, err);
    rg_list_field_free(&job.freq);
    rg_list_field_free(&job.az);
    rg_list_field_free(&job.el);
    rg_job_free(&file);
    return status;
}

const rg_command rg_command_sweep = {"sweep", "radar cross section over aspect, frequency and polarisation, as a table", "MESH --freq LIST --az LIST [options]",
                                     RG_ARRAY(options), more, run};
