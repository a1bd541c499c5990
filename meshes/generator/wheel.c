/* wheel.c - a tyre on its rim
 *
 * The tyre has straight walls and a round shoulder; the rim is a dish with a well behind and five spokes before it. */
#include "wheel.h"
#include "revolve.h"

#define RIM_R_M 0.213       /* common practice: rims of 0.41 to 0.43 in diameter, with their lip */
static const double dish_y_m = 0.045;       /* the dish behind the spokes */
enum { SPOKES = 5, MOST_POINTS = 64 };

/* From the inner bead over the tread to the outer one. The outer shoulder, which the radar sees, is an arc; the inner one is left
 * square. */
static size_t tyre_section(double radius_m, double width_m, double sagitta_m, profile_point point[MOST_POINTS])
{
    static const double bead_r_m = RIM_R_M + 0.003, bead_y_m = 0.080, shoulder_m = 0.026;
    const double half_m = 0.5 * width_m, quarter = 2.0 * atan(1.0);
    const int steps = (int)ceil(quarter / (2.0 * acos(1.0 - sagitta_m / shoulder_m)));
    size_t n = 0;
    point[n++] = (profile_point){bead_r_m, -bead_y_m};
    point[n++] = (profile_point){bead_r_m, -half_m};
    point[n++] = (profile_point){radius_m, -half_m};
    for (int i = 0; i <= steps; i++) {
        const double angle = quarter * (1.0 - (double)i / steps);
        point[n++] = (profile_point){radius_m - shoulder_m * (1.0 - sin(angle)), half_m - shoulder_m * (1.0 - cos(angle))};
    }
    point[n++] = (profile_point){bead_r_m, half_m};
    point[n++] = (profile_point){bead_r_m, bead_y_m};
    return n;
}

/* A wedge of flat faces from the hub to the rim, one of several about the axis. */
static void add_spoke(facets *mesh, double turn, uint32_t part)
{
    static const double in_r = 0.050, out_r = 0.207, in_half = 0.026, out_half = 0.034, in_y = 0.078, out_y = 0.086;
    const uint32_t first = (uint32_t)mesh->n_vertices;
    for (int corner = 0; corner < 8; corner++) {
        const int outer = corner >> 2, front = corner >> 1 & 1, side = corner & 1;
        const double r = outer ? out_r : in_r, t = (side ? 1.0 : -1.0) * (outer ? out_half : in_half);
        const double y = front ? (outer ? out_y : in_y) : dish_y_m + 0.002;
        facets_vertex(mesh, (vec3){r * cos(turn) - t * sin(turn), y, r * sin(turn) + t * cos(turn)});
    }
    facets_quad(mesh, first + 2, first + 3, first + 7, first + 6, part);
    facets_quad(mesh, first + 0, first + 2, first + 6, first + 4, part);
    facets_quad(mesh, first + 3, first + 1, first + 5, first + 7, part);
}

facets wheel_mesh(const char *tyre_part, const char *rim_part, double radius_m, double width_m, double sagitta_m)
{
    facets mesh = {0};
    const uint32_t tyre = facets_part(&mesh, tyre_part), rim = facets_part(&mesh, rim_part);
    const int n_segments = revolve_segments(radius_m, 0.43 * sagitta_m);        /* two curvatures share the sagitta */
    profile_point section[MOST_POINTS];
    const size_t n = tyre_section(radius_m, width_m, 0.25 * sagitta_m, section);
    const double quarter = 2.0 * atan(1.0);
    revolve(&mesh, n, section, n_segments, tyre);

    const int n_rim_segments = revolve_segments(RIM_R_M, 0.8 * sagitta_m);
    /* From the inner side's middle along the barrel, and from the outer lip over the dish to the middle. */
    const profile_point inside[] = {{0.0, -0.030}, {0.190, -0.030}, {0.196, -0.096}, {RIM_R_M, -0.099}, {RIM_R_M + 0.0015, -0.079}};
    const profile_point outside[] = {{RIM_R_M + 0.0015, 0.079}, {RIM_R_M, 0.099}, {0.201, 0.096}, {0.194, dish_y_m}, {0.0, dish_y_m}};
    revolve(&mesh, sizeof inside / sizeof inside[0], inside, n_rim_segments, rim);
    revolve(&mesh, sizeof outside / sizeof outside[0], outside, n_rim_segments, rim);
    const profile_point hub[] = {{0.066, dish_y_m + 0.002}, {0.060, 0.082}, {0.0, 0.082}};
    revolve(&mesh, sizeof hub / sizeof hub[0], hub, revolve_segments(0.066, sagitta_m), rim);
    for (int i = 0; i < SPOKES; i++) add_spoke(&mesh, 4.0 * quarter * i / SPOKES + quarter, rim);
    return mesh;
}
