/* inspect.c - roadglint inspect MESH: what the mesh is, whether it is fit for a wavelength, and what it looks like */
#include "cli/inspect_report.h"
#include "cli/mesh_options.h"
#include "plot/mesh_picture.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

#define RAD_PER_DEG 0.017453292519943295

/* An angle that was not given is NaN, a width 0. */
typedef struct {
    rg_mesh_frame frame;
    double freq_hz, az_deg, el_deg;
    int width_px;
    const char *picture;
    bool json;
} inspect_job;

static rg_status take_picture(void *field, const char *text, rg_error *err)
{
    const size_t n = strlen(text);
    if (n < 5 || strcasecmp(text + n - 4, ".png") != 0)
        return rg_fail(err, RG_BAD_VALUE, "%s: the picture is written as PNG; end the name in .png", text);
    return rg_take_string(field, text, err);
}

static rg_status take_width(void *field, const char *text, rg_error *err)
{
    char *end;
    const long n = strtol(text, &end, 10);
    if (end == text || *end || n < RG_PICTURE_LEAST_PX || n > RG_PICTURE_MOST_PX)
        return rg_fail(err, RG_BAD_VALUE, "'%s' is not a whole number of pixels from %d to %d", text, RG_PICTURE_LEAST_PX, RG_PICTURE_MOST_PX);
    *(int *)field = (int)n;
    return RG_OK;
}

static const rg_option options[] = {
    {"--freq", "FREQ", rg_take_freq, offsetof(inspect_job, freq_hz), "the highest frequency to judge it for, such as 77GHz"},
    RG_MESH_OPTIONS(inspect_job),
    {"--json", NULL, rg_take_flag, offsetof(inspect_job, json), "the report as JSON, lengths in metres"},
    {"--picture", "FILE", take_picture, offsetof(inspect_job, picture), "draw the mesh as the radar sees it, to a .png file"},
    {"--az", "ANGLE", rg_take_angle, offsetof(inspect_job, az_deg), "the picture's azimuth, degrees from the front toward the left (default 35)"},
    {"--el", "ANGLE", rg_take_angle, offsetof(inspect_job, el_deg), "the picture's elevation, degrees (default 20)"},
    {"--width", "PIXELS", take_width, offsetof(inspect_job, width_px), "the picture's width, 300 to 4000 (default 1000)"},
};

static const char more[] =
    "Facets that stand off the smooth surface by over lambda/16 turn the wave's phase by over 45 degrees: the mesh is not fit\n"
    "for that frequency. How far they stand off is estimated from the turns between neighbours; turns above 31 degrees, and\n"
    "lone ones above 10, count as edges of the shape. In a picture the hatched side of a sheet is its back.\n"
    "\n"
    "  roadglint inspect meshes/saloon.obj --freq 77GHz\n"
    "  roadglint inspect meshes/saloon.obj --picture saloon.png --az 35 --el 20";

static rg_status check_job(const inspect_job *job, rg_error *err)
{
    if (job->picture) return RG_OK;
    const char *const lost = !isnan(job->az_deg) ? "--az" : !isnan(job->el_deg) ? "--el" : job->width_px ? "--width" : NULL;
    return lost ? rg_fail(err, RG_BAD_VALUE, "%s belongs to a picture: add --picture FILE.png", lost) : RG_OK;
}

static rg_status draw(const inspect_job *job, const char *path, const rg_mesh *mesh, rg_error *err)
{
    const double az_deg = isnan(job->az_deg) ? 35.0 : job->az_deg, el_deg = isnan(job->el_deg) ? 20.0 : job->el_deg;
    const char *const slash = strrchr(path, '/');
    char size[128], note[2][192];
    rg_size_text(size, rg_mesh_get_report(mesh));
    snprintf(note[0], sizeof note[0], "%s (length x width x height), %zu facets", size, rg_mesh_n_facets(mesh));
    snprintf(note[1], sizeof note[1], "seen from azimuth %.6g, elevation %.6g degrees", az_deg + 0.0, el_deg + 0.0);
    const rg_mesh_picture picture = {.az_rad = az_deg * RAD_PER_DEG, .el_rad = el_deg * RAD_PER_DEG,
                                     .width_px = job->width_px ? job->width_px : 1000, .title = slash ? slash + 1 : path,
                                     .note = {note[0], note[1]}};
    return rg_mesh_picture_write(mesh, &picture, job->picture, err);
}

static rg_status run(int argc, char **argv, FILE *out, rg_error *err)
{
    inspect_job job = {.az_deg = NAN, .el_deg = NAN};
    rg_mesh *mesh = NULL;
    rg_inspection found = {0};
    const char *path = NULL;
    size_t n_positional;
    rg_status status = rg_take_options(&rg_command_inspect, argc, argv, &job, &path, 1, 1, &n_positional, err);
    if (!status) status = check_job(&job, err);
    if (!status) status = rg_mesh_read(&mesh, path, &job.frame, err);
    if (!status) status = rg_inspect(&found, path, mesh, job.freq_hz, err);
    if (!status && job.picture) status = draw(&job, path, mesh, err);
    if (!status) status = (job.json ? rg_inspection_json : rg_inspection_print)(out, &found, err);
    rg_inspection_free(&found);
    rg_mesh_free(mesh);
    return status;
}

const rg_command rg_command_inspect = {"inspect", "what a mesh is, whether it is fit for a frequency, and what it looks like", "MESH [options]",
                                       RG_ARRAY(options), more, run};
