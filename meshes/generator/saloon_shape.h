/* saloon_shape.h - the saloon's body as a field, and the regions of its skin: glass, lamps, doors and the rest
 *
 * All of it is symmetrical in y; regions on the sides are meant for the left half. Metres, x forward from the middle of the car. */
#ifndef GENERATOR_SALOON_SHAPE_H
#define GENERATOR_SALOON_SHAPE_H
#include "field.h"

static const double saloon_axle_x_m[2] = {1.41, -1.29};         /* front, rear: wheelbase 2.70, common practice 2.65 to 2.85 */
static const double saloon_track_m = 1.57;                      /* common practice: 1.53 to 1.60 */
static const double saloon_wheel_radius_m = 0.316;              /* size marking 205/55 R16: 632 mm */
static const double saloon_wheel_width_m = 0.215;               /* common practice: 0.205 to 0.225 */
static const double saloon_arch_radius_m = 0.356;               /* the wheel's and 40 mm; common practice: 30 to 50 mm */
static const double saloon_arch_depth_m = 0.25;                 /* common practice */
static const double saloon_belt_y_m = 0.90;                     /* about the widest point */

double saloon_body(vec3 p, const void *shape);
vec3 saloon_cage(double u, double w, double t);

/* Negative inside the region, for points of the skin. */
field_fn saloon_glass_front, saloon_glass_rear, saloon_glass_side_front, saloon_glass_side_rear, saloon_bonnet, saloon_boot,
    saloon_roof, saloon_lamp_front, saloon_lamp_rear, saloon_grille, saloon_intake, saloon_bumper_front, saloon_bumper_rear,
    saloon_plate_recess, saloon_doors, saloon_door_rear, saloon_arch_front, saloon_arch_rear, saloon_floor, saloon_tunnel;

#endif
