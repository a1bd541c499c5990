/* check_demo_meshes.c - the meshes that come with the program: whole, named, of the size they claim, and fit for 77 GHz */
#include "run.h"
#include <math.h>
#include <roadglint/fitness.h>
#include <roadglint/mesh.h>
#include <stdio.h>
#include <string.h>
#include <sys/stat.h>

typedef struct { double low, high; } span;

typedef struct {
    const char *file;
    size_t least_facets, most_facets;
    span length_m, width_m, height_m;
    const char *source;
    const char *parts[48];
} demo;

static const demo demos[] = {
    {"saloon.obj", 80000, 160000, {4.5, 4.9}, {2.0, 2.1}, {1.43, 1.48},
     "common practice: a saloon's envelope; the width is that over the mirrors",
     {"body", "roof", "bonnet", "boot", "door_front_left", "door_front_right", "door_rear_left", "door_rear_right", "glass_front",
      "glass_rear", "glass_left", "glass_right", "bumper_front", "bumper_rear", "plate_front", "plate_rear", "grille", "intake",
      "lamp_front_left", "lamp_front_right", "lamp_rear_left", "lamp_rear_right", "mirror_left", "mirror_right", "floor", "wells",
      "wheel_front_left", "wheel_front_right", "wheel_rear_left", "wheel_rear_right", "tyre_front_left", "tyre_front_right",
      "tyre_rear_left", "tyre_rear_right"}},
    {"pedestrian.obj", 30000, 60000, {0.80, 1.00}, {0.50, 0.75}, {1.79, 1.81},
     "common practice: an adult of 1.80 m, 0.50 m over the shoulders, heels 0.6 m apart and feet of 0.29 m",
     {"head", "neck", "torso", "pelvis", "upper_arm_left", "upper_arm_right", "lower_arm_left", "lower_arm_right", "hand_left",
      "hand_right", "thigh_left", "thigh_right", "shin_left", "shin_right", "shoe_left", "shoe_right"}},
    {"guardrail.obj", 40000, 80000, {0.50, 0.60}, {7.61, 7.63}, {0.78, 0.82},
     "AASHTO M 180: two pieces of 3.81 m; crash-test reports: rail top at 0.787 m, blockout 0.305 m, post 0.148 m deep",
     {"rail", "posts", "blockouts", "bolts"}},
};

static const double most_bytes_together = 15e6;

static void path_of(const demo *d, char path[], size_t size) { snprintf(path, size, "%s/%s", RG_MESHES_DIR, d->file); }

static rg_mesh *read_demo(const demo *d)
{
    char path[1024];
    rg_mesh *mesh = NULL;
    rg_error err;
    path_of(d, path, sizeof path);
    const rg_status status = rg_mesh_read(&mesh, path, NULL, &err);
    ck_assert_msg(status == RG_OK, "%s: %s", path, err.text);
    return mesh;
}

START_TEST(nothing_needs_repair)
{
    rg_mesh *mesh = read_demo(&demos[_i]);
    rg_error err;
    ck_assert_msg(rg_mesh_check(mesh, &err) == RG_OK, "%s", err.text);
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    ck_assert_uint_eq(r->n_degenerate, 0);
    ck_assert_uint_eq(r->n_duplicate, 0);
    ck_assert_uint_eq(r->n_not_facets, 0);
    ck_assert_uint_eq(r->n_polygons_cut, 0);
    ck_assert_uint_eq(r->n_vertices_welded, 0);
    ck_assert_uint_eq(r->n_facets_turned, 0);
    ck_assert_uint_eq(r->n_shells_turned, 0);
    ck_assert_uint_eq(r->n_branch_edges, 0);
    ck_assert_uint_eq(r->n_facets_read, rg_mesh_n_facets(mesh));
    ck_assert_uint_ge(rg_mesh_n_facets(mesh), demos[_i].least_facets);
    ck_assert_uint_le(rg_mesh_n_facets(mesh), demos[_i].most_facets);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(sizes_are_what_the_sources_say)
{
    const demo *d = &demos[_i];
    rg_mesh *mesh = read_demo(d);
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    const span want[3] = {d->length_m, d->width_m, d->height_m};
    for (int k = 0; k < 3; k++) {
        const double size_m = r->high_m[k] - r->low_m[k];
        ck_assert_msg(size_m >= want[k].low && size_m <= want[k].high, "%s measures %g m along %c, want %g to %g (%s)", d->file, size_m,
                      "xyz"[k], want[k].low, want[k].high, d->source);
    }
    ck_assert_double_le(fabs(r->low_m[2]), 1e-3);       /* on the ground, but for the sagitta of its lowest curve */
    ck_assert_double_le(r->low_m[1], 0.0);
    ck_assert_double_ge(r->high_m[1], 0.0);
    ck_assert_double_le(r->coordinate_step_m, 1e-6);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(parts_are_named)
{
    const demo *d = &demos[_i];
    rg_mesh *mesh = read_demo(d);
    size_t n_want = 0;
    for (const char *const *want = d->parts; *want; want++, n_want++) {
        size_t p = 0;
        while (p < rg_mesh_n_parts(mesh) && strcmp(rg_mesh_part_name(mesh, p), *want) != 0) p++;
        ck_assert_msg(p < rg_mesh_n_parts(mesh), "%s has no part %s", d->file, *want);
        ck_assert_uint_gt(rg_mesh_part_n_facets(mesh, p), 0);
    }
    ck_assert_uint_ge(rg_mesh_n_parts(mesh), n_want);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(fit_for_77_ghz)
{
    rg_mesh *mesh = read_demo(&demos[_i]);
    rg_fitness fitness;
    rg_error err;
    ck_assert_msg(rg_mesh_fitness(mesh, 77e9, &fitness, &err) == RG_OK, "%s", err.text);
    ck_assert_msg(fitness.fit, "%s is fit up to %.2f GHz; %s stands off by %.3f mm", demos[_i].file, fitness.fit_up_to_hz * 1e-9,
                  rg_mesh_part_name(mesh, fitness.worst_part), fitness.sagitta_m[2] * 1e3);
    rg_mesh_free(mesh);
}
END_TEST

/* A left part and its right one are mirror images: same facets, same area. */
START_TEST(the_saloon_is_symmetrical)
{
    rg_mesh *mesh = read_demo(&demos[0]);
    size_t n_pairs = 0;
    for (size_t p = 0; p < rg_mesh_n_parts(mesh); p++) {
        char name[64];
        snprintf(name, sizeof name, "%s", rg_mesh_part_name(mesh, p));
        char *left = strstr(name, "_left");
        if (!left) continue;
        snprintf(left, sizeof name - (size_t)(left - name), "_right");
        size_t q = 0;
        while (q < rg_mesh_n_parts(mesh) && strcmp(rg_mesh_part_name(mesh, q), name) != 0) q++;
        ck_assert_msg(q < rg_mesh_n_parts(mesh), "no part %s", name);
        ck_assert_uint_eq(rg_mesh_part_n_facets(mesh, p), rg_mesh_part_n_facets(mesh, q));
        const double area_m2 = rg_mesh_part_area_m2(mesh, p);
        ck_assert_double_eq_tol(area_m2, rg_mesh_part_area_m2(mesh, q), 1e-9 * area_m2);     /* sums of 1e4 terms, in two orders */
        n_pairs++;
    }
    ck_assert_uint_ge(n_pairs, 8);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(files_stay_small)
{
    double bytes = 0.0;
    for (size_t i = 0; i < sizeof demos / sizeof demos[0]; i++) {
        char path[1024];
        struct stat info;
        path_of(&demos[i], path, sizeof path);
        ck_assert_int_eq(stat(path, &info), 0);
        bytes += (double)info.st_size;
    }
    ck_assert_double_lt(bytes, most_bytes_together);
}
END_TEST

int main(void)
{
    const int n = sizeof demos / sizeof demos[0];
    Suite *suite = suite_create("demo_meshes");
    TCase *tests = tcase_create("demo_meshes");
    tcase_add_loop_test(tests, nothing_needs_repair, 0, n);
    tcase_add_loop_test(tests, sizes_are_what_the_sources_say, 0, n);
    tcase_add_loop_test(tests, parts_are_named, 0, n);
    tcase_add_loop_test(tests, fit_for_77_ghz, 0, n);
    tcase_add_test(tests, the_saloon_is_symmetrical);
    tcase_add_test(tests, files_stay_small);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
