/* check_parts.c - what each part sends adds up to the total, and is what the part sends where it is lit */
#include "world.h"

enum { N_PARTS = 4, N_FREQS = 3, N_ASPECTS = 24 };
static const double part_freq_hz[N_FREQS] = {77e9, 24.125e9, 79e9};

static const unsigned mechanism_sets[] = {RG_SURFACE, RG_EDGE, RG_BOUNCE, RG_SURFACE | RG_EDGE | RG_BOUNCE};

typedef struct { double complex s_m[1 + N_PARTS][N_FREQS][RG_N_POL]; } by_part;

static rg_status keep_parts(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    (void)err;
    ck_assert(aspect->n_freq == N_FREQS && aspect->n_slots <= 1 + N_PARTS);
    memcpy(user, aspect->s_m, aspect->n_slots * N_FREQS * sizeof aspect->s_m[0]);
    return RG_OK;
}

static void scatter_by_part(const world *w, double az_deg, double el_deg, unsigned mechanisms, bool parts, by_part *out)
{
    const rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = N_FREQS, .el_deg = &el_deg, .az_deg = &az_deg, .freq_hz = part_freq_hz,
                                .parts = parts, .mechanisms = mechanisms};
    ck_assert_int_eq(rg_sweep(w->scene, &plan, keep_parts, out, NULL, NULL), RG_OK);
}

/* Of box, step, plate and triangle, each a part. Against the total of the same sweep, and of a sweep that keeps no parts. */
START_TEST(parts_add_up_to_the_total)
{
    const unsigned mechanisms = mechanism_sets[_i];
    uint64_t state = 21;
    uint32_t part[27];
    soup s = awkward_target();
    ck_assert_uint_eq(s.n, 27);
    for (size_t i = 0; i < s.n; i++) part[i] = i < 12 ? 0 : i < 24 ? 1 : i < 26 ? 2 : 3;
    world w = world_of_parts(&s, part, N_PARTS);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        by_part got, whole;
        random_aspect(&state, &az, &el);
        scatter_by_part(&w, az, el, mechanisms, true, &got);
        scatter_by_part(&w, az, el, mechanisms, false, &whole);
        for (int f = 0; f < N_FREQS; f++)
            for (int pol = 0; pol < RG_N_POL; pol++) {
                double complex sum = 0.0;
                double size_m = 0.0;
                for (int p = 1; p <= N_PARTS; p++) {
                    sum += got.s_m[p][f][pol];
                    size_m += cabs(got.s_m[p][f][pol]);
                }
                ck_assert_msg(cabs(got.s_m[0][f][pol] - sum) <= 1e-12 * size_m && cabs(whole.s_m[0][f][pol] - sum) <= 1e-12 * size_m,
                              "mechanisms %u, az %g el %g, %g GHz, pol %d: total %g or %g off", mechanisms, az, el, part_freq_hz[f] / 1e9, pol,
                              cabs(got.s_m[0][f][pol] - sum) / size_m, cabs(whole.s_m[0][f][pol] - sum) / size_m);
            }
    }
    free_world(&w);
}
END_TEST

/* Two plates side by side, a third that is hidden behind the first: the parts are the plates alone, and nothing. */
START_TEST(a_part_is_what_is_lit_of_it)
{
    static const double at_m[3][5] = {{0, -0.06, -0.05, -0.01, 0.05}, {0.02, 0.01, -0.03, 0.06, 0.04}, {-0.01, -0.05, -0.04, -0.02, 0.04}};
    static const uint32_t part[6] = {0, 0, 1, 1, 2, 2};
    uint64_t state = 22;
    soup s = {0};
    world alone[2];
    for (int p = 0; p < 3; p++) {
        soup one = {0};
        add_rectangle(&s, at_m[p][0], at_m[p][1], at_m[p][2], at_m[p][3], at_m[p][4], 1);
        add_rectangle(&one, at_m[p][0], at_m[p][1], at_m[p][2], at_m[p][3], at_m[p][4], 1);
        if (p < 2) alone[p] = world_of_soup(&one);
        else free(one.corner_m);
    }
    world w = world_of_parts(&s, part, 3);
    for (int i = 0; i < N_ASPECTS; i++) {
        const double az = random_between(&state, -20.0, 20.0), el = random_between(&state, -20.0, 20.0);
        by_part got, want;
        scatter_by_part(&w, az, el, RG_SURFACE, true, &got);
        for (int p = 0; p < 2; p++) {
            scatter_by_part(&alone[p], az, el, RG_SURFACE, false, &want);
            for (int f = 0; f < N_FREQS; f++) ck_assert_double_le(cabs(got.s_m[1 + p][f][RG_HH] - want.s_m[0][f][RG_HH]), 1e-10);
        }
        for (int f = 0; f < N_FREQS; f++) ck_assert(got.s_m[3][f][RG_HH] == 0.0);
    }
    for (int p = 0; p < 2; p++) free_world(&alone[p]);
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("parts");
    TCase *tests = tcase_create("parts");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, parts_add_up_to_the_total, 0, 4);
    tcase_add_test(tests, a_part_is_what_is_lit_of_it);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
