/* check_import_assimp.c - formats that come in through Assimp, written here as small as they get */
#include "import_files.h"
#include <fcntl.h>

/* One triangle O, 3 along x, 2 along y, wound so that its normal is the file's +z; and four bytes that a lie can point past. */
static const unsigned char gltf_buffer[44] = {
    0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0,   0, 0, 0x40, 0x40, 0, 0, 0, 0, 0, 0, 0, 0,   0, 0, 0, 0, 0, 0, 0, 0x40, 0, 0, 0, 0,
    0, 0, 1, 0, 2, 0, 0, 0};

static void base64(char *out, const unsigned char *in, size_t n)
{
    static const char digit[] = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
    for (size_t i = 0; i < n; i += 3) {
        const unsigned three = (unsigned)in[i] << 16 | (i + 1 < n ? (unsigned)in[i + 1] << 8 : 0) | (i + 2 < n ? in[i + 2] : 0u);
        for (size_t k = 0; k < 4; k++) *out++ = i + k > n ? '=' : digit[three >> (18 - 6 * k) & 63];
    }
    *out = 0;
}

/* uri NULL: the buffer stands in the text; empty: it follows in a GLB's second chunk. */
static const char *gltf(const char *nodes, const char *uri, const unsigned char buffer[44])
{
    static char text[4096];
    char data[160] = ",\"uri\":\"data:application/octet-stream;base64,";
    base64(data + strlen(data), buffer, 44);
    if (uri) snprintf(data, sizeof data, *uri ? ",\"uri\":\"%s" : "%s", uri);
    if (*data) strcat(data, "\"");
    snprintf(text, sizeof text,
             "{\"asset\":{\"version\":\"2.0\"},\"scene\":0,\"scenes\":[{\"nodes\":[0]}],\"nodes\":[%s],"
             "\"materials\":[{\"name\":\"steel\"}],\"meshes\":[{\"name\":\"sheet\",\"primitives\":[{\"attributes\":{\"POSITION\":0},"
             "\"indices\":1,\"material\":0}]}],"
             "\"accessors\":[{\"bufferView\":0,\"componentType\":5126,\"count\":3,\"type\":\"VEC3\",\"min\":[0,0,0],\"max\":[3,2,0]},"
             "{\"bufferView\":1,\"componentType\":5123,\"count\":3,\"type\":\"SCALAR\"}],"
             "\"bufferViews\":[{\"buffer\":0,\"byteOffset\":0,\"byteLength\":36},{\"buffer\":0,\"byteOffset\":36,\"byteLength\":6}],"
             "\"buffers\":[{\"byteLength\":44%s}]}", nodes, data);
    return text;
}

/* glTF has y up and z to the front, so the file's (x, y, z) is (y, z, x) here. A car 4000 km away: the node's translation is a multiple
 * of 1/4 m, which single precision keeps there, and the mesh under it keeps its own digits. */
#define NESTED "{\"name\":\"car\",\"translation\":[4000000,0,0.5],\"children\":[1,2]}," \
    "{\"name\":\"left\",\"translation\":[0,1,0],\"mesh\":0}," \
    "{\"name\":\"right\",\"scale\":[-0.001,1,1],\"children\":[3]}," \
    "{\"name\":\"door\",\"translation\":[0,0,7],\"rotation\":[0,0,0.70710678118654752,0.70710678118654752],\"mesh\":0}"

START_TEST(gltf_nested_transforms_are_applied_in_double)
{
    rg_mesh *mesh = read_good(write_text("a.gltf", gltf(NESTED, NULL, gltf_buffer)), NULL);
    ck_assert_str_eq(mesh->report.format, "glTF");
    ck_assert_str_eq(mesh->report.assumed, "a unit is 1 m (as glTF has it), up is +y (as glTF has it), front is +z (as glTF has it)");
    ck_assert_uint_eq(mesh->n_facets, 2);
    ck_assert_uint_eq(mesh->n_parts, 2);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "left/steel");
    ck_assert_str_eq(rg_mesh_part_name(mesh, 1), "door/steel");
    assert_corner(mesh, 0, 0, 0.5, 4e6, 1, 1e-9);
    assert_corner(mesh, 0, 1, 0.5, 4e6 + 3, 1, 1e-9);
    assert_corner(mesh, 0, 2, 0.5, 4e6, 3, 1e-9);
    /* Turned by 90 degrees about z, x shrunk and mirrored: (3, 0) goes to (0, 3), (0, 2) to (0.002, 0). The scale and the rotation are
     * single precision in the scene (1e-7 of 3 m). Mirrored, so the corners come in the other order and the normal stays +x. */
    assert_corner(mesh, 1, 0, 7.5, 4e6 + 0.002, 0, 1e-6);
    assert_corner(mesh, 1, 1, 7.5, 4e6, 3, 1e-6);
    assert_corner(mesh, 1, 2, 7.5, 4e6, 0, 1e-6);
    ck_assert_double_eq(mesh->report.coordinate_step_m, 0x1p-22);      /* singles from 2 to 4: the mesh's own numbers */
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(glb_is_the_same_and_is_known_by_its_content)
{
    unsigned char bytes[4096] = "glTF\2";
    char *json = strdup(gltf(NESTED, "", gltf_buffer));
    const uint32_t n = (uint32_t)strlen(json), padded = (n + 3) / 4 * 4, total = 28 + padded + 44, buffer = 44;
    memcpy(bytes + 8, &total, 4);
    memcpy(bytes + 12, &padded, 4);
    memcpy(bytes + 16, "JSON", 4);
    memset(bytes + 20, ' ', padded);
    memcpy(bytes + 20, json, n);
    memcpy(bytes + 20 + padded, &buffer, 4);
    memcpy(bytes + 24 + padded, "BIN", 4);
    memcpy(bytes + 28 + padded, gltf_buffer, 44);
    free(json);
    const char *const names[] = {"a.glb", "-a b.GLB", "a.mesh", "a.obj"};
    char digest[65] = "";
    for (int i = 0; i < 4; i++) {
        rg_mesh *mesh = read_good(write_bytes(names[i], bytes, total), NULL);
        ck_assert_str_eq(mesh->report.format, "glTF");
        ck_assert_uint_eq(mesh->n_facets, 2);
        if (i) ck_assert_str_eq(mesh->report.geometry_sha256, digest);
        strcpy(digest, mesh->report.geometry_sha256);
        rg_mesh_free(mesh);
    }
}
END_TEST

START_TEST(gltf_buffers_are_plain_files_or_nothing)
{
    char pipe[128];
    write_bytes("b.bin", gltf_buffer, sizeof gltf_buffer);
    rg_mesh *mesh = read_good(write_text("a.gltf", gltf("{\"mesh\":0}", "b.bin", gltf_buffer)), NULL);
    ck_assert_uint_eq(mesh->n_facets, 1);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "sheet/steel");    /* its node has no name */
    rg_mesh_free(mesh);
    read_bad(write_text("a.gltf", gltf("{\"mesh\":0}", "missing.bin", gltf_buffer)), "cannot be read");
    read_bad(write_text("a.gltf", gltf("{\"mesh\":0}", "/dev/zero", gltf_buffer)), "cannot be read");
    snprintf(pipe, sizeof pipe, "%s/pipe.bin", test_folder);
    ck_assert_int_eq(mkfifo(pipe, 0600), 0);
    read_bad(write_text("a.gltf", gltf("{\"mesh\":0}", "pipe.bin", gltf_buffer)), "cannot be read");
}
END_TEST

START_TEST(a_frame_that_is_given_goes_before_the_formats_own)
{
    const char *path = write_text("a.gltf", gltf("{\"name\":\"left\",\"mesh\":0}", NULL, gltf_buffer));
    rg_mesh *mesh = read_good(path, &(rg_mesh_frame){.unit_m = 0.01, .up = RG_PLUS_Z, .front = RG_PLUS_X});
    assert_corner(mesh, 0, 1, 0.03, 0, 0, 1e-12);
    assert_corner(mesh, 0, 2, 0, 0.02, 0, 1e-12);
    rg_mesh_free(mesh);
    mesh = read_good(path, &(rg_mesh_frame){.front = RG_MINUS_X});
    ck_assert_str_eq(mesh->report.assumed, "a unit is 1 m (as glTF has it), up is +y (as glTF has it), front is -x (given)");
    assert_corner(mesh, 0, 1, -3, 0, 0, 1e-12);
    assert_corner(mesh, 0, 2, 0, 0, 2, 1e-12);
    rg_mesh_free(mesh);
}
END_TEST

#define OFF_CUBE "OFF\n8 6 0\n0 0 0\n1 0 0\n0 1 0\n1 1 0\n0 0 1\n1 0 1\n0 1 1\n1 1 1\n4 0 2 3 1\n4 4 5 7 6\n4 0 1 5 4\n4 2 6 7 3\n" \
    "4 0 4 6 2\n4 1 3 7 5\n"

START_TEST(off_in_any_name)
{
    const char *const names[] = {"a.off", "a.OFF", "a", "a.dae", "a.obj", "a.stl", "a b.mesh", "-c"};
    for (size_t i = 0; i < sizeof names / sizeof names[0]; i++) {
        rg_mesh *mesh = read_good(write_text(names[i], OFF_CUBE), NULL);
        ck_assert_str_eq(mesh->report.format, "OFF");
        ck_assert_uint_eq(mesh->n_facets, 12);
        ck_assert_uint_eq(mesh->report.n_polygons_cut, 6);
        ck_assert_uint_eq(mesh->report.n_closed_shells, 1);
        ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "mesh");
        rg_mesh_free(mesh);
    }
}
END_TEST

#define AC3D_HEAD "AC3Db\nMATERIAL \"steel\" rgb 1 1 1 amb 0.2 0.2 0.2 emis 0 0 0 spec 0.5 0.5 0.5 shi 10 trans 0\n"
#define AC3D_SHEET AC3D_HEAD "OBJECT world\nkids 1\nOBJECT poly\nname \"sheet\"\nloc 0 0 2\nnumvert 4\n0 0 0\n0 3 0\n0 3 1\n0 0 1\n" \
    "numsurf 1\nSURF 0x20\nmat 0\nrefs 4\n0 0 0\n1 0 0\n2 0 0\n3 0 0\nkids 0\n"

START_TEST(ac3d_has_places_names_and_materials)
{
    rg_mesh *mesh = read_good(write_text("a.ac", AC3D_SHEET), NULL);
    ck_assert_str_eq(mesh->report.format, "AC3D");
    ck_assert_uint_eq(mesh->n_facets, 2);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "sheet/steel");
    ck_assert_double_eq(mesh->report.high_m[1], 3.0);
    ck_assert_double_eq(mesh->report.low_m[2], 2.0);
    rg_mesh_free(mesh);
}
END_TEST

#define DAE(unit, up) "<?xml version=\"1.0\" encoding=\"utf-8\"?>\n" \
    "<COLLADA xmlns=\"http://www.collada.org/2005/11/COLLADASchema\" version=\"1.4.1\"><asset><unit meter=\"" unit "\"/>" \
    "<up_axis>" up "</up_axis></asset><library_geometries><geometry id=\"g\" name=\"sheet\"><mesh><source id=\"p\">" \
    "<float_array id=\"pa\" count=\"9\">0 0 0 4 0 0 4 2 1</float_array><technique_common><accessor source=\"#pa\" count=\"3\" " \
    "stride=\"3\"><param name=\"X\" type=\"float\"/><param name=\"Y\" type=\"float\"/><param name=\"Z\" type=\"float\"/></accessor>" \
    "</technique_common></source><vertices id=\"v\"><input semantic=\"POSITION\" source=\"#p\"/></vertices><triangles count=\"1\">" \
    "<input semantic=\"VERTEX\" source=\"#v\" offset=\"0\"/><p>0 1 2</p></triangles></mesh></geometry></library_geometries>" \
    "<library_visual_scenes><visual_scene id=\"s\"><node id=\"bonnet\" name=\"bonnet\"><translate>0 0 8</translate>" \
    "<instance_geometry url=\"#g\"/></node></visual_scene></library_visual_scenes><scene><instance_visual_scene url=\"#s\"/></scene>" \
    "</COLLADA>\n"

START_TEST(collada_brings_its_unit_and_up_axis)
{
    rg_mesh *mesh = read_good(write_text("a.dae", DAE("0.5", "Z_UP")), NULL);
    ck_assert_str_eq(mesh->report.format, "COLLADA");
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "bonnet");
    assert_corner(mesh, 0, 0, 0, 0, 4, 1e-6);       /* half a metre a unit; single precision in Assimp's rotation */
    assert_corner(mesh, 0, 1, 2, 0, 4, 1e-6);
    assert_corner(mesh, 0, 2, 2, 1, 4.5, 1e-6);
    rg_mesh_free(mesh);
    mesh = read_good(write_text("a.dae", DAE("1", "Y_UP")), NULL);     /* the file's (x, y, z) is (x, -z, y) here */
    assert_corner(mesh, 0, 0, 0, -8, 0, 1e-6);
    assert_corner(mesh, 0, 2, 4, -9, 2, 1e-6);
    rg_mesh_free(mesh);
}
END_TEST

static const char *fbx(int up, int up_sign, int front, int front_sign, double unit_cm)
{
    static char text[2048];
    snprintf(text, sizeof text,
             "; FBX 7.3.0 project file\nFBXHeaderExtension:  {\n\tFBXHeaderVersion: 1003\n\tFBXVersion: 7300\n}\nGlobalSettings:  {\n"
             "\tVersion: 1000\n\tProperties70:  {\n\t\tP: \"UpAxis\", \"int\", \"Integer\", \"\",%d\n\t\tP: \"UpAxisSign\", \"int\", \"Integer\", "
             "\"\",%d\n\t\tP: \"FrontAxis\", \"int\", \"Integer\", \"\",%d\n\t\tP: \"FrontAxisSign\", \"int\", \"Integer\", \"\",%d\n\t\tP: "
             "\"UnitScaleFactor\", \"double\", \"Number\", \"\",%g\n\t}\n}\nObjects:  {\n\tGeometry: 1001, \"Geometry::\", \"Mesh\" {\n"
             "\t\tVertices: *9 {\n\t\t\ta: 0,0,0,4,0,0,4,2,1\n\t\t}\n\t\tPolygonVertexIndex: *3 {\n\t\t\ta: 0,1,-3\n\t\t}\n\t\t"
             "GeometryVersion: 124\n\t}\n\tModel: 1002, \"Model::bonnet\", \"Mesh\" {\n\t\tVersion: 232\n\t\tProperties70:  {\n\t\t\tP: "
             "\"Lcl Translation\", \"Lcl Translation\", \"\", \"A\",0,0,8\n\t\t}\n\t}\n}\nConnections:  {\n\tC: \"OO\",1002,0\n\tC: \"OO\","
             "1001,1002\n}\n", up, up_sign, front, front_sign, unit_cm);
    return text;
}

START_TEST(fbx_brings_its_unit_and_axes)
{
    rg_mesh *mesh = read_good(write_text("a.fbx", fbx(1, 1, 2, 1, 1.0)), NULL);       /* centimetres, y up, z to the front */
    ck_assert_str_eq(mesh->report.format, "FBX");
    ck_assert_str_eq(mesh->report.assumed, "a unit is 0.01 m (the file), up is +y (the file), front is +z (the file)");
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "bonnet");
    assert_corner(mesh, 0, 1, 0.08, 0.04, 0, 1e-12);
    assert_corner(mesh, 0, 2, 0.09, 0.04, 0.02, 1e-12);
    rg_mesh_free(mesh);
    mesh = read_good(write_text("a.fbx", fbx(2, 1, 1, -1, 100.0)), NULL);       /* metres, z up, -y to the front: left is x */
    assert_corner(mesh, 0, 1, 0, 4, 8, 1e-12);
    assert_corner(mesh, 0, 2, -2, 4, 9, 1e-12);
    rg_mesh_free(mesh);
}
END_TEST

static size_t chunk(unsigned char *at, unsigned id, size_t n)
{
    const uint32_t size = (uint32_t)n + 6;
    at[0] = (unsigned char)id, at[1] = (unsigned char)(id >> 8);
    memcpy(at + 2, &size, 4);
    return n + 6;
}

/* A tetrahedron. Chunks are filled from the inside out. */
static size_t write_3ds(unsigned char *bytes)
{
    static const float v[4][3] = {{0, 0, 0}, {3, 0, 0}, {0, 2, 0}, {0, 0, 1}};
    static const uint16_t f[4][4] = {{0, 2, 1, 0}, {0, 1, 3, 0}, {1, 2, 3, 0}, {2, 0, 3, 0}};
    const uint16_t four = 4;
    unsigned char *object = bytes + 12, *body = object + 6 + 5, *points = body + 6;
    memcpy(points + 6, &four, 2);
    memcpy(points + 8, v, sizeof v);
    size_t n = chunk(points, 0x4110, 2 + sizeof v);
    memcpy(points + n + 6, &four, 2);
    memcpy(points + n + 8, f, sizeof f);
    n += chunk(points + n, 0x4120, 2 + sizeof f);
    n = chunk(body, 0x4100, n);
    memcpy(object + 6, "nose", 5);
    n = chunk(object, 0x4000, n + 5);
    n = chunk(bytes + 6, 0x3d3d, n);
    return chunk(bytes, 0x4d4d, n);
}

START_TEST(three_ds_keeps_z_up)
{
    unsigned char bytes[512];
    rg_mesh *mesh = read_good(write_bytes("a.3ds", bytes, write_3ds(bytes)), NULL);
    ck_assert_uint_eq(mesh->n_facets, 4);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 1);
    ck_assert_uint_eq(mesh->report.n_shells_turned, 0);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "3DSMesh_0");     /* Assimp's: it knows names only from a file's key frames */
    ck_assert_double_eq(mesh->report.high_m[0], 3.0);
    ck_assert_double_eq(mesh->report.high_m[1], 2.0);
    ck_assert_double_eq(mesh->report.high_m[2], 1.0);
    ck_assert_double_eq(mesh->report.low_m[2], 0.0);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(indices_that_point_past_are_refused)
{
    unsigned char lies[44];
    memcpy(lies, gltf_buffer, sizeof lies);
    lies[38] = 200;
    ck_assert_int_eq(read_any(write_text("a.gltf", gltf("{\"mesh\":0}", NULL, lies))), RG_BAD_INPUT);
    ck_assert_int_eq(read_any(write_text("a.gltf", gltf("{\"mesh\":7}", NULL, gltf_buffer))), RG_BAD_INPUT);
    ck_assert_int_eq(read_any(write_text("a.off", "OFF\n3 1 0\n0 0 0\nnan 0 0\n0 1 0\n3 0 1 2\n")), RG_BAD_INPUT);
    read_bad(write_text("a.off", "OFF # of an invented thing\n# counts\n4000000000 1 0\n0 0 0\n"), "promises");
    read_bad(write_text("a.off", "OFF\n4000000000 4000000000 0\n0 0 0\n"), "promises");
}
END_TEST

/* Assimp has a log and several of its readers like to talk. */
START_TEST(nothing_is_printed)
{
    char path[128];
    snprintf(path, sizeof path, "%s/said", test_folder);
    fflush(NULL);
    const int out = dup(1), err = dup(2), said = open(path, O_CREAT | O_RDWR, 0600);
    dup2(said, 1);
    dup2(said, 2);
    unsigned char bytes[512];
    read_any(write_text("a.gltf", gltf(NESTED, NULL, gltf_buffer)));
    read_any(write_text("a.dae", DAE("1", "Y_UP")));
    read_any(write_text("b.dae", "<COLLADA><asset>"));
    read_any(write_text("a.fbx", fbx(1, 1, 2, 1, 1.0)));
    read_any(write_text("b.fbx", "; FBX 7.3.0 project file\nObjects:  {\n"));
    read_any(write_bytes("a.3ds", bytes, write_3ds(bytes)));
    read_any(write_text("a.ac", AC3D_SHEET));
    read_any(write_text("a.off", "OFF\n3 1 0\n"));
    read_any(write_text("a.unheard", "of"));
    fflush(NULL);
    const off_t n = lseek(said, 0, SEEK_END);
    dup2(out, 1);
    dup2(err, 2);
    ck_assert_int_eq(n, 0);
}
END_TEST

/* Assimp 5.2 follows the accessor past an array that is not there, and its process ends. Ours does not. */
START_TEST(a_file_that_breaks_the_reader_breaks_nothing_else)
{
    char text[] = DAE("1", "Y_UP");
    memcpy(strstr(text, "float_array"), "fl4at", 5);
    ck_assert_int_eq(read_any(write_text("a.dae", text)), RG_BAD_INPUT);
    rg_mesh_free(read_good(write_text("a.dae", DAE("1", "Y_UP")), NULL));
}
END_TEST

/* Every format cut at every length, or one byte flipped: a mesh that checks out, or a reason. */
START_TEST(damaged_files_do_no_harm)
{
    static unsigned char bytes[8192];
    static const char *const names[] = {"a.gltf", "a.off", "a.ac", "a.dae", "a.fbx", "a.3ds"};
    const char *const text[] = {gltf(NESTED, NULL, gltf_buffer), OFF_CUBE, AC3D_SHEET, DAE("1", "Z_UP"), fbx(1, 1, 2, 1, 1.0), ""};
    const size_t n = _i == 5 ? write_3ds(bytes) : strlen(text[_i]);
    if (_i < 5) memcpy(bytes, text[_i], n);
    ck_assert_int_eq(read_any(write_bytes(names[_i], bytes, n)), RG_OK);
    for (size_t cut = 0; cut < n; cut++) read_any(write_bytes(names[_i], bytes, cut));
    for (size_t at = 0; at < n; at += 3) {
        bytes[at] ^= (unsigned char)(1u << at % 8);
        read_any(write_bytes(names[_i], bytes, n));
        bytes[at] ^= (unsigned char)(1u << at % 8);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("import through Assimp");
    TCase *tests = tcase_create("formats");
    tcase_add_checked_fixture(tests, make_folder, drop_folder);
    tcase_add_test(tests, gltf_nested_transforms_are_applied_in_double);
    tcase_add_test(tests, glb_is_the_same_and_is_known_by_its_content);
    tcase_add_test(tests, gltf_buffers_are_plain_files_or_nothing);
    tcase_add_test(tests, a_frame_that_is_given_goes_before_the_formats_own);
    tcase_add_test(tests, off_in_any_name);
    tcase_add_test(tests, ac3d_has_places_names_and_materials);
    tcase_add_test(tests, collada_brings_its_unit_and_up_axis);
    tcase_add_test(tests, fbx_brings_its_unit_and_axes);
    tcase_add_test(tests, three_ds_keeps_z_up);
    tcase_add_test(tests, indices_that_point_past_are_refused);
    tcase_add_test(tests, nothing_is_printed);
    tcase_add_test(tests, a_file_that_breaks_the_reader_breaks_nothing_else);
    tcase_add_loop_test(tests, damaged_files_do_no_harm, 0, 6);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
