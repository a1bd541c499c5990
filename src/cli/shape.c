/* shape.c - roadglint shape KIND: writes a canonical target as a mesh file */
#include "cli/options.h"
#include <math.h>
#include <roadglint/shape.h>
#include <stdio.h>
#include <string.h>
#include <strings.h>

enum { WIDTH, HEIGHT, RADIUS, TOP_RADIUS, LENGTH, LEG, FACE, N_SIZES };
static const char *const size_option[N_SIZES] = {"--width", "--height", "--radius", "--top-radius", "--length", "--leg", "--face"};

/* A size that was not given is NaN. The face's form stands among the sizes, as 0, 1 or 2. */
typedef struct {
    double size[N_SIZES], sagitta_m, edge_m;
    const char *out;
} shape_job;

/* Sizes in the order of rg_shape.size_m; after them one that may be left out, with what it is then. */
typedef struct {
    const char *name;
    rg_shape_kind kind;
    int n_needed, n_taken, size[3];
    double without;
    const char *example;
} shape_kind;

static const shape_kind kinds[] = {
    {"plate", RG_PLATE, 2, 2, {WIDTH, HEIGHT}, 0.0, "--width 1m --height 0.5m"},
    {"disc", RG_DISC, 1, 1, {RADIUS}, 0.0, "--radius 60mm --sagitta 0.06mm"},
    {"sphere", RG_SPHERE, 1, 1, {RADIUS}, 0.0, "--radius 100mm --sagitta 0.06mm"},
    {"cylinder", RG_CYLINDER, 2, 2, {RADIUS, LENGTH}, 0.0, "--radius 50mm --length 300mm --sagitta 0.06mm"},
    {"cone", RG_CONE, 2, 3, {RADIUS, HEIGHT, TOP_RADIUS}, 0.0, "--radius 100mm --height 300mm --sagitta 0.06mm"},
    {"dihedral", RG_DIHEDRAL, 2, 2, {WIDTH, HEIGHT}, 0.0, "--width 100mm --height 100mm"},
    {"trihedral", RG_TRIHEDRAL, 1, 2, {LEG, FACE}, 0.0, "--leg 100mm"},
    {"guardrail", RG_GUARDRAIL, 0, 1, {LENGTH}, 3.81, "--length 3.81m --sagitta 0.06mm"}};
enum { N_KINDS = sizeof kinds / sizeof kinds[0] };

static const char *const face_name[] = {"triangular", "square", "circular"};

static rg_status take_face(void *field, const char *text, rg_error *err)
{
    for (int i = 0; i < 3; i++)
        if (strcmp(text, face_name[i]) == 0) {
            *(double *)field = i;
            return RG_OK;
        }
    return rg_fail(err, RG_BAD_VALUE, "'%s' is no form of a face; it takes triangular, square or circular", text);
}

static rg_status take_top_radius(void *field, const char *text, rg_error *err)
{
    double taken_m;
    rg_status status = rg_take_quantity(&taken_m, RG_LENGTH, text, err);
    if (!status && taken_m < 0.0) status = rg_fail(err, RG_BAD_VALUE, "%s is below 0; 0 makes a tip", text);
    if (!status) *(double *)field = taken_m;
    return status;
}

#define SIZE(which) offsetof(shape_job, size) + (which) * sizeof(double)
static const rg_option options[] = {
    {"--width", "LENGTH", rg_take_length, SIZE(WIDTH), "of a plate, or of each face of a dihedral"},
    {"--height", "LENGTH", rg_take_length, SIZE(HEIGHT), "of a plate, a cone or a dihedral"},
    {"--radius", "LENGTH", rg_take_length, SIZE(RADIUS), "of a disc, a sphere, a cylinder or a cone's base"},
    {"--top-radius", "LENGTH", take_top_radius, SIZE(TOP_RADIUS), "of a cone's top (default 0: a tip)"},
    {"--length", "LENGTH", rg_take_length, SIZE(LENGTH), "of a cylinder or a guardrail (guardrail: default 3.81m)"},
    {"--leg", "LENGTH", rg_take_length, SIZE(LEG), "of a trihedral, along its inner edges"},
    {"--face", "FORM", take_face, SIZE(FACE), "of a trihedral: triangular (default), square or circular"},
    {"--sagitta", "LENGTH", rg_take_length, offsetof(shape_job, sagitta_m), "largest distance between a chord and its curve, such as 0.06mm"},
    {"--edge", "LENGTH", rg_take_length, offsetof(shape_job, edge_m), "longest edge of a facet (default: flat faces stay whole)"},
    {"--out", "FILE", rg_take_string, offsetof(shape_job, out), "the file to write: .stl, .obj or .ply"},
};

static rg_status find_kind(const shape_kind **kind, const char *name, rg_error *err)
{
    for (int i = 0; i < N_KINDS; i++)
        if (strcmp(name, kinds[i].name) == 0) {
            *kind = &kinds[i];
            return RG_OK;
        }
    return rg_fail(err, RG_BAD_VALUE, "'%s' is no shape; it takes plate, disc, sphere, cylinder, cone, dihedral, trihedral or guardrail", name);
}

/* What belongs to the kind and nothing else. */
static rg_status check_sizes(const shape_kind *kind, const shape_job *job, rg_error *err)
{
    for (int s = 0; s < N_SIZES; s++) {
        bool belongs = false;
        for (int i = 0; i < kind->n_taken; i++) belongs = belongs || kind->size[i] == s;
        if (belongs || isnan(job->size[s])) continue;
        char takes[160] = "";
        for (int i = 0; i < kind->n_taken; i++) strcat(strcat(takes, size_option[kind->size[i]]), ", ");
        return rg_fail(err, RG_BAD_VALUE, "%s does not belong to a %s, which takes %s--sagitta, --edge and --out", size_option[s], kind->name, takes);
    }
    for (int i = 0; i < kind->n_needed; i++)
        if (isnan(job->size[kind->size[i]]))
            return rg_fail(err, RG_BAD_VALUE, "a %s needs %s: roadglint shape %s %s --out FILE", kind->name, size_option[kind->size[i]],
                           kind->name, kind->example);
    if (!job->out)
        return rg_fail(err, RG_BAD_VALUE, "--out is missing: roadglint shape %s %s --out %s.ply (or .obj, .stl)", kind->name, kind->example,
                       kind->name);
    return rg_mesh_can_write(job->out, err);
}

static rg_shape shape_of(const shape_kind *kind, const shape_job *job)
{
    rg_shape shape = {.kind = kind->kind, .sagitta_m = job->sagitta_m, .edge_m = job->edge_m};
    for (int i = 0; i < kind->n_taken; i++) {
        const double size = job->size[kind->size[i]];
        shape.size_m[i] = isnan(size) ? kind->without : size;
    }
    if (kind->kind == RG_TRIHEDRAL) {
        static const rg_shape_kind with_face[] = {RG_TRIHEDRAL, RG_TRIHEDRAL_SQUARE, RG_TRIHEDRAL_CIRCULAR};
        shape.kind = with_face[(int)shape.size_m[1]];
        shape.size_m[1] = 0.0;
    }
    if (kind->kind == RG_CONE) {        /* the command asks for the top last, for it may be left out */
        const double top_m = shape.size_m[2];
        shape.size_m[2] = shape.size_m[1];
        shape.size_m[1] = top_m;
    }
    return shape;
}

static void say_what_was_written(const rg_mesh *mesh, const char *path)
{
    const size_t n_parts = rg_mesh_n_parts(mesh), n = strlen(path);
    fprintf(stderr, "%s: %zu facet%s, %zu part%s:", path, rg_mesh_n_facets(mesh), rg_mesh_n_facets(mesh) == 1 ? "" : "s", n_parts,
            n_parts == 1 ? "" : "s");
    for (size_t p = 0; p < n_parts; p++) fprintf(stderr, "%s %s", p ? "," : "", rg_mesh_part_name(mesh, p));
    if (n_parts > 1 && strcasecmp(path + n - 4, ".stl") == 0) fputs(" (an STL file does not keep them)", stderr);
    fputc('\n', stderr);
}

static rg_status run_shape(int argc, char **argv, FILE *out, rg_error *err)
{
    (void)out;
    shape_job job = {.out = NULL};
    const shape_kind *kind = NULL;
    const char *name[1];
    size_t n_names;
    rg_mesh *mesh = NULL;
    for (int s = 0; s < N_SIZES; s++) job.size[s] = NAN;
    rg_status status = rg_take_options(&rg_command_shape, argc, argv, &job, name, 1, 1, &n_names, err);
    if (!status) status = find_kind(&kind, name[0], err);
    if (!status) status = check_sizes(kind, &job, err);
    if (!status) {
        const rg_shape shape = shape_of(kind, &job);
        status = rg_shape_mesh(&mesh, &shape, err);
    }
    if (!status) status = rg_mesh_write(mesh, job.out, err);
    if (!status) say_what_was_written(mesh, job.out);
    rg_mesh_free(mesh);
    return status;
}

const rg_command rg_command_shape = {
    .name = "shape",
    .summary = "write a canonical target as a mesh file",
    .usage = "KIND [options] --out FILE",
    .option = options,
    .n_options = sizeof options / sizeof options[0],
    .more =
        "KIND and what it takes:\n"
        "  plate      --width --height                  in x = 0, facing +x\n"
        "  disc       --radius                          in x = 0, facing +x\n"
        "  sphere     --radius\n"
        "  cylinder   --radius --length                 axis z, closed; parts side, top, bottom\n"
        "  cone       --radius --height [--top-radius]  axis z, base in z = 0, closed; parts side, base, top\n"
        "  dihedral   --width --height                  fold on the z axis, opens toward +x; parts left, right\n"
        "  trihedral  --leg [--face]                    legs on +x, +y, +z; parts xy, yz, zx\n"
        "  guardrail  [--length]                        W-beam along y, face toward +x, ground at z = 0;\n"
        "                                               parts rail, posts, blockouts, bolts\n"
        "\n"
        "Curved shapes need --sagitta or --edge. 0.06mm is lambda/64 at 77 GHz and good for about 0.3 dB on singly curved\n"
        "surfaces; lambda/512 is good for 0.02 dB. Discs keep the area of their circle whatever the sagitta is.\n"
        "\n"
        "  roadglint shape trihedral --leg 100mm --out corner.stl\n"
        "  roadglint shape sphere --radius 100mm --sagitta 0.06mm --out sphere.ply\n",
    .run = run_shape};
