/* saloon.c - the invented saloon, put together: skin, glass, lamps, wheel wells, wheels, plates, mirrors */
#include "saloon.h"
#include "edges.h"
#include "saloon_shape.h"
#include "skin.h"
#include "wheel.h"

/* A sixteenth of the wavelength at 77 GHz is 0.243 mm; a margin is left for what edges miss. */
static const skin_limit smooth = {.sagitta_m = 0.235e-3, .edge_m = 0.120, .judged_m = 0.238e-3};
static const field body = {saloon_body, NULL};

/* The skin's parts in the order in which they are cut out of the part before the arrow. Panels: 0 is the body itself, for
 * bonnet, boot, doors and bumpers lie flush and close; glass 4 mm below its frame. Grille and intake are openings, closed at their depth. */
typedef struct {
    const char *part, *from;
    field_fn *region;
    double detail_m;
    skin_panel panel;
} cut_out;

static const cut_out cut_outs[] = {
    {"well", "body", saloon_arch_front, 0.060, {1, 0.0}},
    {"well", "body", saloon_arch_rear, 0.060, {1, 0.0}},
    {"floor", "body", saloon_floor, 0.120, {0, 0.0}},
    {"floor_tunnel", "floor", saloon_tunnel, 0.045, {2, 0.070}},
    {"glass_front", "body", saloon_glass_front, 0.045, {3, 0.004}},
    {"glass_rear", "body", saloon_glass_rear, 0.030, {4, 0.004}},
    {"glass_left", "body", saloon_glass_side_front, 0.025, {5, 0.004}},
    {"glass_left", "body", saloon_glass_side_rear, 0.025, {5, 0.004}},
    {"roof", "body", saloon_roof, 0.200, {0, 0.0}},
    {"grille", "body", saloon_grille, 0.025, {6, 0.030}},
    {"lamp_front_left", "body", saloon_lamp_front, 0.025, {7, 0.003}},
    {"lamp_rear_left", "body", saloon_lamp_rear, 0.025, {8, 0.003}},
    {"bonnet", "body", saloon_bonnet, 0.045, {0, 0.0}},
    {"boot", "body", saloon_boot, 0.045, {0, 0.0}},
    {"boot_recess", "boot", saloon_plate_recess, 0.025, {11, 0.018}},
    {"bumper_front", "body", saloon_bumper_front, 0.060, {0, 0.0}},
    {"intake", "bumper_front", saloon_intake, 0.025, {13, 0.040}},
    {"bumper_rear", "body", saloon_bumper_rear, 0.060, {0, 0.0}},
    {"door_front_left", "body", saloon_doors, 0.045, {0, 0.0}},
    {"door_rear_left", "door_front_left", saloon_door_rear, 0.045, {0, 0.0}},
};

static const double floor_z_m = 0.165;

/* From each piece of the border that the arches cut into the skin, a strip runs to the arch's inner end. */
static void add_arch_walls(facets *wells, const facets *skin, uint32_t cut)
{
    enum { STRIPS = 2 };
    const double inner_y_m = saloon_belt_y_m - saloon_arch_depth_m;
    const uint32_t part = facets_part(wells, "wells");
    edges all = edges_of(skin);
    for (size_t i = 0; i < all.n; i++) {
        const edge *e = &all.edge[i];
        if (e->facet[1] == NO_FACET) continue;
        const int first_is_cut = skin->facet[e->facet[0]].part == cut;
        if (first_is_cut == (skin->facet[e->facet[1]].part == cut)) continue;
        const facet *stays = &skin->facet[e->facet[first_is_cut]];
        int c = 0;
        while (stays->v[c] == e->a || stays->v[c] == e->b) c++;         /* the corner off the edge */
        const vec3 a = skin->vertex_m[stays->v[(c + 1) % 3]], b = skin->vertex_m[stays->v[(c + 2) % 3]];
        if (fmax(a.y, b.y) < inner_y_m + 1e-3 || hypot(b.x - a.x, b.z - a.z) < 0.3 * fabs(b.y - a.y)) continue;     /* on the floor */
        const uint32_t first = (uint32_t)wells->n_vertices;
        for (int k = 0; k <= STRIPS; k++) {
            const double s = (double)k / STRIPS;
            facets_vertex(wells, (vec3){a.x, a.y + s * (inner_y_m - a.y), a.z});
            facets_vertex(wells, (vec3){b.x, b.y + s * (inner_y_m - b.y), b.z});
        }
        facets_grid(wells, first, STRIPS + 1, 2, part);
    }
    edges_free(&all);
}

/* The arch's inner end: a disc, cut off at the floor. */
static void add_arch_end(facets *wells, double axle_x_m)
{
    enum { PIECES = 40 };
    const double y_m = saloon_belt_y_m - saloon_arch_depth_m, z_m = saloon_wheel_radius_m;
    const double low = asin((floor_z_m - z_m) / saloon_arch_radius_m), turn = 4.0 * atan(1.0) - 2.0 * low;
    const uint32_t part = facets_part(wells, "wells"), middle = facets_vertex(wells, (vec3){axle_x_m, y_m, floor_z_m});
    for (int i = 0; i <= PIECES; i++) {
        const double angle = low + turn * i / PIECES;
        const uint32_t v = facets_vertex(wells, (vec3){axle_x_m + saloon_arch_radius_m * cos(angle), y_m,
                                                       z_m + saloon_arch_radius_m * sin(angle)});
        if (i > 0) facets_triangle(wells, middle, v, v - 1, part);
    }
}

static facets saloon_skin(void)
{
    enum { N_CUTS = sizeof cut_outs / sizeof cut_outs[0] };
    facets skin = {0}, wells = {0};
    skin_panel panel[MAX_PARTS] = {{0}};
    skin_box(&skin, body, saloon_cage, (int[3]){70, 22, 16}, 1, facets_part(&skin, "body"));
    skin_refine(&skin, body, smooth);
    skin_turn_edges(&skin, body, smooth);
    for (int i = 0; i < N_CUTS; i++) {
        const cut_out *c = &cut_outs[i];
        const uint32_t part = facets_part(&skin, c->part);
        panel[part] = c->panel;
        skin_cut(&skin, body, (field){c->region, NULL}, c->detail_m, smooth, facets_part(&skin, c->from), part);
    }
    skin_finish(&skin, body, smooth);
    const uint32_t cut = facets_part(&skin, "well");
    add_arch_walls(&wells, &skin, cut);
    for (int axle = 0; axle < 2; axle++) add_arch_end(&wells, saloon_axle_x_m[axle]);
    facets_remove_part(&skin, cut);
    skin_part_panels(&skin, body, panel);
    facets_add(&skin, &wells, (vec3){0});
    facets_free(&wells);
    facets_weld(&skin);
    return skin;
}

/* A plate of 520 x 110 mm with corners of 10 mm (common practice), here cut straight; 2 mm thick, stands off the skin at height z_m. */
static void add_plate(facets *mesh, const char *name, vec3 near, double sunk_m)
{
    enum { ARC = 1, N = 2 * (ARC + 1) };        /* half of the outline: two corners */
    static const double half_width_m = 0.26, half_height_m = 0.055, corner_m = 0.010, stand_off_m = 0.008, thick_m = 0.002;
    const uint32_t part = facets_part(mesh, name);
    const vec3 on = field_project(body, near), n = field_normal(body, on), up = {-n.z * (n.x > 0.0 ? 1.0 : -1.0), 0.0, fabs(n.x)};
    const uint32_t first = (uint32_t)mesh->n_vertices;
    for (int face = 0; face < 2; face++) {
        const vec3 middle = vec3_add(on, vec3_scale(n, stand_off_m - sunk_m - face * thick_m));
        for (int i = 0; i < N; i++) {
            const int upper = i > ARC;
            const double angle = atan(1.0) * 2.0 * ((upper ? i - ARC - 1 : i - ARC) / (double)ARC);
            const double y = half_width_m + corner_m * (cos(angle) - 1.0);
            const double z = (half_height_m - corner_m) * (upper ? 1.0 : -1.0) + corner_m * sin(angle);
            const vec3 p = vec3_add(middle, vec3_scale(up, z));
            facets_vertex(mesh, (vec3){p.x, y, p.z});
            facets_vertex(mesh, (vec3){p.x, 0.0, p.z});
        }
    }
    const uint32_t front = first, back = first + 2 * N;
    for (uint32_t i = 0; i + 1 < N; i++) {
        const uint32_t a = front + 2 * i, b = a + 2, c = back + 2 * i, d = c + 2;
        if (n.x > 0.0) {
            facets_quad(mesh, a + 1, a, b, b + 1, part);
            facets_quad(mesh, c, c + 1, d + 1, d, part);
            facets_quad(mesh, a, c, d, b, part);
        } else {
            facets_quad(mesh, a, a + 1, b + 1, b, part);
            facets_quad(mesh, c + 1, c, d, d + 1, part);
            facets_quad(mesh, c, a, b, d, part);
        }
    }
    const uint32_t low = front, high = front + 2 * (N - 1);
    const uint32_t edge_of[2][4] = {{low + 1, low + 1 + 2 * N, low + 2 * N, low}, {high, high + 2 * N, high + 1 + 2 * N, high + 1}};
    for (int k = 0; k < 2; k++) {
        const uint32_t *q = edge_of[k];
        if (n.x > 0.0) facets_quad(mesh, q[0], q[1], q[2], q[3], part);
        else facets_quad(mesh, q[3], q[2], q[1], q[0], part);
    }
}

/* Housing and foot; 2.09 m over both mirrors (common practice: 2.0 to 2.1). */
static double mirror(vec3 p, const void *shape)
{
    (void)shape;
    const double housing = field_box(p, (vec3){0.70, 0.945, 1.010}, (vec3){0.060, 0.100, 0.064}, 0.034);
    return field_joined(housing, field_limb(p, (vec3){0.705, 0.80, 0.968}, 0.018, (vec3){0.70, 0.88, 0.985}, 0.020), 0.020);
}

static void add_wheels(facets *mesh)
{
    static const char *const tyre[] = {"tyre_front_left", "tyre_rear_left"}, *const rim[] = {"wheel_front_left", "wheel_rear_left"};
    for (int axle = 0; axle < 2; axle++) {
        facets wheel = wheel_mesh(tyre[axle], rim[axle], saloon_wheel_radius_m, saloon_wheel_width_m, smooth.sagitta_m);
        facets_add(mesh, &wheel, (vec3){saloon_axle_x_m[axle], 0.5 * saloon_track_m, saloon_wheel_radius_m});
        facets_free(&wheel);
    }
}

facets saloon_mesh(void)
{
    facets mesh = saloon_skin();
    add_wheels(&mesh);
    skin_egg(&mesh, (field){mirror, NULL}, (vec3){0.70, 0.94, 1.0}, (vec3){0.06, 0.10, 0.07}, 8, smooth, facets_part(&mesh, "mirror_left"));
    add_plate(&mesh, "plate_front", (vec3){2.35, 0.0, 0.42}, 0.0);
    add_plate(&mesh, "plate_rear", (vec3){-2.30, 0.0, 0.77}, 0.018);
    facets_mirror_y(&mesh);
    facets_weld(&mesh);
    return mesh;
}
