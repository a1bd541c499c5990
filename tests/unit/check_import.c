/* check_import.c - the three formats with readers of their own in all their flavours, axes, units, and polygons */
#include "import_files.h"
#include <locale.h>

/* A right triangle whose corners tell the axes apart: O, 3 along x, 2 along y. */
#define TRIANGLE "v 0 0 0\nv 3 0 0\nv 0 2 0\n"

static const struct { const char *what, *text; size_t n_facets, n_parts; const char *part; double area_m2; } objs[] = {
    {"plain",              TRIANGLE "f 1 2 3\n", 1, 1, "mesh", 3.0},
    {"no newline at last", TRIANGLE "f 1 2 3", 1, 1, "mesh", 3.0},
    {"CRLF",               "v 0 0 0\r\nv 3 0 0\r\nv 0 2 0\r\ng side \r\nf 1 2 3\r\n", 1, 1, "side", 3.0},
    {"texture, normal",    TRIANGLE "vt 0 0\nvn 0 0 1\nf 1/1 2/1 3/1\n", 1, 1, "mesh", 3.0},
    {"normal",             TRIANGLE "vn 0 0 1\nf 1//1 2//1 3//1\n", 1, 1, "mesh", 3.0},
    {"both",               TRIANGLE "f 1/1/1 2/1/1 3/1/1\n", 1, 1, "mesh", 3.0},
    {"negative",           TRIANGLE "f -3 -2 -1\nv 9 9 9\n", 1, 1, "mesh", 3.0},
    {"negative, both",     TRIANGLE "f -3/-1/-1 -2/-1/-1 -1/-1/-1\n", 1, 1, "mesh", 3.0},
    {"faces first",        "f 1 2 3\n" TRIANGLE, 1, 1, "mesh", 3.0},
    {"odd numbers",        "v .0 -0. +0\nv 3. 0e5 -.0e-3\nv 0 +2e0 0.0E+00\nf 1 2 3\n", 1, 1, "mesh", 3.0},
    {"many digits",        "v 0 0 0\nv 2.99999999999999999999999999999999 0 0\nv 0 20000000000000000000000e-22 0\nf 1 2 3\n", 1, 1, "mesh", 3.0},
    {"colours",            "v 0 0 0 1 0 0\nv 3 0 0 1.0 0.5 0\nv 0 2 0 0 0 1\nf 1 2 3\n", 1, 1, "mesh", 3.0},
    {"weights",            "v 0 0 0 1\nv 3 0 0 1\nv 0 2 0 1\nf 1 2 3\n", 1, 1, "mesh", 3.0},
    {"continued",          "v 0 0 \\\n0\nv 3\\\n 0 0\nv 0 2 0\nf 1 \\\r\n 2 \\\n3\n", 1, 1, "mesh", 3.0},
    {"a path in a remark", "# C:\\meshes\\\n" TRIANGLE "f 1 2 3 # front\n", 1, 1, "mesh", 3.0},
    {"tabs and blanks",    "  v\t0 0 0  \n\tv 3 0 0\nv   0   2   0\n f\t1  2\t3 \n", 1, 1, "mesh", 3.0},
    {"other statements",   "mtllib x.mtl\nvp 1\ns off\ncstype bezier\n" TRIANGLE "f 1 2 3\n", 1, 1, "mesh", 3.0},
    {"object",             "o bonnet\n" TRIANGLE "f 1 2 3\n", 1, 1, "bonnet", 3.0},
    {"material",           "usemtl glass\n" TRIANGLE "f 1 2 3\n", 1, 1, "glass", 3.0},
    {"group and material", TRIANGLE "g body\nusemtl steel\nf 1 2 3\n", 1, 1, "body/steel", 3.0},
    {"name with blanks",   TRIANGLE "g left  door \nf 1 2 3\n", 1, 1, "left  door", 3.0},
    {"unused names",       "g none\n" TRIANGLE "g a\nf 1 2 3\ng nothing\n", 1, 1, "a", 3.0},
    {"control characters", TRIANGLE "g a\x1b[2J\xff\xc3\xa9\nf 1 2 3\n", 1, 1, "a_[2J_\xc3\xa9", 3.0},
    {"names come back",    TRIANGLE "v 0 0 1\ng a\nf 1 2 3\ng b\nf 1 2 4\ng a\nf 2 3 4\n", 3, 2, "a", 7.5},
    {"points and lines",   TRIANGLE "p 1\nl 1 2\nf 1 2\nf 1 2 3\n", 1, 1, "mesh", 3.0},
    {"quad",               TRIANGLE "v 3 2 0\nf 1 2 4 3\n", 2, 1, "mesh", 6.0},
    {"repeated corners",   TRIANGLE "v 3 2 0\nf 1 1 2 4 4 3 1\n", 2, 1, "mesh", 6.0},
    {"arrow",              "v 0 0 0\nv 4 0 0\nv 1 1 0\nv 0 4 0\nf 1 2 3 4\n", 2, 1, "mesh", 4.0},
};

START_TEST(every_way_to_write_an_obj)
{
    rg_mesh *mesh = read_good(write_text("a.obj", objs[_i].text), NULL);
    ck_assert_str_eq(mesh->report.format, "OBJ");
    ck_assert_msg(mesh->n_facets == objs[_i].n_facets, "%s: %zu facets", objs[_i].what, mesh->n_facets);
    ck_assert_msg(mesh->n_parts == objs[_i].n_parts, "%s: %zu parts", objs[_i].what, mesh->n_parts);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), objs[_i].part);
    if (objs[_i].n_parts == 1)
        ck_assert_msg(fabs(mesh->report.area_m2 - objs[_i].area_m2) < 1e-14, "%s: %.17g m2", objs[_i].what, mesh->report.area_m2);
    ck_assert_uint_eq(strlen(mesh->report.sha256), 64);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(what_an_obj_holds_beside_facets_is_counted)
{
    rg_mesh *mesh = read_good(write_text("a.obj", TRIANGLE "v 3 2 0\np 1\nl 1 2\nf 1 2\nf 1 1 2\nf 1 2 4 3\n"), NULL);
    ck_assert_uint_eq(mesh->report.n_not_facets, 4);
    ck_assert_uint_eq(mesh->report.n_polygons_cut, 1);
    ck_assert_uint_eq(mesh->report.n_facets_read, 2);
    rg_mesh_free(mesh);
}
END_TEST

static const struct { const char *name, *text, *says; } bad[] = {
    {"a.obj", "",                                                    "empty"},
    {"a.obj", "\n\n# nothing\n",                                     "no triangle"},
    {"a.obj", TRIANGLE,                                              "no triangle"},
    {"a.obj", TRIANGLE "f 1 2\n",                                    "no triangle"},
    {"a.obj", TRIANGLE "f 1 2 4\n",                                  "line 4: a face has corner 4, but there are 3"},
    {"a.obj", TRIANGLE "f 0 1 2\n",                                  "line 4: a face has corner 0"},
    {"a.obj", TRIANGLE "f -4 -2 -1\n",                               "line 4: a face has corner -4"},
    {"a.obj", TRIANGLE "f 1 2 99999999999999999999999\n",            "line 4"},
    {"a.obj", TRIANGLE "f 1 2 x\n",                                  "line 4: a face's corner"},
    {"a.obj", TRIANGLE "f 1 2 3.5\n",                                "line 4: a face's corner"},
    {"a.obj", "v 0 0 0\nv 0 nan 0\nv 1 0 0\nf 1 2 3\n",              "line 2: coordinate \"nan\" is not finite"},
    {"a.obj", "v 0 0 0\nv 0 -inf 0\nv 1 0 0\nf 1 2 3\n",             "line 2"},
    {"a.obj", "v 0 0 0\nv 0 1e999 0\nv 1 0 0\nf 1 2 3\n",            "line 2"},
    {"a.obj", "v 0 0 0\nv 0 1\nv 1 0 0\nf 1 2 3\n",                  "line 2: a vertex is three numbers"},
    {"a.obj", "v 0 0 0\nv 0 0x10 0\nv 1 0 0\nf 1 2 3\n",             "line 2: a vertex is three numbers"},
    {"a.obj", "v 0 0 0\nv 0 1e 0\nv 1 0 0\nf 1 2 3\n",               "line 2: a vertex is three numbers"},
    {"a.obj", "v 0 0 0\nv 0 . 0\nv 1 0 0\nf 1 2 3\n",                "line 2: a vertex is three numbers"},
    {"a.obj", "v 0 0 0\nv 1,5 0 0\nv 1 0 0\nf 1 2 3\n",              "line 2: a vertex is three numbers"},
    {"a.obj", "v 0 0 0\nv 3e5 0 0\nv 0 1 0\nf 1 2 3\n",              "--units"},
    {"a.obj", "v 0 0 0\nv 3e-7 0 0\nv 0 1e-7 0\nf 1 2 3\n",          "--units"},
    {"a.obj", "v 0 0 0\nv 1 1 0\nv 2 2 0\nf 1 2 3\n",                "no facet is left"},
    {"-x .obj", TRIANGLE "f 1 2 4\n",                                "line 4"},
    {"a.stl", "solid a\nfacet normal 0 0 1\nouter loop\nvertex 0 0 0\nvertex 1 0 0\nvertex 0 1 0\nendloop\nendfacet\n", "cut short"},
    {"a.stl", "solid a\nfacet normal 0 0 1\nouter loop\nvertex 0 0 0\nvertex 1 0 inf\nvertex 0 1 0\nendloop\nendfacet\nendsolid\n",
     "line 5: coordinate \"inf\""},
    {"a.stl", "solid a\nfacet\nouter loop\nvertex 0 0 0\nvertex 1 0\nvertex 0 1 0\nendloop\nendfacet\nendsolid\n", "line 6: a vertex"},
    {"a.stl", "solid a\nfacet\nvertex 0 0 0\n", "line 3: outer loop or endfacet should stand here, not \"vertex\""},
    {"a.stl", "solid a\nendsolid a\n", "no triangle"},
    {"a.stl", "solid", "cut short"},
    {"a.stl", "no mesh", "cut short"},
    {"a.ply", "no mesh", "begins with a line"},
    {"a.ply", "ply\n", "end_header"},
    {"a.ply", "ply\nformat ascii 1.0\nend_header\n", "vertex"},
    {"a.ply", "ply\nelement vertex 0\nend_header\n", "format"},
    {"a.ply", "ply\nformat ebcdic 1.0\nend_header\n", "line 2"},
    {"a.ply", "ply\nformat ascii 1.0\nproperty float x\n", "line 3"},
    {"a.ply", "ply\nformat ascii 1.0\nelement vertex 1\nproperty half x\n", "\"half\" is no type"},
    {"a.ply", "ply\nformat ascii 1.0\nelement vertex -1\n", "line 3"},
    {"a.ply", "ply\nformat ascii 1.0\nelement vertex 3\nproperty float x\nproperty float y\nproperty float z\nend_header\n0 0 0 1 0 0 0 1 0\n",
     "points alone"},
    {"a.ply", "ply\nformat ascii 1.0\nelement vertex 3\nproperty float x\nproperty float y\nelement face 1\n"
     "property list uchar int vertex_indices\nend_header\n0 0 1 0 0 1 3 0 1 2\n", "lack a property x, y or z"},
    {"a.ply", "ply\nformat ascii 1.0\nelement vertex 9000000000000000000\nproperty float x\nproperty float y\nproperty float z\n"
     "element face 1\nproperty list uchar int vertex_indices\nend_header\n", "promises"},
    {"a.bin", "this is a letter and no mesh", "no mesh format"},
    {"nothing", "\x01\x02\x03", "no mesh format"},
};

START_TEST(a_bad_file_is_refused_with_its_reason) { read_bad(write_text(bad[_i].name, bad[_i].text), bad[_i].says); }
END_TEST

START_TEST(what_is_no_plain_file_is_refused)
{
    char path[128];
    read_bad(test_folder, "a folder");
    read_bad("/dev/null", "a device");
    read_bad("/dev/zero", "a device");
    snprintf(path, sizeof path, "%s/missing.obj", test_folder);
    read_bad(path, "No such file");
    snprintf(path, sizeof path, "%s/pipe.obj", test_folder);
    ck_assert_int_eq(mkfifo(path, 0600), 0);
    read_bad(path, "a pipe");
    rg_mesh *mesh = NULL;
    ck_assert_int_eq(rg_mesh_read(&mesh, path, NULL, NULL), RG_BAD_INPUT);     /* err may be NULL */
}
END_TEST

START_TEST(four_thousand_kilometres_away_nothing_is_lost)
{
    static const double local[4][3] = {{0, 0, 0}, {4.5, 0.1, 0.3}, {0.7, 1.8, 0.000123}, {2.25, 0.9, 1.45}};
    char text[512] = "";
    for (int i = 0; i < 4; i++)
        snprintf(text + strlen(text), sizeof text - strlen(text), "v %.10f %.10f %.10f\n", 4e6 + local[i][0], -4e6 + local[i][1], local[i][2]);
    strcat(text, "f 1 3 2\nf 1 2 4\nf 2 3 4\nf 3 1 4\n");
    rg_mesh *mesh = read_good(write_text("far.obj", text), NULL);
    ck_assert_uint_eq(mesh->n_vertices, 4);
    for (int i = 0; i < 4; i++)
        for (int k = 0; k < 3; k++) {       /* a double near 4e6 is good to 2^-31 m, half a nanometre */
            const double side_m = mesh->vertex_m[i][k] - mesh->vertex_m[0][k];
            ck_assert_msg(fabs(side_m - local[i][k]) <= 1e-9, "vertex %d axis %d: %.12g, want %.12g", i, k, side_m, local[i][k]);
        }
    ck_assert_double_eq(mesh->report.coordinate_step_m, 0x1p-31);
    ck_assert_double_eq_tol(mesh->origin_m[0], 4e6 + 2.25, 1e-9);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 1);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(numbers_do_not_depend_on_the_locale)
{
    const char *const with_comma[] = {"de_DE.UTF-8", "fr_FR.UTF-8", "de_DE", "C"};
    size_t i = 0;
    while (!setlocale(LC_ALL, with_comma[i])) i++;
    rg_mesh *mesh = read_good(write_text("a.obj", "v 0 0 0\nv 1.5 0 0\nv 0 1.50000000000000000000000001 0\nf 1 2 3\n"), NULL);
    ck_assert_double_eq(mesh->report.area_m2, 1.125);
    rg_mesh_free(mesh);
    setlocale(LC_ALL, "C");
}
END_TEST

static const char axis_names[] = " xXyYzZ";     /* capital: minus */

static double component(rg_axis axis, const double v[3])
{
    const double x = v[((int)axis - 1) / 2];
    return ((int)axis - 1) % 2 ? -x : x;
}

/* All 36 pairs. Where up and front differ: they land on +z and +x, and what was right-handed stays so. */
START_TEST(every_pair_of_axes_lands_right)
{
    const rg_mesh_frame frame = {0.0, (rg_axis)(1 + _i / 6), (rg_axis)(1 + _i % 6)};
    static const double v[4][3] = {{0, 0, 0}, {1, 0, 0}, {0, 2, 0}, {0, 0, 3}};
    const char *path = write_text("a.obj", "v 0 0 0\nv 1 0 0\nv 0 2 0\nv 0 0 3\nf 1 3 2\nf 1 2 4\nf 2 3 4\nf 3 1 4\n");
    if (_i / 12 == _i % 6 / 2) {
        rg_mesh *mesh = NULL;
        rg_error err = {""};
        ck_assert_int_eq(rg_mesh_read(&mesh, path, &frame, &err), RG_BAD_VALUE);
        ck_assert_ptr_nonnull(strstr(err.text, "--front"));
        return;
    }
    rg_mesh *mesh = read_good(path, &frame);
    double e[3][3];     /* images of the file's axes */
    for (int i = 0; i < 3; i++)
        for (int k = 0; k < 3; k++) e[i][k] = (mesh->vertex_m[i + 1][k] - mesh->vertex_m[0][k]) / (i + 1);
    const double det = e[0][0] * (e[1][1] * e[2][2] - e[1][2] * e[2][1]) - e[0][1] * (e[1][0] * e[2][2] - e[1][2] * e[2][0]) +
                       e[0][2] * (e[1][0] * e[2][1] - e[1][1] * e[2][0]);
    ck_assert_msg(det == 1.0, "up %c front %c: determinant %g", axis_names[frame.up], axis_names[frame.front], det);
    for (int i = 1; i < 4; i++) {
        const double d[3] = {mesh->vertex_m[i][0] - mesh->vertex_m[0][0], mesh->vertex_m[i][1] - mesh->vertex_m[0][1],
                             mesh->vertex_m[i][2] - mesh->vertex_m[0][2]};
        ck_assert_double_eq(d[0], component(frame.front, v[i]));
        ck_assert_double_eq(d[2], component(frame.up, v[i]));
    }
    ck_assert_uint_eq(mesh->report.n_shells_turned, 0);     /* turned, not mirrored */
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(units_and_assumptions_are_told)
{
    const char *path = write_text("a.obj", TRIANGLE "f 1 2 3\n");
    rg_mesh *mesh = read_good(path, NULL);
    ck_assert_str_eq(mesh->report.assumed, "a unit is 1 m (assumed), up is +z (assumed), front is +x (assumed)");
    rg_mesh_free(mesh);
    mesh = read_good(path, &(rg_mesh_frame){0.001, RG_PLUS_Y, RG_MINUS_Z});
    ck_assert_str_eq(mesh->report.assumed, "a unit is 0.001 m (given), up is +y (given), front is -z (given)");
    ck_assert_double_eq(mesh->report.unit_m, 0.001);
    ck_assert_double_eq_tol(mesh->report.area_m2, 3e-6, 1e-21);
    ck_assert_double_eq(mesh->report.high_m[2], 0.002);
    rg_mesh_free(mesh);
    rg_error err = {""};
    ck_assert_int_eq(rg_mesh_read(&mesh, path, &(rg_mesh_frame){.up = RG_MINUS_X}, &err), RG_BAD_VALUE);
    ck_assert_ptr_nonnull(strstr(err.text, "--front"));
    ck_assert_int_eq(rg_mesh_read(&mesh, path, &(rg_mesh_frame){.unit_m = -1.0}, &err), RG_BAD_VALUE);
    ck_assert_int_eq(rg_mesh_read(&mesh, path, &(rg_mesh_frame){.unit_m = NAN}, &err), RG_BAD_VALUE);
}
END_TEST

/* A text STL as tools write it, two solids of one facet each. */
START_TEST(stl_text_has_a_part_per_solid)
{
    rg_mesh *mesh = read_good(write_text("a.STL", "  SOLID front door\r\n facet normal nan 0 1\r\n  outer loop\r\n   vertex 0 0 0\r\n"
        "   vertex 3. 0 0\r\n   vertex 0 +2.0e+00 .0\r\n  endloop\r\n endfacet\r\nendsolid front door\r\n\r\nsolid\nfacet normal 0 0 0\n"
        "outer loop\nvertex 0 0 1 vertex 3 0 1\nvertex 3 2 1\nvertex 0 2 1\nendloop endfacet\nendsolid"), NULL);
    ck_assert_str_eq(mesh->report.format, "STL");
    ck_assert_uint_eq(mesh->n_parts, 2);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "front door");
    ck_assert_str_eq(rg_mesh_part_name(mesh, 1), "mesh");
    ck_assert_uint_eq(mesh->n_facets, 3);
    ck_assert_double_eq(rg_mesh_part_area_m2(mesh, 0), 3.0);
    ck_assert_double_eq(rg_mesh_part_area_m2(mesh, 1), 6.0);
    ck_assert_uint_eq(mesh->report.n_polygons_cut, 1);
    rg_mesh_free(mesh);
}
END_TEST

static size_t binary_stl(unsigned char bytes[], const char *head, uint32_t count, size_t n)
{
    static const float v[3][3] = {{0, 0, 0}, {3, 0, 0}, {0, 2, 0}};
    memset(bytes, 0, 84 + 50 * n);
    memcpy(bytes, head, strlen(head));
    memcpy(bytes + 80, &count, 4);
    for (size_t f = 0; f < n; f++)
        for (size_t i = 0; i < 3; i++) {
            const float r[3] = {v[i][0], v[i][1], v[i][2] + (float)f};
            memcpy(bytes + 84 + 50 * f + 12 + 12 * i, r, 12);
        }
    return 84 + 50 * n;
}

START_TEST(stl_binary_is_known_by_its_size)
{
    unsigned char bytes[512];
    const char *const names[] = {"a.stl", "a.obj", "a", "a.dae"};
    for (size_t i = 0; i < 4; i++) {
        rg_mesh *mesh = read_good(write_bytes(names[i], bytes, binary_stl(bytes, "solid text?\nfacet", 2, 2)), NULL);
        ck_assert_str_eq(mesh->report.format, "STL");
        ck_assert_uint_eq(mesh->n_facets, 2);
        ck_assert_double_eq(mesh->report.area_m2, 6.0);
        ck_assert_double_eq(mesh->report.coordinate_step_m, 0x1p-22);   /* singles from 2 to 4 */
        rg_mesh_free(mesh);
    }
    read_bad(write_bytes("a.stl", bytes, binary_stl(bytes, "head", 3, 2)), "counts 3 facets");
    read_bad(write_bytes("a.stl", bytes, binary_stl(bytes, "solid", 1, 2)), "counts 1 facets");
    read_bad(write_bytes("a.stl", bytes, binary_stl(bytes, "head", UINT32_MAX, 2)), "counts 4294967295 facets");
    read_bad(write_bytes("a.stl", bytes, binary_stl(bytes, "head", 0, 0)), "no triangle");
    binary_stl(bytes, "head", 2, 2);
    memcpy(bytes + 84 + 12, &(float){NAN}, 4);
    read_bad(write_bytes("a.stl", bytes, 184), "vertex 1");
}
END_TEST

/* One polygon mesh written with every type, in every order of bytes; vertices carry a colour and a list, and a foreign element stands
 * between. */
typedef struct { FILE *file; int format; } ply_out;      /* 0: text, 1: little endian, 2: big endian */

static void put(ply_out *out, const char *type, double value)
{
    unsigned char b[8] = {0};
    size_t n = 0;
    if (out->format == 0) {
        fprintf(out->file, " %.17g", value);
        return;
    }
    if (strcmp(type, "float") == 0) memcpy(b, &(float){(float)value}, n = 4);
    else if (strcmp(type, "double") == 0) memcpy(b, &value, n = 8);
    else {
        n = strstr(type, "char") ? 1 : strstr(type, "short") ? 2 : 4;
        const int64_t whole = (int64_t)value;
        memcpy(b, &whole, n);
    }
    for (size_t i = 0; i < n; i++) fputc(b[out->format == 1 ? i : n - 1 - i], out->file);
}

static const char *const ply_types[] = {"char", "uchar", "short", "ushort", "int", "uint", "float", "double"};

static void write_ply(int format, const char *coordinate, const char *count, const char *index, bool faces_first)
{
    static const int v[5][3] = {{0, 0, 0}, {30, 0, 0}, {30, 20, 0}, {0, 20, 0}, {15, 10, 10}};
    static const char *const formats[] = {"ascii", "binary_little_endian", "binary_big_endian"};
    snprintf(test_path, sizeof test_path, "%s/a.ply", test_folder);
    ply_out out = {fopen(test_path, "wb"), format};
    const char *faces_head = "element face 3\nproperty uchar flags\nproperty list %s %s vertex_ind%s\n";
    fprintf(out.file, "ply\nformat %s 1.0\ncomment invented\nobj_info none\n", formats[format]);
    if (faces_first) fprintf(out.file, faces_head, count, index, "ex");
    fprintf(out.file, "element vertex 5\nproperty list uchar short tags\nproperty %s z\nproperty uchar red\nproperty %s x\nproperty %s y\n"
            "element material 2\nproperty int id\nproperty list int float k\n", coordinate, coordinate, coordinate);
    if (!faces_first) fprintf(out.file, faces_head, count, index, "ices");
    fprintf(out.file, "end_header\n");
    for (int pass = 0; pass < 2; pass++) {
        static const int face[3][5] = {{4, 0, 1, 2, 3}, {3, 1, 0, 4, 0}, {3, 2, 1, 4, 0}};
        for (int f = 0; f < 3 && (pass == 0) == faces_first; f++) {
            put(&out, "uchar", f);
            put(&out, count, face[f][0]);
            for (int i = 0; i < face[f][0]; i++) put(&out, index, face[f][1 + i]);
        }
        for (int i = 0; i < 5 && pass == 0; i++) {
            put(&out, "uchar", i % 2);
            if (i % 2) put(&out, "short", -7);
            put(&out, coordinate, v[i][2]);
            put(&out, "uchar", 200);
            put(&out, coordinate, v[i][0]);
            put(&out, coordinate, v[i][1]);
        }
        for (int m = 0; m < 2 && pass == 0; m++) {
            put(&out, "int", m);
            put(&out, "int", 2);
            put(&out, "float", 0.25);
            put(&out, "float", 0.5);
        }
    }
    fclose(out.file);
}

START_TEST(every_way_to_write_a_ply)
{
    const char *const coordinate = ply_types[_i % 8], *const count = ply_types[_i / 8 % 6];
    for (int format = 0; format < 3; format++)
        for (int order = 0; order < 2; order++) {
            write_ply(format, coordinate, count, ply_types[(_i + format) % 6], order);
            rg_mesh *mesh = read_good(test_path, NULL);
            ck_assert_str_eq(mesh->report.format, "PLY");
            ck_assert_uint_eq(mesh->n_facets, 4);
            ck_assert_uint_eq(mesh->n_vertices, 5);
            ck_assert_uint_eq(mesh->report.n_polygons_cut, 1);
            assert_corner(mesh, 2, 2, 15, 10, 10, 0.0);
            assert_corner(mesh, 3, 0, 30, 20, 0, 0.0);
            const bool single = strcmp(coordinate, "float") == 0;
            ck_assert_double_eq(mesh->report.coordinate_step_m, single ? 0x1p-19 : 0x1p-48);    /* from 16 to 32 */
            rg_mesh_free(mesh);
        }
}
END_TEST

/* Three facets whose areas 1, 2 and 3 tell them apart, of the parts in the text; remarks stand in the head. */
static const char *ply_of_parts(const char *remarks, const char *type, const char *part0, const char *part1, const char *part2)
{
    char text[1024];
    snprintf(text, sizeof text, "ply\nformat ascii 1.0\n%selement vertex 9\nproperty float x\nproperty float y\nproperty float z\n"
             "element face 3\nproperty %s part\nproperty list uchar int vertex_indices\nproperty uchar part\nend_header\n"
             "0 0 0 2 0 0 0 1 0 0 0 1 2 0 1 0 2 1 0 0 2 2 0 2 0 3 2\n%s 3 0 1 2 0\n%s 3 3 4 5 0\n%s 3 6 7 8 0\n", remarks, type, part0, part1, part2);
    return write_text("parts.ply", text);
}

static const struct { const char *remarks, *type, *part[3]; size_t n; struct { const char *name; double area_m2; } want[4]; } ply_parts[] = {
    {"comment part 0 roof\ncomment part 1 left  door\r\ncomment part 2 glass\n", "uchar", {"2", "0", "1"}, 3,
     {{"roof", 2.0}, {"left  door", 3.0}, {"glass", 1.0}}},
    {"", "int", {"1048575", "7", "7"}, 2, {{"part 7", 5.0}, {"part 1048575", 1.0}}},
    {"comment part 1 bonnet\n", "float", {"1", "0.0", "1e0"}, 2, {{"part 0", 2.0}, {"bonnet", 4.0}}},
    {"comment part 3 unused\ncomment part 3 again\ncomment part 4\n", "ushort", {"4", "4", "4"}, 2, {{"unused", 0.0}, {"part 4", 6.0}}},
    {"comment part 0 wheel\ncomment part 5 wheel\ncomment part 6 hub\n", "char", {"0", "6", "5"}, 2, {{"wheel", 4.0}, {"hub", 2.0}}},
    {"comment part of a fence\ncomment part\ncomment part 1.5 m long\ncomment\ncomment parts 0 x\n", "double", {"0", "0", "0"}, 1, {{"part 0", 6.0}}},
    {"comment part 0 a\x1b[2J\xff\n", "short", {"0", "0", "0"}, 1, {{"a_[2J_", 6.0}}},
};

START_TEST(ply_parts_have_their_names_and_facets)
{
    rg_mesh *mesh = read_good(ply_of_parts(ply_parts[_i].remarks, ply_parts[_i].type, ply_parts[_i].part[0], ply_parts[_i].part[1],
                                           ply_parts[_i].part[2]), NULL);
    ck_assert_uint_eq(mesh->n_parts, ply_parts[_i].n);
    for (size_t p = 0; p < mesh->n_parts; p++) {
        ck_assert_str_eq(rg_mesh_part_name(mesh, p), ply_parts[_i].want[p].name);
        ck_assert_double_eq_tol(rg_mesh_part_area_m2(mesh, p), ply_parts[_i].want[p].area_m2, 1e-14);
    }
    rg_mesh_free(mesh);
}
END_TEST

/* Neither a list of that name, nor one at the vertices, nor remarks alone make parts. */
START_TEST(a_ply_without_parts_is_one)
{
    rg_mesh *mesh = read_good(write_text("a.ply", "ply\nformat ascii 1.0\ncomment part 0 roof\ncomment part -1 x\nelement vertex 3\n"
        "property float x\nproperty float y\nproperty float z\nproperty int part\nelement face 1\nproperty list uchar int part\n"
        "property list uchar int vertex_index\nend_header\n0 0 0 5 3 0 0 6 0 2 0 -7\n1 9 3 0 1 2\n"), NULL);
    ck_assert_uint_eq(mesh->n_parts, 1);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "mesh");
    rg_mesh_free(mesh);
}
END_TEST

static const struct { const char *remarks, *type, *part, *says; } bad_parts[] = {
    {"", "int",    "-1",         "face 2 belongs to part -1, but parts are whole numbers from 0 to 1048575"},
    {"", "int",    "1048576",    "face 2 belongs to part 1048576"},
    {"", "uint",   "4294967295", "face 2 belongs to part 4294967295"},
    {"", "double", "1e300",      "face 2 belongs to part 1e+300"},
    {"", "float",  "0.5",        "face 2 belongs to part 0.5"},
    {"", "float",  "nan",        "face 2 belongs to part nan"},
    {"", "float",  "-inf",       "face 2 belongs to part nan"},
    {"", "int",    "roof",       "\"roof\" is no number"},
    {"comment part -1 roof\n", "int", "0", "line 3: it names part -1, but parts are numbered from 0 to 1048575"},
    {"comment\ncomment part 1048576 roof\n", "int", "0", "line 4: it names part 1048576"},
    {"comment part 99999999999999999999999 roof\n", "int", "0", "line 3: it names part 1e+23"},
};

START_TEST(a_part_that_cannot_be_is_refused)
{
    read_bad(ply_of_parts(bad_parts[_i].remarks, bad_parts[_i].type, "0", bad_parts[_i].part, "0"), bad_parts[_i].says);
}
END_TEST

/* A binary PLY whose last bytes are a part of every type, in both orders: cut anywhere it is refused; some bits are no part. */
static void write_part(int format, const char *type, double value)
{
    snprintf(test_path, sizeof test_path, "%s/a.ply", test_folder);
    ply_out out = {fopen(test_path, "wb"), format};
    fprintf(out.file, "ply\nformat binary_%s_endian 1.0\ncomment part 3 roof\nelement vertex 3\nproperty char x\nproperty char y\n"
            "property char z\nelement face 1\nproperty list uchar uchar vertex_indices\nproperty %s part\nend_header\n",
            format == 1 ? "little" : "big", type);
    static const int numbers[] = {0, 0, 0, 3, 0, 0, 0, 2, 0, 3, 0, 1, 2};
    for (size_t i = 0; i < sizeof numbers / sizeof numbers[0]; i++) put(&out, "char", numbers[i]);
    put(&out, type, value);
    fclose(out.file);
}

START_TEST(binary_parts_of_every_type)
{
    static unsigned char bytes[512];
    const char *const type = ply_types[_i / 2];
    const int format = 1 + _i % 2;
    write_part(format, type, 3.0);
    rg_mesh *mesh = read_good(test_path, NULL);
    ck_assert_uint_eq(mesh->n_parts, 1);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "roof");
    rg_mesh_free(mesh);
    FILE *file = fopen(test_path, "rb");
    const size_t n = fread(bytes, 1, sizeof bytes, file);
    fclose(file);
    for (size_t cut = 0; cut < n; cut++)
        ck_assert_msg(read_any(write_bytes("a.ply", bytes, cut)) == RG_BAD_INPUT, "cut at %zu of %zu it is read", cut, n);
    const bool whole = type[0] != 'f' && type[0] != 'd';
    if (whole && type[0] == 'u') return;
    write_part(format, type, -1.0);
    read_bad(test_path, "face 1 belongs to part -1,");
    if (whole) return;
    static const double none[] = {NAN, INFINITY, -INFINITY, 1e30, 2.5};
    for (size_t i = 0; i < sizeof none / sizeof none[0]; i++) {
        write_part(format, type, none[i]);
        read_bad(test_path, "face 1 belongs to part ");
    }
}
END_TEST

/* Any file of ours, cut anywhere, is read or refused; binary ones are refused wherever they are cut. */
START_TEST(cut_short_anywhere_they_do_no_harm)
{
    static unsigned char bytes[4096];
    size_t n;
    const bool binary = _i < 4;
    if (_i < 3) {
        write_ply(_i, "double", "uchar", "int", _i % 2);
        FILE *file = fopen(test_path, "rb");
        n = fread(bytes, 1, sizeof bytes, file);
        fclose(file);
    } else if (_i == 3) {
        n = binary_stl(bytes, "head", 3, 3);
    } else {
        static const char *const text[] = {TRIANGLE "g body\nusemtl steel\nf 1/2/3 -2 \\\n3 # end\n",
            "solid a\nfacet normal 0 0 1\nouter loop\nvertex 0 0 0\nvertex 1 0 0\nvertex 0 1 0\nendloop\nendfacet\nendsolid a\n"};
        n = strlen(text[_i - 4]);
        memcpy(bytes, text[_i - 4], n);
    }
    static const char *const names[] = {"a.ply", "a.ply", "a.ply", "a.stl", "a.obj", "a.stl"};
    ck_assert_int_eq(read_any(write_bytes(names[_i], bytes, n)), RG_OK);
    for (size_t cut = 0; cut < n; cut++) {
        const rg_status status = read_any(write_bytes(names[_i], bytes, cut));
        if (binary && _i) ck_assert_msg(status == RG_BAD_INPUT, "cut at %zu of %zu it is read", cut, n);
    }
    for (unsigned change = 0; change < 3000; change++) {        /* and with bytes that say something else */
        unsigned char kept[2];
        const size_t at[2] = {(size_t)lrand48() % n, (size_t)lrand48() % n};
        for (int i = 0; i < 2; i++) kept[i] = bytes[at[i]], bytes[at[i]] = (unsigned char)lrand48();
        read_any(write_bytes(names[_i], bytes, n));
        for (int i = 1; i >= 0; i--) bytes[at[i]] = kept[i];
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("import");
    TCase *tests = tcase_create("own formats");
    tcase_add_checked_fixture(tests, make_folder, drop_folder);
    tcase_add_loop_test(tests, every_way_to_write_an_obj, 0, sizeof objs / sizeof objs[0]);
    tcase_add_test(tests, what_an_obj_holds_beside_facets_is_counted);
    tcase_add_loop_test(tests, a_bad_file_is_refused_with_its_reason, 0, sizeof bad / sizeof bad[0]);
    tcase_add_test(tests, what_is_no_plain_file_is_refused);
    tcase_add_test(tests, four_thousand_kilometres_away_nothing_is_lost);
    tcase_add_test(tests, numbers_do_not_depend_on_the_locale);
    tcase_add_loop_test(tests, every_pair_of_axes_lands_right, 0, 36);
    tcase_add_test(tests, units_and_assumptions_are_told);
    tcase_add_test(tests, stl_text_has_a_part_per_solid);
    tcase_add_test(tests, stl_binary_is_known_by_its_size);
    tcase_add_loop_test(tests, every_way_to_write_a_ply, 0, 48);
    tcase_add_loop_test(tests, ply_parts_have_their_names_and_facets, 0, sizeof ply_parts / sizeof ply_parts[0]);
    tcase_add_test(tests, a_ply_without_parts_is_one);
    tcase_add_loop_test(tests, a_part_that_cannot_be_is_refused, 0, sizeof bad_parts / sizeof bad_parts[0]);
    tcase_add_loop_test(tests, binary_parts_of_every_type, 0, 16);
    tcase_add_loop_test(tests, cut_short_anywhere_they_do_no_harm, 0, 6);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
