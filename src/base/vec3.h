/* vec3.h - vectors of three doubles */
#ifndef RG_BASE_VEC3_H
#define RG_BASE_VEC3_H
#include <math.h>

typedef struct { double x, y, z; } vec3;

static inline vec3 vec3_from(const double v[3]) { return (vec3){v[0], v[1], v[2]}; }
static inline vec3 vec3_add(vec3 a, vec3 b) { return (vec3){a.x + b.x, a.y + b.y, a.z + b.z}; }
static inline vec3 vec3_sub(vec3 a, vec3 b) { return (vec3){a.x - b.x, a.y - b.y, a.z - b.z}; }
static inline vec3 vec3_scale(vec3 a, double f) { return (vec3){a.x * f, a.y * f, a.z * f}; }
static inline double vec3_dot(vec3 a, vec3 b) { return a.x * b.x + a.y * b.y + a.z * b.z; }
static inline double vec3_norm(vec3 a) { return sqrt(vec3_dot(a, a)); }
static inline vec3 vec3_cross(vec3 a, vec3 b)
{
    return (vec3){a.y * b.z - a.z * b.y, a.z * b.x - a.x * b.z, a.x * b.y - a.y * b.x};
}

#endif
