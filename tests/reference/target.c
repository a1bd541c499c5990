/* target.c - meshes from the words of a reference table */
#include "target.h"
#include "base/quantity.h"
#include "mesh/mesh.h"
#include <math.h>
#include <roadglint/shape.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { MAX_WORDS = 32, TRIANGLE_NUMBERS = 9 };

typedef struct { const char *name, *variant; rg_shape_kind kind; size_t n_sizes; const char *sizes; } shape_word;

static const shape_word shape_words[] = {
    {"plate", NULL, RG_PLATE, 2, "WIDTH HEIGHT"},
    {"disc", NULL, RG_DISC, 1, "RADIUS"},
    {"sphere", NULL, RG_SPHERE, 1, "RADIUS"},
    {"cylinder", NULL, RG_CYLINDER, 2, "RADIUS LENGTH"},
    {"cone", NULL, RG_CONE, 3, "BASE_RADIUS TOP_RADIUS HEIGHT"},
    {"dihedral", NULL, RG_DIHEDRAL, 2, "WIDTH HEIGHT"},
    {"trihedral", "triangular", RG_TRIHEDRAL, 1, "LEG triangular|square|circular"},
    {"trihedral", "square", RG_TRIHEDRAL_SQUARE, 1, "LEG triangular|square|circular"},
    {"trihedral", "circular", RG_TRIHEDRAL_CIRCULAR, 1, "LEG triangular|square|circular"},
};

/* The words not yet used, in order. */
typedef struct { size_t n, at; char *word[MAX_WORDS]; } word_list;

/* What may follow any target. */
typedef struct { double sagitta_m, edge_m, roll_deg, unit_m; } target_options;

static const char *next_word(word_list *words) { return words->at < words->n ? words->word[words->at++] : NULL; }

static rg_status take_next(double *value, rg_dimension dimension, word_list *words, const char *what, rg_error *err)
{
    const char *word = next_word(words);
    if (!word) return rg_fail(err, RG_BAD_VALUE, "the target ends where %s should follow", what);
    return rg_take_quantity(value, dimension, word, err);
}

/* allowed: the names of those that mean something to this target. */
static rg_status take_options(target_options *options, const char *allowed, word_list *words, rg_error *err)
{
    const struct { const char *name; rg_dimension dimension; double *value; } known[] = {
        {"sagitta", RG_LENGTH, &options->sagitta_m},
        {"edge", RG_LENGTH, &options->edge_m},
        {"roll", RG_ANGLE, &options->roll_deg},
        {"unit", RG_LENGTH, &options->unit_m},
    };
    const size_t n_known = sizeof known / sizeof known[0];
    for (const char *word = next_word(words); word; word = next_word(words)) {
        size_t i = 0;
        while (i < n_known && strcmp(word, known[i].name) != 0) i++;
        if (i == n_known) return rg_fail(err, RG_BAD_VALUE, "\"%s\" in a target: after its sizes come sagitta, edge, roll or unit", word);
        if (!strstr(allowed, word)) return rg_fail(err, RG_BAD_VALUE, "this target has no use for %s: it takes %s", word, allowed);
        const rg_status status = take_next(known[i].value, known[i].dimension, words, word, err);
        if (status) return status;
    }
    return RG_OK;
}

/* Turns a mesh about the x axis, which is the line of sight at az 0, el 0: +y toward +z. */
static rg_status roll_mesh(rg_mesh **mesh, double roll_deg, rg_error *err)
{
    const rg_mesh *m = *mesh;
    const double turn = roll_deg * 3.14159265358979323846 / 180.0, c = cos(turn), s = sin(turn);
    rg_mesh *rolled = NULL;
    double(*vertex_m)[3] = malloc(m->n_vertices * sizeof *vertex_m);
    if (!vertex_m) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu vertices", m->n_vertices);
    for (size_t i = 0; i < m->n_vertices; i++) {
        double p[3];
        for (int a = 0; a < 3; a++) p[a] = m->origin_m[a] + m->vertex_m[i][a];
        vertex_m[i][0] = p[0];
        vertex_m[i][1] = c * p[1] - s * p[2];
        vertex_m[i][2] = s * p[1] + c * p[2];
    }
    const rg_status status = rg_mesh_from_arrays(&rolled, m->n_vertices, (const double(*)[3])vertex_m, m->n_facets,
                                                 (const uint32_t(*)[3])m->facet, NULL, 0, NULL, err);
    free(vertex_m);
    if (status) return status;
    rg_mesh_free(*mesh);
    *mesh = rolled;
    return RG_OK;
}

static rg_status take_triangle(rg_mesh **out, word_list *words, target_options *options, rg_error *err)
{
    static const uint32_t facet[1][3] = {{0, 1, 2}};
    double corner_m[3][3];
    rg_status status = RG_OK;
    for (int i = 0; i < TRIANGLE_NUMBERS && !status; i++)
        status = take_next(&corner_m[i / 3][i % 3], RG_LENGTH, words, "a coordinate (triangle X Y Z X Y Z X Y Z)", err);
    if (!status) status = take_options(options, "roll", words, err);
    return status ? status : rg_mesh_from_arrays(out, 3, (const double(*)[3])corner_m, 1, facet, NULL, 0, NULL, err);
}

static rg_status take_file(rg_mesh **out, word_list *words, const char *folder, target_options *options, rg_error *err)
{
    char path[4096];
    const char *file = next_word(words);
    if (!file) return rg_fail(err, RG_BAD_VALUE, "\"mesh\" without a file: write mesh FILE");
    const int n = snprintf(path, sizeof path, "%s%s%s", file[0] == '/' ? "" : folder, file[0] == '/' ? "" : "/", file);
    if (n < 0 || (size_t)n >= sizeof path) return rg_fail(err, RG_BAD_VALUE, "the path of \"%s\" is too long", file);
    const rg_status status = take_options(options, "unit, roll", words, err);
    return status ? status : rg_mesh_read(out, path, &(rg_mesh_frame){.unit_m = options->unit_m}, err);
}

static rg_status take_shape(rg_mesh **out, const char *name, word_list *words, target_options *options, rg_error *err)
{
    const size_t n_shapes = sizeof shape_words / sizeof shape_words[0];
    rg_shape shape = {0};
    rg_status status = RG_OK;
    size_t i = 0;
    while (i < n_shapes && strcmp(name, shape_words[i].name) != 0) i++;
    if (i == n_shapes)
        return rg_fail(err, RG_BAD_VALUE, "no target \"%s\": there are plate, disc, sphere, cylinder, cone, dihedral, trihedral, triangle, mesh", name);
    for (size_t k = 0; k < shape_words[i].n_sizes && !status; k++)
        status = take_next(&shape.size_m[k], RG_LENGTH, words, shape_words[i].sizes, err);
    if (!status && shape_words[i].variant) {
        const char *variant = next_word(words);
        while (variant && i < n_shapes && (!shape_words[i].variant || strcmp(variant, shape_words[i].variant) != 0)) i++;
        if (!variant || i == n_shapes) return rg_fail(err, RG_BAD_VALUE, "a trihedral's faces are triangular, square or circular");
    }
    if (!status) status = take_options(options, "sagitta, edge, roll", words, err);
    if (status) return status;
    shape.kind = shape_words[i].kind;
    shape.sagitta_m = options->sagitta_m;
    shape.edge_m = options->edge_m;
    return rg_shape_mesh(out, &shape, err);
}

rg_status reference_target(rg_mesh **out, const char *text, const char *folder, rg_error *err)
{
    char copy[1024], *rest = copy;
    word_list words = {0};
    target_options options = {0};
    rg_mesh *mesh = NULL;
    if (strlen(text) >= sizeof copy) return rg_fail(err, RG_BAD_VALUE, "a target of more than %zu characters", sizeof copy - 1);
    strcpy(copy, text);
    for (char *word = strtok_r(rest, " \t", &rest); word; word = strtok_r(NULL, " \t", &rest)) {
        if (words.n == MAX_WORDS) return rg_fail(err, RG_BAD_VALUE, "a target of more than %d words", MAX_WORDS);
        words.word[words.n++] = word;
    }
    const char *name = next_word(&words);
    if (!name) return rg_fail(err, RG_BAD_VALUE, "a row without a target");
    rg_status status;
    if (strcmp(name, "triangle") == 0) status = take_triangle(&mesh, &words, &options, err);
    else if (strcmp(name, "mesh") == 0) status = take_file(&mesh, &words, folder, &options, err);
    else status = take_shape(&mesh, name, &words, &options, err);
    if (!status && options.roll_deg != 0.0) status = roll_mesh(&mesh, options.roll_deg, err);
    if (status) rg_mesh_free(mesh);
    else *out = mesh;
    return status;
}
