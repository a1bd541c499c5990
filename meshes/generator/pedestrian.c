/* pedestrian.c - the invented adult pedestrian dummy: 1.80 m tall, in mid-stride toward +x, left foot forward
 *
 * Heights of hip, knee and shoulder as 0.51, 0.28 and 0.82 of the height (from memory: body proportions); step 0.6 from heel to heel,
 * arms 10 to 20 degrees off the trunk, torso 0.24 deep, head 0.155 x 0.195 x 0.23 (common practice). */
#include "pedestrian.h"
#include "skin.h"

static const skin_limit smooth = {.sagitta_m = 0.24e-3, .edge_m = 0.080, .judged_m = 0.240e-3};

typedef struct { vec3 a, b; double ra_m, rb_m; } limb;

static double limb_field(vec3 p, const void *shape)
{
    const limb *l = shape;
    return field_limb(p, l->a, l->ra_m, l->b, l->rb_m);
}

typedef struct { vec3 centre, radius_m; } ball;

static double ball_field(vec3 p, const void *shape)
{
    const ball *b = shape;
    return field_ellipsoid(p, b->centre, b->radius_m);
}

/* Chest, belly and the line of the shoulders. */
static double torso_field(vec3 p, const void *shape)
{
    (void)shape;
    const double chest = field_ellipsoid(p, (vec3){0.0, 0.0, 1.33}, (vec3){0.120, 0.180, 0.190});
    const double belly = field_ellipsoid(p, (vec3){0.0, 0.0, 1.10}, (vec3){0.108, 0.150, 0.190});
    const double shoulders = field_limb(p, (vec3){0.0, -0.165, 1.440}, 0.055, (vec3){0.0, 0.165, 1.440}, 0.055);
    return field_joined(field_joined(chest, belly, 0.10), shoulders, 0.06);
}

static double shoe_field(vec3 p, const void *shape)
{
    const vec3 *ankle = shape;
    const vec3 middle = {ankle->x + 0.065, ankle->y, 0.045};
    const double sole = field_box(p, middle, (vec3){0.145, 0.048, 0.045}, 0.043);
    return field_joined(sole, field_limb(p, *ankle, 0.048, (vec3){ankle->x + 0.04, ankle->y, 0.085}, 0.043), 0.03);
}

typedef struct {
    const char *name;
    limb limb;
} limb_part;

/* x forward, y left. The left arm swings back as the left leg swings forward. */
static const limb_part limbs[] = {
    {"neck", {{-0.005, 0.0, 1.46}, {0.005, 0.0, 1.61}, 0.060, 0.055}},
    {"upper_arm_left", {{0.0, 0.200, 1.435}, {-0.085, 0.265, 1.165}, 0.050, 0.042}},
    {"upper_arm_right", {{0.0, -0.200, 1.435}, {0.065, -0.265, 1.165}, 0.050, 0.042}},
    {"lower_arm_left", {{-0.085, 0.265, 1.165}, {-0.070, 0.310, 0.925}, 0.041, 0.030}},
    {"lower_arm_right", {{0.065, -0.265, 1.165}, {0.160, -0.300, 0.945}, 0.041, 0.030}},
    {"thigh_left", {{0.0, 0.095, 0.900}, {0.215, 0.100, 0.510}, 0.086, 0.058}},
    {"thigh_right", {{0.0, -0.095, 0.900}, {-0.065, -0.100, 0.470}, 0.086, 0.058}},
    {"shin_left", {{0.215, 0.100, 0.510}, {0.300, 0.100, 0.110}, 0.057, 0.040}},
    {"shin_right", {{-0.065, -0.100, 0.470}, {-0.300, -0.100, 0.110}, 0.057, 0.040}},
};

static const struct { const char *name; ball ball; } balls[] = {
    {"head", {{0.015, 0.0, 1.685}, {0.0975, 0.0775, 0.115}}},
    {"pelvis", {{0.0, 0.0, 0.955}, {0.125, 0.175, 0.135}}},
    {"hand_left", {{-0.060, 0.320, 0.845}, {0.045, 0.030, 0.090}}},
    {"hand_right", {{0.190, -0.312, 0.870}, {0.045, 0.030, 0.090}}},
};

static const struct { const char *name; vec3 ankle; } shoes[] = {
    {"shoe_left", {0.300, 0.100, 0.100}},
    {"shoe_right", {-0.300, -0.100, 0.100}},
};

#define EACH(i, table) (size_t i = 0; i < sizeof(table) / sizeof(table)[0]; i++)

facets pedestrian_mesh(void)
{
    facets mesh = {0};
    for EACH(i, balls) {
        const ball *b = &balls[i].ball;
        skin_egg(&mesh, (field){ball_field, b}, b->centre, b->radius_m, 10, smooth, facets_part(&mesh, balls[i].name));
    }
    skin_egg(&mesh, (field){torso_field, NULL}, (vec3){0.0, 0.0, 1.25}, (vec3){0.12, 0.18, 0.28}, 12, smooth, facets_part(&mesh, "torso"));
    for EACH(i, limbs) {
        const limb *l = &limbs[i].limb;
        const vec3 middle = vec3_scale(vec3_add(l->a, l->b), 0.5);
        skin_egg(&mesh, (field){limb_field, l}, middle, (vec3){0.1, 0.1, 0.3}, 8, smooth, facets_part(&mesh, limbs[i].name));
    }
    for EACH(i, shoes) {
        const vec3 middle = {shoes[i].ankle.x + 0.05, shoes[i].ankle.y, 0.05};
        skin_egg(&mesh, (field){shoe_field, &shoes[i].ankle}, middle, (vec3){0.15, 0.05, 0.05}, 8, smooth, facets_part(&mesh, shoes[i].name));
    }
    facets_weld(&mesh);
    return mesh;
}
