/* saloon_shape.c - the saloon's body as a field, and the regions of its skin
 *
 * The lower body is what a side, a deck (bonnet and boot lid), a nose, a tail and a floor enclose; the house on it is what side
 * glass, windscreen, roof and rear window enclose. Edges are rounded where these surfaces meet. */
#include "saloon_shape.h"

#define CURVE(table, x) field_curve((int)(sizeof(table) / sizeof(table)[0]), table, x)

static double square(double x) { return x * x; }

static double from_axle(vec3 p, int axle) { return hypot(p.x - saloon_axle_x_m[axle], p.z - saloon_wheel_radius_m); }

/* Height of the shoulder over x: bonnet edge 0.70 to 0.80, sill of the windows 0.92 to 1.0 (common practice). */
static double shoulder_z(double x)
{
    static const double x_z[][2] = {{-2.40, 0.975}, {-2.0, 0.995}, {-1.5, 0.995}, {-0.8, 0.970}, {0.0, 0.945}, {0.7, 0.918},
                                    {1.2, 0.880},   {1.6, 0.832},  {2.0, 0.766},  {2.4, 0.670}};
    return CURVE(x_z, x);
}

/* Half width: 0.91 at the waist; drawn in toward sill, shoulder, nose and tail; a soft line along the doors; flares at the arches. */
static double side(vec3 p)
{
    const double up = p.z - 0.60, along = p.x / 2.3;
    double half_m = 0.893 - (up > 0.0 ? 0.62 : 0.26) * square(up) - 0.05 * square(square(along));
    const double line_z = 0.775 + 0.025 * (0.5 - p.x) / 2.0;
    const double fade = field_step(2.0, 1.3, p.x) * field_step(-2.15, -1.6, p.x);
    half_m += 0.012 * fade * field_step(line_z + 0.045, line_z - 0.045, p.z);
    for (int axle = 0; axle < 2; axle++) half_m += 0.013 * field_step(0.50, 0.375, from_axle(p, axle));
    return fabs(p.y) - half_m;
}

static double deck(vec3 p)
{
    static const double x_crown[][2] = {{-2.4, 0.045}, {-1.6, 0.055}, {0.0, 0.060}, {1.0, 0.070}, {1.8, 0.065}, {2.4, 0.050}};
    const double y = fabs(p.y), dome = 0.011 * field_step(0.50, 0.34, y) * field_step(2.15, 1.7, p.x) * field_step(1.0, 1.4, p.x);
    return p.z - shoulder_z(p.x) - CURVE(x_crown, p.x) * (1.0 - square(y / 0.8)) - dome;
}

static double nose(vec3 p)
{
    static const double z_back[][2] = {{0.10, 0.11}, {0.20, 0.055}, {0.30, 0.018}, {0.42, 0.0}, {0.52, 0.004}, {0.62, 0.025},
                                       {0.72, 0.070}, {0.82, 0.150}};
    return (p.x - 2.31 + 0.19 * square(p.y / 0.9) + CURVE(z_back, p.z)) / 1.03;
}

static double tail(vec3 p)
{
    static const double z_back[][2] = {{0.10, 0.15}, {0.20, 0.080}, {0.32, 0.020}, {0.44, 0.0}, {0.55, 0.010}, {0.70, 0.040},
                                       {0.85, 0.066}, {0.96, 0.072}, {1.06, 0.066}};
    return (-p.x - 2.29 + 0.12 * square(p.y / 0.9) + CURVE(z_back, p.z)) / 1.02;
}

/* Ground clearance 0.16 (common practice), more toward both ends. */
static double bottom(vec3 p) { return 0.165 + 0.05 * field_step(1.85, 2.35, p.x) + 0.10 * field_step(-1.7, -2.3, p.x) - p.z; }

/* A plane through (x0, z0) in y = 0 that leans back by lean_deg from the horizontal, bowed in plan and in profile. */
static double pane(vec3 p, double x, double lean_deg, double bow, double profile_radius_m)
{
    const double lean = lean_deg * atan(1.0) / 45.0, up = p.z - 0.96;
    const double off = up * cos(lean) + x * sin(lean), along = up * sin(lean) - x * cos(lean) - 0.45;
    return off + bow * square(p.y) + (square(along) - square(0.45)) / (2.0 * profile_radius_m);
}

static double windscreen(vec3 p) { return pane(p, p.x - 1.05, 28.0, 0.155, 7.0); }     /* common practice: 26 to 30 degrees */
static double rear_window(vec3 p) { return pane(p, -1.80 - p.x, 29.0, 0.15, 6.0); }    /* common practice: 25 to 35 degrees */
static double roof(vec3 p) { return p.z - 1.452 + square(p.x + 0.28) / 9.5 + 0.125 * square(p.y); }

/* Side glass: tumblehome 24 degrees (common practice: 20 to 28), rounded like a barrel, drawn in toward both ends. */
static double side_glass(vec3 p)
{
    const double lean = 24.0 * atan(1.0) / 45.0, up = p.z - 0.95;
    return (fabs(p.y) - 0.800 + 0.035 * square(p.x + 0.15)) * cos(lean) + up * sin(lean) + square(up - 0.22) / 3.6 - 0.0134;
}

static double house_top(vec3 p)
{
    return field_common(field_common(windscreen(p), roof(p), 0.075), rear_window(p), 0.075);
}

double saloon_body(vec3 p, const void *shape)
{
    (void)shape;
    const double ends = fmax(nose(p), tail(p));
    const double walls = field_common(side(p), ends, 0.17);
    const double lower = field_common(field_common(walls, deck(p), 0.055), bottom(p), 0.050);
    const double house = fmax(field_common(house_top(p), side_glass(p), 0.070), 0.7 - p.z);      /* rests on the lower body */
    return field_joined(lower, house, 0.030);
}

/* The lattice: w = 0 the middle, w = 1 the side; t = 0 the floor, t = 1 the top. Along the top, w runs from the middle over the edge
 * of roof and bonnet (the rail) to the shoulder. */
vec3 saloon_cage(double u, double w, double t)
{
    static const double rail_y[][2] = {{-2.29, 0.68}, {-1.75, 0.70}, {-1.05, 0.56}, {0.10, 0.58}, {1.0, 0.74}, {2.31, 0.66}};
    static const double rail_z[][2] = {{-2.29, 1.0}, {-1.75, 1.02}, {-1.05, 1.38}, {0.10, 1.40}, {1.0, 0.93}, {2.31, 0.70}};
    static const double middle_z[][2] = {{-2.29, 1.04}, {-1.8, 1.05}, {-1.0, 1.41}, {-0.28, 1.452}, {0.2, 1.43}, {1.05, 0.97},
                                         {2.31, 0.71}};
    static const double x_bow[][2] = {{-2.29, -0.12}, {-1.7, -0.15}, {-0.5, 0.0}, {0.0, 0.15}, {1.05, 0.25}, {2.31, 0.20}};
    static const double w_rail = 0.62;
    const double x = 4.60 * u - 2.29, taper = 1.0 - 0.16 * square(square(x / 2.3));
    const double shoulder_y = 0.89 * taper, zr = CURVE(rail_z, x), yr = CURVE(rail_y, x);
    double y, z;
    if (w <= w_rail) {
        const double s = w / w_rail;
        y = yr * s;
        z = CURVE(middle_z, x) + (zr - CURVE(middle_z, x)) * s * s;
    } else {
        const double s = (w - w_rail) / (1.0 - w_rail);
        y = yr + (shoulder_y - yr) * s;
        z = zr + (shoulder_z(x) - 0.02 - zr) * s;
    }
    y = y * t + 0.86 * taper * w * (1.0 - t);
    z = z * t + 0.17 * (1.0 - t);
    return (vec3){x - CURVE(x_bow, x) * square(y / 0.9), y, z};
}

static double common(double a, double b) { return field_common(a, b, 0.045); }
static double between(double x, double low, double high) { return fabs(x - 0.5 * (low + high)) - 0.5 * (high - low); }

#define REGION(name) double saloon_##name(vec3 p, const void *shape)

/* Glass stands off the pillars, the roof and the cowl by the width of its frame. */
REGION(glass_front)
{
    (void)shape;
    return common(common(side_glass(p) + 0.055, roof(p) + 0.050), common(0.045 - deck(p), 0.1 - p.x));
}

REGION(glass_rear)
{
    (void)shape;
    return common(common(side_glass(p) + 0.075, roof(p) + 0.050), common(0.035 - deck(p), p.x + 0.9));
}

static double side_window(vec3 p)
{
    const double pillars = field_common(windscreen(p) + 0.060, rear_window(p) + 0.135, 0.050);
    const double frame = field_common(pillars, roof(p) + 0.065, 0.050);
    return common(fmax(frame, 0.3 - p.y), shoulder_z(p.x) + 0.045 - p.z);
}

REGION(glass_side_front) { (void)shape; return common(side_window(p), -0.115 - p.x); }
REGION(glass_side_rear) { (void)shape; return common(side_window(p), p.x + 0.205); }

REGION(roof)
{
    (void)shape;
    return common(common(side_glass(p) + 0.040, 1.2 - p.z), fmax(windscreen(p), rear_window(p)) + 0.015);
}

REGION(bonnet)
{
    (void)shape;
    return common(common(side(p) + 0.070, nose(p) + 0.065), common(0.040 - windscreen(p), 0.5 - p.z));
}

/* The lid's edge on the deck lies nearer to the side than on the tail, where the lamps stand. */
REGION(boot)
{
    (void)shape;
    const double lid = field_joined(common(side(p) + 0.095, 0.945 - p.z), side(p) + 0.30, 0.080);
    return common(common(lid, 0.045 - rear_window(p)), common(0.60 - p.z, p.x + 1.2));
}

REGION(lamp_front)
{
    (void)shape;
    const double z = 0.612 + 0.30 * (2.20 - p.x);
    return common(common(fabs(p.z - z) - 0.052, -0.40 - side(p)), 1.90 - p.x);
}

REGION(lamp_rear)
{
    (void)shape;
    return common(common(between(p.z, 0.715, 0.905), -0.28 - side(p)), p.x + 1.97);
}

REGION(grille)
{
    (void)shape;
    return common(common(fabs(p.y) - 0.40, between(p.z, 0.548, 0.655)), 2.0 - p.x);
}

REGION(intake)
{
    (void)shape;
    return common(common(fabs(p.y) - 0.58, between(p.z, 0.245, 0.335)), 2.0 - p.x);
}

REGION(bumper_front) { (void)shape; return fmax(p.z - 0.515, 1.50 - p.x); }
REGION(bumper_rear) { (void)shape; return fmax(p.z - 0.565, p.x + 1.40); }

REGION(plate_recess)
{
    (void)shape;
    return common(common(fabs(p.y) - 0.295, between(p.z, 0.695, 0.845)), p.x + 2.0);
}

static double door(vec3 p) { return common(common(0.27 - p.z, p.z - shoulder_z(p.x) - 0.012), 0.5 - p.y); }

/* Both doors of a side, back to the wheel arch; then the rear one of them. */
REGION(doors)
{
    (void)shape;
    const double slant = 0.06 * (p.z - 0.6);
    return common(common(door(p), 0.425 - from_axle(p, 1)), between(p.x - slant, -1.08, 0.90));
}

REGION(door_rear) { (void)shape; return p.x - 0.06 * (p.z - 0.6) + 0.15; }

/* As deep as the arch; a straight bore along y. */
static double arch(vec3 p, int axle)
{
    return fmax(from_axle(p, axle) - saloon_arch_radius_m, saloon_belt_y_m - saloon_arch_depth_m - p.y);
}

REGION(arch_front) { (void)shape; return arch(p, 0); }
REGION(arch_rear) { (void)shape; return arch(p, 1); }

REGION(floor) { (void)shape; return common(field_common(side(p), fmax(nose(p), tail(p)), 0.25) + 0.055, p.z - 0.30); }

REGION(tunnel)
{
    (void)shape;
    return common(common(fabs(p.y) - 0.13, between(p.x, -1.15, 1.35)), p.z - 0.30);
}
