/* check_write.c - meshes written and read back, the bytes of each format, and files that must not appear */
#include "mesh/mesh.h"
#include "run.h"
#include <dirent.h>
#include <math.h>
#include <roadglint/shape.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>
#include <sys/resource.h>
#include <unistd.h>

static char folder[64];

static void make_folder(void)
{
    strcpy(folder, "/tmp/check_write_XXXXXX");
    ck_assert_ptr_nonnull(mkdtemp(folder));
}

static size_t files_in_folder(void)
{
    size_t n = 0;
    DIR *dir = opendir(folder);
    for (const struct dirent *entry; (entry = readdir(dir));) n += entry->d_name[0] != '.' || strlen(entry->d_name) > 2;
    closedir(dir);
    return n;
}

static void remove_folder(void)
{
    DIR *dir = opendir(folder);
    for (const struct dirent *entry; (entry = readdir(dir));) unlinkat(dirfd(dir), entry->d_name, 0);
    closedir(dir);
    rmdir(folder);
}

static const char *in_folder(const char *name)
{
    static char path[128];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    return path;
}

static rg_mesh *make(rg_shape shape)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    ck_assert_msg(rg_shape_mesh(&mesh, &shape, &err) == RG_OK, "%s", err.text);
    return mesh;
}

static void write_to(const rg_mesh *mesh, const char *name)
{
    rg_error err = {""};
    ck_assert_msg(rg_mesh_write(mesh, in_folder(name), &err) == RG_OK, "%s", err.text);
}

static rg_mesh *read_from(const char *name)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    ck_assert_msg(rg_mesh_read(&mesh, in_folder(name), NULL, &err) == RG_OK, "%s", err.text);
    return mesh;
}

/* A closed mesh of awkward numbers, two parts of three with facets, far from zero. */
static rg_mesh *awkward_mesh(double away_m)
{
    const double third = 1.0 / 3.0;
    const double v[4][3] = {{away_m + 0.1, third, 1e-3 * third}, {away_m + 1.1, -third, 0.0}, {away_m + third, 0.7, 0.2}, {away_m, 0.0, 1.0 - 1e-9}};
    static const uint32_t f[4][3] = {{0, 1, 2}, {0, 3, 1}, {1, 3, 2}, {0, 2, 3}}, part[4] = {0, 2, 2, 0};
    static const char *const name[] = {"front left", "empty", "grille\nv 1 2 3"};
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    ck_assert_msg(rg_mesh_from_arrays(&mesh, 4, v, 4, f, part, 3, name, &err) == RG_OK, "%s", err.text);
    return mesh;
}

/* Facets by their corners' places, not their numbers. step_m: how far a coordinate may move. */
static void same_geometry(const rg_mesh *a, const rg_mesh *b, double step_m)
{
    ck_assert_uint_eq(a->n_facets, b->n_facets);
    ck_assert_uint_eq(a->n_vertices, b->n_vertices);
    ck_assert_uint_eq(b->report.n_degenerate + b->report.n_duplicate + b->report.n_facets_turned + b->report.n_shells_turned, 0);
    for (size_t f = 0; f < a->n_facets; f++)
        for (int i = 0; i < 3; i++)
            for (int k = 0; k < 3; k++) {
                const double x = a->origin_m[k] + a->vertex_m[a->facet[f][i]][k], y = b->origin_m[k] + b->vertex_m[b->facet[f][i]][k];
                ck_assert_msg(fabs(x - y) <= step_m, "facet %zu: %.17g, was %.17g", f, y, x);
            }
}

static void same_parts(const rg_mesh *a, const rg_mesh *b)
{
    ck_assert_uint_eq(a->n_parts, b->n_parts);
    for (size_t p = 0; p < a->n_parts; p++) {
        ck_assert_str_eq(b->part_name[p], a->part_name[p]);
        ck_assert_uint_eq(b->part_first[p + 1], a->part_first[p + 1]);
    }
}

/* Doubles survive to the last rounding of adding the origin; STL keeps 24 bits. */
START_TEST(meshes_come_back)
{
    static const struct { const char *name; double step; } format[] = {{"a.obj", 0x1p-51}, {"a.ply", 0x1p-51}, {"a.STL", 0x1p-23}};
    static const rg_shape shape[] = {
        {.kind = RG_PLATE, .size_m = {1.0, 0.5}}, {.kind = RG_CYLINDER, .size_m = {0.05, 0.3}, .sagitta_m = 6e-5},
        {.kind = RG_SPHERE, .size_m = {0.1}, .sagitta_m = 6e-5}, {.kind = RG_TRIHEDRAL, .size_m = {0.1}, .edge_m = 0.01},
        {.kind = RG_GUARDRAIL, .size_m = {7.62}, .sagitta_m = 1e-3}};
    make_folder();
    for (size_t s = 0; s < sizeof shape / sizeof shape[0]; s++) {
        rg_mesh *mesh = make(shape[s]);
        write_to(mesh, format[_i].name);
        rg_mesh *back = read_from(format[_i].name);
        same_geometry(mesh, back, 8.0 * format[_i].step);
        ck_assert_uint_eq(back->report.n_closed_shells, mesh->report.n_closed_shells);
        if (_i < 2) same_parts(mesh, back);
        rg_mesh_free(back);
        rg_mesh_free(mesh);
    }
    remove_folder();
}
END_TEST

static size_t slurp(const char *name, char *bytes, size_t held)
{
    FILE *in = fopen(in_folder(name), "rb");
    ck_assert_ptr_nonnull(in);
    const size_t n = fread(bytes, 1, held - 1, in);
    ck_assert_int_eq(fgetc(in), EOF);
    fclose(in);
    bytes[n] = 0;
    return n;
}

/* Layout: header of 80 bytes that does not begin with "solid", uint32 count, records of 50 bytes with normal, corners and a 0 (the STL
 * format as its makers published it in 1989; from memory). */
START_TEST(stl_has_its_layout)
{
    char bytes[1024];
    make_folder();
    rg_mesh *mesh = make((rg_shape){.kind = RG_PLATE, .size_m = {2.0, 1.0}});
    write_to(mesh, "p.stl");
    ck_assert_uint_eq(slurp("p.stl", bytes, sizeof bytes), 84 + 2 * 50);
    ck_assert_int_ne(strncmp(bytes, "solid", 5), 0);
    ck_assert_mem_eq(bytes + 80, "\2\0\0\0", 4);
    for (int f = 0; f < 2; f++) {
        ck_assert_mem_eq(bytes + 84 + 50 * f, "\0\0\x80\x3f\0\0\0\0\0\0\0\0", 12);      /* the normal +x: 1.0f is 0x3f800000 */
        ck_assert_mem_eq(bytes + 84 + 50 * f + 48, "\0\0", 2);
    }
    ck_assert_mem_eq(bytes + 84 + 12, "\0\0\0\0\0\0\x80\xbf\0\0\0\xbf", 12);          /* (0, -1, -0.5) */
    rg_mesh_free(mesh);
    remove_folder();
}
END_TEST

START_TEST(obj_names_parts_and_keeps_doubles)
{
    char text[2048];
    make_folder();
    rg_mesh *mesh = awkward_mesh(100.0);
    write_to(mesh, "a.obj");
    slurp("a.obj", text, sizeof text);
    ck_assert_ptr_nonnull(strstr(text, "\ng front left\nf "));
    ck_assert_ptr_nonnull(strstr(text, "\ng grille_v 1 2 3\nf "));
    ck_assert_ptr_null(strstr(text, "empty"));
    ck_assert_int_eq(text[0], '#');
    size_t v = 0;
    for (const char *at = strstr(text, "\nv "); at; at = strstr(at + 1, "\nv "), v++) {
        double r[3];
        ck_assert_int_eq(sscanf(at + 3, "%lf %lf %lf", &r[0], &r[1], &r[2]), 3);
        for (int k = 0; k < 3; k++) ck_assert_double_eq(r[k], mesh->origin_m[k] + mesh->vertex_m[v][k]);
    }
    ck_assert_uint_eq(v, 4);
    rg_mesh_free(mesh);
    remove_folder();
}
END_TEST

/* G. Turk, The PLY Polygon File Format, 1994: head of lines, then records without padding. */
START_TEST(ply_has_its_head_and_its_parts)
{
    char bytes[2048];
    make_folder();
    rg_mesh *mesh = awkward_mesh(-3.0);
    write_to(mesh, "a.ply");
    const size_t n = slurp("a.ply", bytes, sizeof bytes);
    ck_assert_int_eq(strncmp(bytes, "ply\nformat binary_little_endian 1.0\n", 36), 0);
    ck_assert_ptr_nonnull(strstr(bytes, "comment part 0 front left\ncomment part 1 empty\ncomment part 2 grille_v 1 2 3\n"));
    ck_assert_ptr_nonnull(strstr(bytes, "element vertex 4\nproperty double x\nproperty double y\nproperty double z\nelement face 4\n"
                                        "property list uchar int vertex_indices\nproperty uchar part\nend_header\n"));
    const char *body = strstr(bytes, "end_header\n") + 11;
    ck_assert_uint_eq(n - (size_t)(body - bytes), 4 * 24 + 4 * 14);
    for (size_t f = 0; f < 4; f++) {
        const unsigned char *face = (const unsigned char *)body + 4 * 24 + 14 * f;
        ck_assert_uint_eq(face[0], 3);
        for (int i = 0; i < 3; i++) ck_assert_uint_eq(face[1 + 4 * i], mesh->facet[f][i]);
        ck_assert_uint_eq(face[13], mesh->part[f]);
    }
    rg_mesh_free(mesh);
    mesh = read_from("a.ply");
    static const char *const name[] = {"front left", "empty", "grille_v 1 2 3"};
    static const size_t n_facets[] = {2, 0, 2};
    ck_assert_uint_eq(mesh->n_parts, 3);
    for (size_t p = 0; p < 3; p++) {
        ck_assert_str_eq(mesh->part_name[p], name[p]);
        ck_assert_uint_eq(rg_mesh_part_n_facets(mesh, p), n_facets[p]);
    }
    rg_mesh_free(mesh);
    remove_folder();
}
END_TEST

/* More parts than a byte can number; each is a facet of its own height, so that none can stand for another. */
START_TEST(ply_of_many_parts_comes_back)
{
    enum { N = 300 };
    static double v[3 * N][3];
    static uint32_t f[N][3], part[N];
    static char text[N][16];
    static const char *name[N];
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    for (uint32_t i = 0; i < N; i++) {
        for (uint32_t k = 0; k < 3; k++) {
            v[3 * i + k][0] = k == 1, v[3 * i + k][1] = k == 2, v[3 * i + k][2] = 0.01 * i;
            f[i][k] = 3 * i + k;
        }
        part[i] = 7 * i % N;
        snprintf(text[i], sizeof text[i], "strip %u", N - i);
        name[i] = text[i];
    }
    ck_assert_msg(rg_mesh_from_arrays(&mesh, 3 * N, (const double (*)[3])v, N, (const uint32_t (*)[3])f, part, N, name, &err) == RG_OK, "%s", err.text);
    make_folder();
    write_to(mesh, "many.ply");
    rg_mesh *back = read_from("many.ply");
    ck_assert_uint_eq(back->n_parts, N);
    same_geometry(mesh, back, 8.0 * 0x1p-51);
    same_parts(mesh, back);
    rg_mesh_free(back);
    rg_mesh_free(mesh);
    remove_folder();
}
END_TEST

START_TEST(what_cannot_be_written_leaves_no_file)
{
    rg_error err = {""};
    make_folder();
    rg_mesh *mesh = awkward_mesh(0.0);
    static const char *const bad[] = {"mesh", "mesh.step", "mesh.stl.gz"};
    for (size_t i = 0; i < 3; i++) {
        ck_assert_int_eq(rg_mesh_write(mesh, in_folder(bad[i]), &err), RG_BAD_VALUE);
        ck_assert_ptr_nonnull(strstr(err.text, ".stl, .obj or .ply"));
    }
    ck_assert_int_eq(rg_mesh_write(mesh, in_folder("no/such/folder.stl"), &err), RG_SYSTEM);
    rg_mesh_free(mesh);
    mesh = awkward_mesh(1e8);       /* floats are 8 m apart there */
    ck_assert_int_eq(rg_mesh_write(mesh, in_folder("far.stl"), &err), RG_BAD_VALUE);
    ck_assert_msg(strstr(err.text, "write .ply or .obj") != NULL, "%s", err.text);
    ck_assert_uint_eq(files_in_folder(), 0);
    write_to(mesh, "far.ply");
    ck_assert_uint_eq(files_in_folder(), 1);
    rg_mesh_free(mesh);
    remove_folder();
}
END_TEST

/* A limit on the size of files stands for the full disk: the write fails in its middle either way. */
START_TEST(a_full_disk_leaves_the_old_file)
{
    static const char *const name[] = {"s.stl", "s.obj", "s.ply"};
    char before[4096], after[4096];
    rg_error err = {""};
    rg_mesh *small = make((rg_shape){.kind = RG_PLATE, .size_m = {1.0, 1.0}}), *large = make((rg_shape){.kind = RG_SPHERE, .size_m = {1.0}, .edge_m = 0.05});
    make_folder();
    write_to(small, name[_i]);
    const size_t n = slurp(name[_i], before, sizeof before);
    signal(SIGXFSZ, SIG_IGN);
    const struct rlimit least = {.rlim_cur = 10000, .rlim_max = 10000};
    ck_assert_int_eq(setrlimit(RLIMIT_FSIZE, &least), 0);
    ck_assert_int_eq(rg_mesh_write(large, in_folder(name[_i]), &err), RG_SYSTEM);
    ck_assert_uint_eq(slurp(name[_i], after, sizeof after), n);
    ck_assert_mem_eq(before, after, n);
    ck_assert_uint_eq(files_in_folder(), 1);
    rg_mesh_free(small);
    rg_mesh_free(large);
    remove_folder();
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("write");
    TCase *tests = tcase_create("write");
    tcase_add_loop_test(tests, meshes_come_back, 0, 3);
    tcase_add_test(tests, stl_has_its_layout);
    tcase_add_test(tests, obj_names_parts_and_keeps_doubles);
    tcase_add_test(tests, ply_has_its_head_and_its_parts);
    tcase_add_test(tests, ply_of_many_parts_comes_back);
    tcase_add_test(tests, what_cannot_be_written_leaves_no_file);
    tcase_add_loop_test(tests, a_full_disk_leaves_the_old_file, 0, 3);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
