/* field.c - a smooth body as a function that is negative inside, and how such functions are joined */
#include "field.h"

/* Central differences: the fields are smooth on the scale of millimetres and of order 1 m, so the error is near 1e-10. */
static const double difference_m = 1e-5;

vec3 field_gradient(field f, vec3 p)
{
    const double h = difference_m;
    vec3 g = {field_at(f, (vec3){p.x + h, p.y, p.z}) - field_at(f, (vec3){p.x - h, p.y, p.z}),
              field_at(f, (vec3){p.x, p.y + h, p.z}) - field_at(f, (vec3){p.x, p.y - h, p.z}),
              field_at(f, (vec3){p.x, p.y, p.z + h}) - field_at(f, (vec3){p.x, p.y, p.z - h})};
    if (p.y == 0.0) g.y = 0.0;
    return vec3_scale(g, 0.5 / h);
}

vec3 field_normal(field f, vec3 p)
{
    const vec3 g = field_gradient(f, p);
    return vec3_scale(g, 1.0 / vec3_norm(g));
}

vec3 field_project(field f, vec3 p)
{
    for (int i = 0; i < 30; i++) {
        const double value = field_at(f, p);
        if (fabs(value) < 1e-10) break;
        const vec3 g = field_gradient(f, p);
        p = vec3_sub(p, vec3_scale(g, value / vec3_dot(g, g)));
    }
    return p;
}

vec3 field_project_on_border(field f, field region, vec3 p)
{
    for (int i = 0; i < 12; i++) {
        p = field_project(f, p);
        const vec3 n = field_normal(f, p), g = field_gradient(region, p);
        const vec3 along = vec3_sub(g, vec3_scale(n, vec3_dot(g, n)));
        const double steep = vec3_dot(along, along), value = field_at(region, p);
        if (steep == 0.0 || fabs(value) < 1e-9) break;
        p = vec3_sub(p, vec3_scale(along, value / steep));
    }
    return field_project(f, p);
}

double field_common(double a, double b, double r_m)
{
    const double u = a + r_m > 0.0 ? a + r_m : 0.0, v = b + r_m > 0.0 ? b + r_m : 0.0, larger = a > b ? a : b;
    return (larger < -r_m ? larger : -r_m) + sqrt(u * u + v * v);
}

double field_joined(double a, double b, double r_m) { return -field_common(-a, -b, r_m); }

double field_step(double from, double to, double x)
{
    const double t = (x - from) / (to - from);
    if (t <= 0.0) return 0.0;
    if (t >= 1.0) return 1.0;
    return t * t * t * (10.0 + t * (6.0 * t - 15.0));
}

double field_curve(int n, const double x_y[][2], double x)
{
    if (x <= x_y[0][0]) return x_y[0][1];
    if (x >= x_y[n - 1][0]) return x_y[n - 1][1];
    int i = 0;
    while (x > x_y[i + 1][0]) i++;
    double slope[2] = {0.0, 0.0};       /* at both ends of piece i */
    for (int end = 0; end < 2; end++) {
        const int k = i + end;
        if (k == 0 || k == n - 1) continue;
        const double before = (x_y[k][1] - x_y[k - 1][1]) / (x_y[k][0] - x_y[k - 1][0]);
        const double after = (x_y[k + 1][1] - x_y[k][1]) / (x_y[k + 1][0] - x_y[k][0]);
        if (before * after > 0.0) slope[end] = 2.0 * before * after / (before + after);
    }
    const double h = x_y[i + 1][0] - x_y[i][0], t = (x - x_y[i][0]) / h, s = 1.0 - t;
    return s * s * (1.0 + 2.0 * t) * x_y[i][1] + t * t * (3.0 - 2.0 * t) * x_y[i + 1][1] + h * t * s * (s * slope[0] - t * slope[1]);
}

double field_limb(vec3 p, vec3 a, double ra_m, vec3 b, double rb_m)
{
    const vec3 axis = vec3_sub(b, a), from_a = vec3_sub(p, a);
    const double length = vec3_norm(axis), along = vec3_dot(from_a, axis) / length;
    const double off2 = vec3_dot(from_a, from_a) - along * along, off = off2 > 0.0 ? sqrt(off2) : 0.0;
    /* The touching cone's half angle has the sine (ra - rb) / length; a point belongs to the ball or to the cone by its foot. */
    const double sine = (ra_m - rb_m) / length, cosine = sqrt(1.0 - sine * sine);
    const double foot = along - off * sine / cosine;
    if (foot <= 0.0) return sqrt(off * off + along * along) - ra_m;
    if (foot >= length) return sqrt(off * off + (along - length) * (along - length)) - rb_m;
    return off * cosine + along * sine - ra_m;
}

double field_ellipsoid(vec3 p, vec3 c, vec3 radius_m)
{
    const vec3 d = vec3_sub(p, c);
    const vec3 once = {d.x / radius_m.x, d.y / radius_m.y, d.z / radius_m.z};
    const vec3 twice = {once.x / radius_m.x, once.y / radius_m.y, once.z / radius_m.z};
    const double length = vec3_norm(once), slope = vec3_norm(twice);
    return slope > 0.0 ? length * (length - 1.0) / slope : -fmin(radius_m.x, fmin(radius_m.y, radius_m.z));
}

double field_box(vec3 p, vec3 c, vec3 half_m, double r_m)
{
    const vec3 d = {fabs(p.x - c.x) - half_m.x + r_m, fabs(p.y - c.y) - half_m.y + r_m, fabs(p.z - c.z) - half_m.z + r_m};
    const vec3 out = {fmax(d.x, 0.0), fmax(d.y, 0.0), fmax(d.z, 0.0)};
    return fmin(fmax(d.x, fmax(d.y, d.z)), 0.0) + vec3_norm(out) - r_m;
}
