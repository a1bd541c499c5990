/* turn.c - from the file's axes and unit to ISO 8855 and metres */
#include "mesh/repair.h"
#include <math.h>

static int line_of(rg_axis axis) { return ((int)axis - RG_PLUS_X) / 2; }
static double sign_of(rg_axis axis) { return ((int)axis - RG_PLUS_X) % 2 ? -1.0 : 1.0; }
static const char *name_of(rg_axis axis)
{
    static const char *const name[] = {"", "+x", "-x", "+y", "-y", "+z", "-z"};
    return name[axis];
}

rg_status rg_turn_of(rg_turn *out, const rg_mesh_frame *frame, rg_error *err)
{
    if (!isfinite(frame->unit_m) || frame->unit_m <= 0.0)
        return rg_fail(err, RG_BAD_VALUE, "the mesh's unit is %g m: it must be finite and more than 0", frame->unit_m);
    if (frame->up < RG_PLUS_X || frame->up > RG_MINUS_Z || frame->front < RG_PLUS_X || frame->front > RG_MINUS_Z)
        return rg_fail(err, RG_BAD_VALUE, "an axis must be one of +x, -x, +y, -y, +z, -z");
    const int up = line_of(frame->up), front = line_of(frame->front);
    if (up == front)
        return rg_fail(err, RG_BAD_VALUE, "up (%s) and front (%s) lie along one axis: give --front as well, one of %s",
                       name_of(frame->up), name_of(frame->front),
                       up == 0 ? "+y, -y, +z, -z" : up == 1 ? "+x, -x, +z, -z" : "+x, -x, +y, -y");
    const double handed = front == (up + 1) % 3 ? 1.0 : -1.0;       /* of up x front: x x y = +z, y x x = -z */
    *out = (rg_turn){frame->unit_m, {front, 3 - up - front, up},
                     {sign_of(frame->front), handed * sign_of(frame->up) * sign_of(frame->front), sign_of(frame->up)}};
    return RG_OK;
}
