/* check_sweep.c - a sweep gives the same bits for any number of threads and at every level of the processor, in the table's order */
#include <roadglint/sweep.h>
#include "run.h"
#include "scatter/scene.h"
#include <math.h>
#include <string.h>

static const unsigned all = RG_SURFACE | RG_EDGE | RG_BOUNCE;
enum { N_AZ = 13, N_EL = 2, N_FREQ = 3, ROOM = N_AZ * N_EL * N_FREQ * 4 };

typedef struct { size_t n; double az_deg[N_AZ * N_EL], el_deg[N_AZ * N_EL]; double complex s_m[ROOM][RG_N_POL]; size_t n_s; size_t stop_at; } record;

static rg_status keep(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    record *r = user;
    r->az_deg[r->n] = aspect->az_deg;
    r->el_deg[r->n] = aspect->el_deg;
    memcpy(r->s_m[r->n_s], aspect->s_m, aspect->n_slots * aspect->n_freq * sizeof *aspect->s_m);
    r->n_s += aspect->n_slots * aspect->n_freq;
    r->n++;
    return r->n == r->stop_at ? rg_fail(err, RG_SYSTEM, "enough") : RG_OK;
}

/* A bumpy ball in two parts, and a plate that stands in its light: 3,000 facets, so several blocks. */
static rg_mesh *ball_and_plate(void)
{
    enum { N = 28, V = (N + 1) * 2 * N + 4, F = 4 * N * N + 2 };
    static double v[V][3];
    static uint32_t f[F][3], part[F];
    static const char *const name[] = {"upper", "lower", "plate"};
    size_t nv = 0, nf = 0;
    for (int i = 0; i <= N; i++)
        for (int j = 0; j < 2 * N; j++, nv++) {
            const double t = 3.14159265358979 * i / N, p = 3.14159265358979 * j / N, r = 0.2 + 0.02 * sin(9 * t) * cos(8 * p);
            v[nv][0] = r * sin(t) * cos(p);
            v[nv][1] = r * sin(t) * sin(p);
            v[nv][2] = r * cos(t);
        }
    for (uint32_t i = 0; i < N; i++)
        for (uint32_t j = 0; j < 2 * N; j++) {
            const uint32_t a = i * 2 * N + j, b = i * 2 * N + (j + 1) % (2 * N), c = a + 2 * N, d = b + 2 * N;
            memcpy(f[nf], (uint32_t[3]){a, c, b}, sizeof f[nf]);
            part[nf++] = i >= N / 2;
            memcpy(f[nf], (uint32_t[3]){b, c, d}, sizeof f[nf]);
            part[nf++] = i >= N / 2;
        }
    const double plate[4][3] = {{0.4, -0.05, -0.3}, {0.4, 0.05, -0.3}, {0.45, 0.05, 0.3}, {0.45, -0.05, 0.3}};
    memcpy(v[nv], plate, sizeof plate);
    for (uint32_t i = 0; i < 2; i++, nf++) {
        memcpy(f[nf], (uint32_t[3]){(uint32_t)nv, (uint32_t)nv + 1 + i, (uint32_t)nv + 2 + i}, sizeof f[nf]);
        part[nf] = 2;
    }
    rg_mesh *mesh = NULL;
    rg_error err;
    ck_assert_msg(rg_mesh_from_arrays(&mesh, nv + 4, (const double(*)[3])v, nf, (const uint32_t(*)[3])f, part, 3, name, &err) == RG_OK, "%s", err.text);
    return mesh;
}

static void sweep(record *r, const rg_scene *scene, unsigned mechanisms, int n_threads, size_t n_az)
{
    static const double el_deg[N_EL] = {0.0, 12.5}, freq_hz[N_FREQ] = {76e9, 24.125e9, 81e9};
    double az_deg[N_AZ];
    for (int i = 0; i < N_AZ; i++) az_deg[i] = 17.0 * i - 40.0;
    const rg_sweep_plan plan = {.n_el = N_EL, .n_az = n_az, .n_freq = N_FREQ, .el_deg = el_deg, .az_deg = az_deg, .freq_hz = freq_hz, .parts = true,
                                .n_threads = n_threads, .mechanisms = mechanisms};
    rg_error err;
    *r = (record){0};
    ck_assert_msg(rg_sweep(scene, &plan, keep, r, NULL, &err) == RG_OK, "%s", err.text);
}

START_TEST(the_same_bits_for_any_threads_and_processor)
{
    static record want, got;
    static const int n_threads[] = {1, 2, 3, 8};
    rg_mesh *mesh = ball_and_plate();
    for (rg_cpu cpu = RG_CPU_PLAIN; cpu <= rg_cpu_best(); cpu++) {
        rg_scene *scene = NULL;
        ck_assert(rg_scene_new_for(&scene, mesh, cpu, NULL) == RG_OK);
        for (int t = 0; t < 4; t++)
            for (int few = 0; few < 2; few++) {             /* many aspects go to a thread each; one aspect is shared by all */
                sweep(&got, scene, all, n_threads[t], few ? 1 : N_AZ);
                if (cpu == RG_CPU_PLAIN && t == 0 && !few) want = got;
                const size_t n = few ? N_FREQ * 4 : got.n_s;
                ck_assert_msg(memcmp(got.s_m, want.s_m, n * sizeof want.s_m[0]) == 0, "%s, %d threads", rg_cpu_name(cpu), n_threads[t]);
            }
        rg_scene_free(scene);
    }
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(order_and_parts)
{
    static record r;
    rg_mesh *mesh = ball_and_plate();
    rg_scene *scene = NULL;
    ck_assert(rg_scene_new(&scene, mesh, NULL) == RG_OK);
    sweep(&r, scene, all, 2, N_AZ);
    ck_assert_uint_eq(r.n, N_AZ * N_EL);
    for (size_t i = 0; i < r.n; i++) {
        ck_assert_double_eq(r.az_deg[i], 17.0 * (double)(i % N_AZ) - 40.0);
        ck_assert_double_eq(r.el_deg[i], i < N_AZ ? 0.0 : 12.5);
        for (size_t f = 0; f < N_FREQ; f++) {
            const double complex(*s)[RG_N_POL] = (const double complex(*)[RG_N_POL])(r.s_m + i * 4 * N_FREQ);
            const double complex parts = s[N_FREQ + f][RG_HH] + s[2 * N_FREQ + f][RG_HH] + s[3 * N_FREQ + f][RG_HH];
            ck_assert(cabs(s[f][RG_HH] - parts) <= 1e-12 * cabs(s[f][RG_HH]) + 1e-15);
            ck_assert(s[f][RG_HV] == s[f][RG_VH]);
        }
    }
    rg_scene_free(scene);
    rg_mesh_free(mesh);
}
END_TEST

/* One aspect through the other door, rg_surface, which takes radians: the same to their rounding. */
START_TEST(surface_agrees_with_the_sweep)
{
    static record r;
    rg_mesh *mesh = ball_and_plate();
    rg_scene *scene = NULL;
    double complex s_m[1][RG_N_POL];
    ck_assert(rg_scene_new(&scene, mesh, NULL) == RG_OK);
    sweep(&r, scene, RG_SURFACE, 1, N_AZ);
    const rg_aspect aspect = {-40.0 * 3.14159265358979323846 / 180.0, 0.0};
    ck_assert(rg_surface(scene, aspect, 1, &(double){76e9}, s_m, NULL) == RG_OK);
    ck_assert_double_eq_tol(cabs(s_m[0][RG_VV] - r.s_m[0][RG_VV]), 0.0, 1e-11);
    rg_scene_free(scene);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(refusals_and_stops)
{
    static record r;
    rg_mesh *mesh = ball_and_plate();
    rg_scene *scene = NULL;
    rg_error err = {{0}};
    const double zero = 0.0, bad = NAN, f = 77e9;
    volatile sig_atomic_t stop = 1;
    ck_assert(rg_scene_new(&scene, mesh, NULL) == RG_OK);
    rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = 1, .el_deg = &zero, .az_deg = &zero, .freq_hz = &f, .n_threads = 1};
    r = (record){.stop_at = 1};
    ck_assert(rg_sweep(scene, &plan, keep, &r, NULL, &err) == RG_SYSTEM);
    ck_assert_str_eq(err.text, "enough");
    ck_assert(rg_sweep(scene, &plan, keep, &r, &stop, &err) == RG_STOPPED);
    plan.freq_hz = &zero;
    ck_assert(rg_sweep(scene, &plan, keep, &r, NULL, &err) == RG_BAD_VALUE);
    plan.freq_hz = &f;
    plan.az_deg = &bad;
    ck_assert(rg_sweep(scene, &plan, keep, &r, NULL, &err) == RG_BAD_VALUE);
    plan.az_deg = &zero;
    plan.n_el = 0;
    ck_assert(rg_sweep(scene, &plan, keep, &r, NULL, &err) == RG_BAD_VALUE);
    double complex s_m[1][RG_N_POL] = {{7.0}};
    ck_assert(rg_surface(scene, (rg_aspect){bad, 0.0}, 1, &f, s_m, &err) == RG_BAD_VALUE);
    ck_assert(s_m[0][0] == 7.0);
    rg_scene_free(scene);
    rg_mesh_free(mesh);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("sweep");
    TCase *tests = tcase_create("sweep");
    tcase_set_timeout(tests, 240);
    tcase_add_test(tests, the_same_bits_for_any_threads_and_processor);
    tcase_add_test(tests, order_and_parts);
    tcase_add_test(tests, surface_agrees_with_the_sweep);
    tcase_add_test(tests, refusals_and_stops);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
