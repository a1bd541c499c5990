/* check_full_wave.c - the mechanisms together against full-wave answers, scored as full_wave/README.md says */
#include "table/table.h"
#include "world.h"
#include <math.h>
#include <stdio.h>

enum { MOST_ROWS = 1000 };

static const char *folder;

/* RMS and bias in dB; limits from what first-order theory can give on these small targets (a few wavelengths): edge-to-edge diffraction on the
 * plate's hard polarisation and the spreading of the first reflection in the corner are left out by the method. */
static const struct {
    const char *mesh, *cut;
    unsigned mechanisms;
    double peak_dbsm, within_db;
    int pol;
    double rms_db, bias_db;
} score[] = {
    {"plate_5x5", "plate_5x5_az_el0", RG_SURFACE | RG_EDGE, -9.30, 30.0, RG_VV, 0.6, 1.0},
    {"plate_5x5", "plate_5x5_az_el0", RG_SURFACE | RG_EDGE, -9.30, 30.0, RG_HH, 2.8, 2.0},
    {"plate_5x5", "plate_5x5_az_el0", RG_SURFACE | RG_EDGE | RG_BOUNCE, -9.30, 30.0, RG_VV, 0.6, 1.0},
    {"plate_5x5", "plate_5x5_az_el20", RG_SURFACE | RG_EDGE, -9.30, 30.0, RG_VV, 1.5, 1.0},
    {"plate_5x5", "plate_5x5_az_el20", RG_SURFACE | RG_EDGE, -9.30, 30.0, RG_HH, 1.5, 1.0},
    {"dihedral_90", "dihedral_90_az_el0", RG_SURFACE | RG_EDGE | RG_BOUNCE, -14.05, 20.0, RG_VV, 1.5, 1.0},
    {"dihedral_90", "dihedral_90_az_el0", RG_SURFACE | RG_EDGE | RG_BOUNCE, -14.05, 20.0, RG_HH, 1.5, 1.0},
    {"cube_3", "cube_3_az_el0", RG_SURFACE | RG_EDGE | RG_BOUNCE, -18.10, 20.0, RG_VV, 1.5, 1.0},
    {"cube_3", "cube_3_az_el0", RG_SURFACE | RG_EDGE | RG_BOUNCE, -18.10, 20.0, RG_HH, 1.5, 1.0},
};

typedef struct { size_t n; double level_dbsm[MOST_ROWS][RG_N_POL]; } levels;

static rg_status keep(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    levels *l = user;
    (void)err;
    for (int pol = 0; pol < RG_N_POL; pol++) l->level_dbsm[l->n][pol] = rg_dbsm(aspect->s_m[0][pol]);
    l->n++;
    return RG_OK;
}

START_TEST(scores_as_well_as_the_theory_can)
{
    static levels got;
    char path[600];
    rg_table want = {0};
    rg_mesh *mesh = NULL;
    rg_error err;
    snprintf(path, sizeof path, "%s/%s.stl", folder, score[_i].mesh);
    ck_assert_msg(rg_mesh_read(&mesh, path, NULL, &err) == RG_OK, "%s", err.text);
    snprintf(path, sizeof path, "%s/%s.csv", folder, score[_i].cut);
    ck_assert_msg(rg_table_read(&want, path, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_le(want.n_rows, MOST_ROWS);
    world w = world_of_mesh(mesh);
    const rg_sweep_plan plan = {.n_el = 1, .n_az = want.n_rows, .n_freq = 1, .el_deg = want.el_deg, .az_deg = want.az_deg,
                                .freq_hz = want.freq_hz, .n_threads = 2, .mechanisms = score[_i].mechanisms};
    got.n = 0;
    ck_assert_msg(rg_sweep(w.scene, &plan, keep, &got, NULL, &err) == RG_OK, "%s", err.text);

    double sum = 0.0, squares = 0.0;
    int n = 0;
    for (size_t i = 0; i < want.n_rows; i++) {
        const double want_dbsm = want.sigma_dbsm[score[_i].pol][i];
        if (want_dbsm < score[_i].peak_dbsm - score[_i].within_db) continue;
        const double error = fmax(got.level_dbsm[i][score[_i].pol], score[_i].peak_dbsm - 60.0) - want_dbsm;
        sum += error;
        squares += error * error;
        n++;
    }
    ck_assert_int_ge(n, 5);
    const double rms_db = sqrt(squares / n), bias_db = sum / n;
    printf("%s, mechanisms %u, %s, top %g dB (%d rows): RMS %.2f dB, bias %+.2f dB\n", score[_i].cut, score[_i].mechanisms,
           rg_table_pol_name[score[_i].pol], score[_i].within_db, n, rms_db, bias_db);
    ck_assert_msg(rms_db <= score[_i].rms_db && fabs(bias_db) <= score[_i].bias_db, "%s: RMS %.2f dB of %.2f, bias %.2f dB of %.2f", score[_i].cut,
                  rms_db, score[_i].rms_db, bias_db, score[_i].bias_db);
    free_world(&w);
    rg_table_free(&want);
}
END_TEST

int main(int argc, char **argv)
{
    if (argc != 2) return 2;
    folder = argv[1];
    Suite *suite = suite_create("full_wave");
    TCase *tests = tcase_create("full_wave");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, scores_as_well_as_the_theory_can, 0, (int)(sizeof score / sizeof score[0]));
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
