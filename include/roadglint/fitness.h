/* roadglint/fitness.h - is a mesh fit for a wavelength? */
#ifndef ROADGLINT_FITNESS_H
#define ROADGLINT_FITNESS_H
#include <roadglint/mesh.h>

/** What limits the use of a mesh at a frequency. Lengths in metres. */
typedef struct {
    double freq_hz, wavelength_m;
    double edge_m[5];               /* edge lengths at the 5, 25, 50, 75 and 95 % points */
    double sagitta_m[3];            /* estimated, at the 50, 95 and 100 % points of the curved area */
    double feature_turn_rad;        /* a turn above this is a feature and no tessellation */
    size_t worst_part;              /* the part with the largest sagitta */
    double fit_up_to_hz;            /* the frequency at which the largest sagitta is lambda/16; infinite: flat facets only */
    double size_m;                  /* largest dimension D */
    double far_field_m;             /* 2 D^2/lambda */
    double aspect_step_rad;         /* half of lambda/(2 D): no lobe falls between two aspects */
    bool fit;                       /* freq_hz <= fit_up_to_hz */
} rg_fitness;

/** Judges a mesh for a frequency. The sagitta is estimated from the turn between neighbouring facets: two chords of length e that
 *  meet at angle t stand on an arc whose height over a chord is e tan(t/4)/2 (common practice), with feature edges left out.
 *  RG_BAD_VALUE (freq_hz not finite or not positive), RG_NO_MEMORY. */
RG_API rg_status rg_mesh_fitness(const rg_mesh *mesh, double freq_hz, rg_fitness *out, rg_error *err);

#endif
