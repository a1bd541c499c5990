/* check_reference.c - every row of the tables in this folder against a sweep of its target; the format stands in README.md */
#include "base/quantity.h"
#include "run.h"
#include "target.h"
#include <dirent.h>
#include <math.h>
#include <roadglint/sweep.h>
#include <stdio.h>
#include <string.h>

enum { N_FIELDS = 9, MAX_LINE = 2048 };

typedef struct {
    char file[256];
    int line;
    char target[512], source[512], kind[32];
    double az_deg, el_deg, freq_hz, want_dbsm, tolerance_db;
    int pol;
    unsigned mechanisms;
    bool at_most;       /* want_dbsm is a bound from above */
} reference_row;

typedef struct { size_t n, room; reference_row *row; } row_list;

static row_list rows;               /* read once, before the tests start */
static const char *folder = ".";

static const char *const pol_name[RG_N_POL] = {[RG_HH] = "hh", [RG_VV] = "vv", [RG_HV] = "hv", [RG_VH] = "vh"};
static const char *const kinds[] = {"published", "common practice", "from memory", "computed"};

static char *trim(char *text)
{
    text += strspn(text, " \t\r\n");
    for (size_t n = strlen(text); n > 0 && strchr(" \t\r\n", text[n - 1]); n--) text[n - 1] = '\0';
    return text;
}

static rg_status take_mechanisms(unsigned *mechanisms, char *text, rg_error *err)
{
    static const struct { const char *name; unsigned bit; } known[] = {{"surface", RG_SURFACE}, {"edge", RG_EDGE}, {"bounce", RG_BOUNCE}};
    char *rest = NULL;
    *mechanisms = 0;
    for (char *word = strtok_r(text, ",", &rest); word; word = strtok_r(NULL, ",", &rest)) {
        const unsigned before = *mechanisms;
        word = trim(word);
        for (size_t i = 0; i < 3; i++)
            if (strcmp(word, known[i].name) == 0) *mechanisms |= known[i].bit;
        if (*mechanisms == before) return rg_fail(err, RG_BAD_VALUE, "mechanism \"%s\": give surface, edge, bounce, joined by commas, each once", word);
    }
    return *mechanisms ? RG_OK : rg_fail(err, RG_BAD_VALUE, "no mechanism: give surface, edge, bounce, joined by commas");
}

static rg_status take_pol(int *pol, const char *text, rg_error *err)
{
    for (*pol = 0; *pol < RG_N_POL; ++*pol)
        if (strcmp(text, pol_name[*pol]) == 0) return RG_OK;
    return rg_fail(err, RG_BAD_VALUE, "polarisation \"%s\": it is hh, vv, hv or vh", text);
}

static rg_status take_kind(const char *text, rg_error *err)
{
    for (size_t i = 0; i < sizeof kinds / sizeof kinds[0]; i++)
        if (strcmp(text, kinds[i]) == 0) return RG_OK;
    return rg_fail(err, RG_BAD_VALUE, "kind of source \"%s\": it is published, common practice, from memory or computed", text);
}

static rg_status take_aspect(reference_row *row, char *text, rg_error *err)
{
    char *rest = NULL, *az = strtok_r(text, " \t", &rest), *el = strtok_r(NULL, " \t", &rest), *more = strtok_r(NULL, " \t", &rest);
    if (!az || !el || more) return rg_fail(err, RG_BAD_VALUE, "an aspect is two numbers, azimuth and elevation in degrees");
    const rg_status status = rg_take_quantity(&row->az_deg, RG_ANGLE, az, err);
    return status ? status : rg_take_quantity(&row->el_deg, RG_ANGLE, el, err);
}

/* Reads a line, which it cuts up. */
static rg_status take_row(reference_row *row, char *line, rg_error *err)
{
    char *field[N_FIELDS], *rest = line;
    int n = 0;
    for (char *text = strsep(&rest, "|"); text; text = strsep(&rest, "|"), n++)
        if (n < N_FIELDS) field[n] = trim(text);
    if (n != N_FIELDS) return rg_fail(err, RG_BAD_VALUE, "%d fields: a row has %d, separated by |", n, N_FIELDS);
    row->at_most = field[5][0] == '<';
    snprintf(row->target, sizeof row->target, "%s", field[0]);
    snprintf(row->kind, sizeof row->kind, "%s", field[7]);
    snprintf(row->source, sizeof row->source, "%s", field[8]);
    rg_status status = take_aspect(row, field[1], err);
    if (!status) status = rg_take_quantity(&row->freq_hz, RG_FREQUENCY, field[2], err);
    if (!status) status = take_pol(&row->pol, field[3], err);
    if (!status) status = take_mechanisms(&row->mechanisms, field[4], err);
    if (!status) status = rg_take_quantity(&row->want_dbsm, RG_LEVEL, trim(field[5] + row->at_most), err);
    if (!status) status = rg_take_quantity(&row->tolerance_db, RG_LEVEL, field[6], err);
    if (!status) status = take_kind(row->kind, err);
    if (!status && row->tolerance_db < 0.0) status = rg_fail(err, RG_BAD_VALUE, "a tolerance of %g dB: it must not be negative", row->tolerance_db);
    if (!status && row->source[0] == '\0') status = rg_fail(err, RG_BAD_VALUE, "no source: say who gives the value");
    return status;
}

static rg_status read_table(row_list *list, FILE *in, const char *name, rg_error *err)
{
    char line[MAX_LINE];
    rg_error why = {{0}};
    for (int n = 1; fgets(line, sizeof line, in); n++) {
        reference_row row = {.line = n};
        if (strchr(line, '#')) *strchr(line, '#') = '\0';
        else if (!strchr(line, '\n') && !feof(in)) return rg_fail(err, RG_BAD_INPUT, "%s, line %d: longer than %d characters", name, n, MAX_LINE - 2);
        if (trim(line)[0] == '\0') continue;
        snprintf(row.file, sizeof row.file, "%s", name);
        if (take_row(&row, line, &why)) return rg_fail(err, RG_BAD_INPUT, "%s, line %d: %s", name, n, why.text);
        if (list->n == list->room) {
            const size_t room = list->room ? 2 * list->room : 64;
            reference_row *grown = realloc(list->row, room * sizeof *grown);
            if (!grown) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu rows", room);
            list->row = grown;
            list->room = room;
        }
        list->row[list->n++] = row;
    }
    return RG_OK;
}

static int is_table(const struct dirent *entry)
{
    const size_t n = strlen(entry->d_name);
    return n > 4 && strcmp(entry->d_name + n - 4, ".txt") == 0;
}

static rg_status read_tables(row_list *list, rg_error *err)
{
    struct dirent **entry = NULL;
    const int n = scandir(folder, &entry, is_table, alphasort);
    rg_status status = n > 0 ? RG_OK : rg_fail(err, RG_BAD_INPUT, "no table *.txt in %s", folder);
    for (int i = 0; i < n; i++) {
        char path[4096];
        snprintf(path, sizeof path, "%s/%s", folder, entry[i]->d_name);
        FILE *in = status ? NULL : fopen(path, "r");
        if (!status) status = in ? read_table(list, in, entry[i]->d_name, err) : rg_fail(err, RG_SYSTEM, "cannot read %s", path);
        if (in) fclose(in);
        free(entry[i]);
    }
    free(entry);
    return status;
}

static rg_status keep_level(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    (void)err;
    memcpy(user, aspect->s_m[0], sizeof aspect->s_m[0]);
    return RG_OK;
}

START_TEST(row_is_what_its_source_says)
{
    const reference_row *r = &rows.row[_i];
    const rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = 1, .el_deg = &r->el_deg, .az_deg = &r->az_deg, .freq_hz = &r->freq_hz,
                                .mechanisms = r->mechanisms};
    double complex s_m[RG_N_POL];
    rg_mesh *mesh = NULL;
    rg_scene *scene = NULL;
    rg_error err = {{0}};
    rg_status status = reference_target(&mesh, r->target, folder, &err);
    if (!status) status = rg_scene_new(&scene, mesh, &err);
    if (!status) status = rg_sweep(scene, &plan, keep_level, s_m, NULL, &err);
    ck_assert_msg(status == RG_OK, "%s, line %d: %s: %s", r->file, r->line, r->target, err.text);
    const double got_dbsm = rg_dbsm(s_m[r->pol]), off_db = got_dbsm - r->want_dbsm;
    printf("%s:%d: %s, az %g el %g, %g GHz, %s: %.4f dBsm, off by %.4f dB of %g\n", r->file, r->line, r->target, r->az_deg, r->el_deg,
           r->freq_hz / 1e9, pol_name[r->pol], got_dbsm, off_db, r->tolerance_db);
    fflush(stdout);     /* Check ends this process without it */
    ck_assert_msg((r->at_most ? off_db : fabs(off_db)) <= r->tolerance_db,
                  "%s, line %d: %s at az %g el %g deg, %g GHz, %s: got %.4f dBsm, want %s%.4f within %g dB (%s: %s)", r->file, r->line, r->target,
                  r->az_deg, r->el_deg, r->freq_hz / 1e9, pol_name[r->pol], got_dbsm, r->at_most ? "at most " : "", r->want_dbsm, r->tolerance_db,
                  r->kind, r->source);
    rg_scene_free(scene);
    rg_mesh_free(mesh);
}
END_TEST

/* A slip in a table must not pass as a row less. */
START_TEST(slips_in_a_table_are_named)
{
    static const struct { const char *text, *says; } slip[] = {
        {"plate 1 1 | 0 0 | 77GHz | hh | surface | 1 | 1 | published\n", "line 1: 8 fields"},
        {"# x\n\nplate 1 1 | 0 | 77GHz | hh | surface | 1 | 1 | published | x\n", "line 3: an aspect is two numbers"},
        {"plate 1 1 | 0 0 | 77m | hh | surface | 1 | 1 | published | x\n", "line 1: "},
        {"plate 1 1 | 0 0 | 77GHz | xx | surface | 1 | 1 | published | x\n", "polarisation \"xx\""},
        {"plate 1 1 | 0 0 | 77GHz | hh | magic | 1 | 1 | published | x\n", "mechanism \"magic\""},
        {"plate 1 1 | 0 0 | 77GHz | hh | surface | one | 1 | published | x\n", "line 1: "},
        {"plate 1 1 | 0 0 | 77GHz | hh | surface | 1 | -1 | published | x\n", "tolerance of -1 dB"},
        {"plate 1 1 | 0 0 | 77GHz | hh | surface | 1 | 1 | hearsay | x\n", "kind of source \"hearsay\""},
        {"plate 1 1 | 0 0 | 77GHz | hh | surface | 1 | 1 | published | \n", "no source"},
    };
    for (size_t i = 0; i < sizeof slip / sizeof slip[0]; i++) {
        row_list list = {0};
        rg_error err = {{0}};
        FILE *in = fmemopen((void *)(uintptr_t)slip[i].text, strlen(slip[i].text), "r");
        ck_assert(in && read_table(&list, in, "table", &err) == RG_BAD_INPUT);
        ck_assert_msg(strstr(err.text, slip[i].says), "\"%s\" does not say %s", err.text, slip[i].says);
        fclose(in);
        free(list.row);
    }
}
END_TEST

START_TEST(slips_in_a_target_are_named)
{
    static const struct { const char *text, *says; } slip[] = {
        {"plaice 1 1", "no target \"plaice\""},
        {"plate 1", "WIDTH HEIGHT"},
        {"plate 1 1 1", "\"1\" in a target"},
        {"trihedral 0.1", "triangular, square or circular"},
        {"trihedral 0.1 round", "triangular, square or circular"},
        {"disc 0.1 sagitta", "sagitta should follow"},
        {"triangle 0 0 0 1 0 0 0 1", "a coordinate"},
        {"triangle 0 0 0 0 1 0 0 0 1 edge 0.1", "no use for edge: it takes roll"},
        {"plate 1 1 unit 1mm", "no use for unit"},
        {"mesh plate_mm.obj sagitta 1mm", "no use for sagitta"},
        {"mesh", "mesh FILE"},
        {"mesh no_such_file.stl", "no_such_file.stl"},
        {"", "without a target"},
    };
    for (size_t i = 0; i < sizeof slip / sizeof slip[0]; i++) {
        rg_mesh *mesh = NULL;
        rg_error err = {{0}};
        ck_assert(reference_target(&mesh, slip[i].text, folder, &err) != RG_OK);
        ck_assert_msg(strstr(err.text, slip[i].says), "\"%s\" does not say %s", err.text, slip[i].says);
    }
}
END_TEST

int main(int argc, char **argv)
{
    rg_error err = {{0}};
    if (argc > 1) folder = argv[1];
    if (read_tables(&rows, &err)) {
        fprintf(stderr, "check_reference: %s\n", err.text);
        return EXIT_FAILURE;
    }
    Suite *suite = suite_create("reference");
    TCase *tests = tcase_create("reference");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, row_is_what_its_source_says, 0, (int)rows.n);
    tcase_add_test(tests, slips_in_a_table_are_named);
    tcase_add_test(tests, slips_in_a_target_are_named);
    suite_add_tcase(suite, tests);
    const int status = run_suite(suite);
    free(rows.row);
    return status;
}
