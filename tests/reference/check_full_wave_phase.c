/* check_full_wave_phase.c - amplitude and phase against the cuts of full_wave/, and what each mechanism adds to the score there */
#include "table/table.h"
#include "world.h"
#include <stdio.h>

enum { MOST_ROWS = 1000, ALL = RG_SURFACE | RG_EDGE | RG_BOUNCE };

static const char *folder;
static const int two_pols[] = {RG_HH, RG_VV};

typedef struct { rg_table want; size_t n; double complex got_m[MOST_ROWS][RG_N_POL]; } cut;

static rg_status keep(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    cut *c = user;
    (void)err;
    memcpy(c->got_m[c->n++], aspect->s_m[0], sizeof c->got_m[0]);
    return RG_OK;
}

static void predict(cut *c, const char *mesh_name, const char *cut_name, unsigned mechanisms)
{
    char path[4096];
    rg_mesh *mesh = NULL;
    rg_error err = {{0}};
    ck_assert_int_lt(snprintf(path, sizeof path, "%s/%s.stl", folder, mesh_name), (int)sizeof path);
    ck_assert_msg(rg_mesh_read(&mesh, path, NULL, &err) == RG_OK, "%s", err.text);
    snprintf(path, sizeof path, "%s/%s.csv", folder, cut_name);
    *c = (cut){0};
    ck_assert_msg(rg_table_read(&c->want, path, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_le(c->want.n_rows, MOST_ROWS);
    world w = world_of_mesh(mesh);
    const rg_sweep_plan plan = {.n_el = 1, .n_az = c->want.n_rows, .n_freq = 1, .el_deg = c->want.el_deg, .az_deg = c->want.az_deg,
                                .freq_hz = c->want.freq_hz, .mechanisms = mechanisms};
    ck_assert_msg(rg_sweep(w.scene, &plan, keep, c, NULL, &err) == RG_OK, "%s", err.text);
    free_world(&w);
}

/* RMS and bias as full_wave/README.md defines them. */
static double score_db(const cut *c, int pol, double peak_dbsm, double within_db, double within_az_deg, double *bias_db)
{
    double sum_db = 0.0, sum_db2 = 0.0;
    int n = 0;
    for (size_t i = 0; i < c->n; i++) {
        const double want_dbsm = c->want.sigma_dbsm[pol][i];
        if (want_dbsm < peak_dbsm - within_db || fabs(c->want.az_deg[i]) > within_az_deg) continue;
        const double off_db = fmax(rg_dbsm(c->got_m[i][pol]), peak_dbsm - 60.0) - want_dbsm;
        sum_db += off_db;
        sum_db2 += off_db * off_db;
        n++;
    }
    ck_assert_int_gt(n, 5);
    *bias_db = sum_db / n;
    return sqrt(sum_db2 / n);
}

/* Into the corner, where the bounces carry all: what is left is the spreading of the first reflection on its way across three wavelengths. */
START_TEST(the_corner_seen_from_inside)
{
    static cut c;
    predict(&c, "dihedral_90", "dihedral_90_az_el0", ALL);
    for (int i = 0; i < 2; i++) {
        double bias_db;
        const double rms_db = score_db(&c, two_pols[i], -14.05, 20.0, 44.0, &bias_db);
        printf("dihedral, az within 44 deg, %s: RMS %.3f dB, bias %+.3f dB\n", rg_table_pol_name[two_pols[i]], rms_db, bias_db);
        ck_assert_msg(rms_db <= 1.5 && fabs(bias_db) < 1.0, "%s: RMS %.3f dB, bias %.3f dB", rg_table_pol_name[two_pols[i]], rms_db, bias_db);
    }
    fflush(stdout);
    rg_table_free(&c.want);
}
END_TEST

/* Each mechanism earns its place: without it the score is worse by a third at the least. */
START_TEST(each_mechanism_is_needed)
{
    static cut c;
    static const struct { const char *mesh, *cut; unsigned with, without; double peak_dbsm, within_db; } need[] = {
        {"plate_5x5", "plate_5x5_az_el0", RG_SURFACE | RG_EDGE, RG_SURFACE, -9.30, 30.0},
        {"dihedral_90", "dihedral_90_az_el0", ALL, RG_SURFACE | RG_EDGE, -14.05, 20.0},
        {"cube_3", "cube_3_az_el0", ALL, RG_SURFACE, -18.10, 20.0}};
    for (size_t i = 0; i < sizeof need / sizeof need[0]; i++)
        for (int p = 0; p < 2; p++) {
            double bias_db, rms_db[2];
            for (int without = 0; without < 2; without++) {
                predict(&c, need[i].mesh, need[i].cut, without ? need[i].without : need[i].with);
                rms_db[without] = score_db(&c, two_pols[p], need[i].peak_dbsm, need[i].within_db, 180.0, &bias_db);
                rg_table_free(&c.want);
            }
            printf("%s %s: RMS %.2f dB with, %.2f without\n", need[i].cut, rg_table_pol_name[two_pols[p]], rms_db[0], rms_db[1]);
            fflush(stdout);
            ck_assert_msg(rms_db[0] < rms_db[1] / 1.5, "%s %s: RMS %.3f dB with, %.3f without", need[i].cut, rg_table_pol_name[two_pols[p]], rms_db[0], rms_db[1]);
        }
}
END_TEST

/* Levels hide the phase: a wrong sign of time or a wrong origin would leave them as they are, and be off by up to 2 here. The limit on the
 * amplitude's error, beside the amplitude of the peak, is what 1.5 dB make of a level at the peak.
 * Not so in the corner at az 0: the outermost ray goes d = 3 sqrt(2) lambda from face to face and ends at the edge, past which a knife edge of
 * Fresnel's throws sqrt(lambda d)/(2 pi) = 0.33 lambda of it on either side, of 4.2 lambda that the corner is wide. That is 0.18 of the peak, with a
 * phase that the level does not show; both edges also send to each other. Its limit is twice that. */
START_TEST(amplitudes_agree_in_phase)
{
    static cut c;
    static const struct { const char *mesh, *cut; double peak_dbsm, limit; } phased[] = {{"plate_5x5", "plate_5x5_az_el0", -9.30, 0.19},
                                                                                          {"plate_5x5", "plate_5x5_az_el20", -9.30, 0.19},
                                                                                          {"dihedral_90", "dihedral_90_az_el0", -14.05, 0.36},
                                                                                          {"cube_3", "cube_3_az_el0", -18.10, 0.19}};
    for (size_t i = 0; i < sizeof phased / sizeof phased[0]; i++) {
        double worst[2] = {0.0, 0.0}, where_deg[2] = {0.0, 0.0};
        predict(&c, phased[i].mesh, phased[i].cut, ALL);
        for (int p = 0; p < 2; p++)
            for (size_t row = 0; row < c.n; row++) {
                const double complex want_m = c.want.s_m[two_pols[p]][row];
                const double off = cabs(c.got_m[row][two_pols[p]] - want_m) * pow(10.0, -phased[i].peak_dbsm / 20.0);
                if (off > worst[p]) { worst[p] = off; where_deg[p] = c.want.az_deg[row]; }
            }
        printf("%s: amplitude off by %.3f (HH, az %g), %.3f (VV, az %g) of the peak at the most\n", phased[i].cut, worst[0], where_deg[0], worst[1], where_deg[1]);
        fflush(stdout);
        for (int p = 0; p < 2; p++)
            ck_assert_msg(worst[p] <= phased[i].limit, "%s %s, az %g: off by %.3f of the peak", phased[i].cut, rg_table_pol_name[two_pols[p]], where_deg[p], worst[p]);
        rg_table_free(&c.want);
    }
}
END_TEST

int main(int argc, char **argv)
{
    if (argc != 2) return EXIT_FAILURE;
    folder = argv[1];
    Suite *suite = suite_create("full wave phase");
    TCase *tests = tcase_create("full wave phase");
    tcase_set_timeout(tests, 120);
    tcase_add_test(tests, the_corner_seen_from_inside);
    tcase_add_test(tests, each_mechanism_is_needed);
    tcase_add_test(tests, amplitudes_agree_in_phase);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
