/* bounce.h - what reaches the radar after two and more reflections */
#ifndef RG_SCATTER_BOUNCE_H
#define RG_SCATTER_BOUNCE_H
#include "scatter/lit.h"
#include <complex.h>

enum { RG_MAX_BOUNCES = 16, RG_FOOTPRINT_WEIGHTS = 3 };

/* Footprints of beams on the facets that they met last, as triangles for rg_triangle_sum, one weight for hh, vv and hv. Start with {0}. */
typedef struct {
    size_t n, room;
    double *path_m[3];                              /* s.r less the way there, at the corners */
    double *weight_m2[RG_FOOTPRINT_WEIGHTS];
} rg_footprints;

void rg_footprints_free(rg_footprints *footprints);
/* Adds footprints of weight 0 up to a multiple of RG_LANES. False without memory. */
bool rg_footprints_pad(rg_footprints *footprints);

/* Working memory of one thread. */
typedef struct rg_bounce_scratch rg_bounce_scratch;
rg_bounce_scratch *rg_bounce_scratch_new(void);
void rg_bounce_scratch_free(rg_bounce_scratch *scratch);     /* takes NULL */

/* Follows the beam that leaves a lit part of a facet, docs/physics.md (7.1) to (7.3), and appends a footprint for each facet that it
 * meets, up to n_bounces reflections in all, the first one counted.
 *
 * A beam is a plane wave across a convex polygon, and facets are flat, so nothing is sampled: which facets a beam meets, and with which
 * portion, is found by the cutting that finds what the radar sees. Its parts that are seen from the radar radiate back, as
 * physical optics of the wave that arrives; the way back of the others is blocked.
 *
 *    seen       the radar's view
 *    cover      as drawn for it
 *    face       the facet, as the radar sees it
 *    lit        the lit part of it
 *
 * False without memory. */
bool rg_bounce_follow(const rg_scene *scene, const rg_seen *seen, const rg_cover *cover, const rg_face *face, const rg_polygon *lit,
                      int n_bounces, double grain_m, rg_lit_scratch *lit_scratch, rg_bounce_scratch *scratch, rg_footprints *footprints);

#endif
