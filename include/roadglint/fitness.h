/* roadglint/fitness.h - is a mesh fit for a wavelength? */
#ifndef ROADGLINT_FITNESS_H
#define ROADGLINT_FITNESS_H
#include <roadglint/mesh.h>

/** What limits the use of a mesh at a frequency. Lengths in metres. */
typedef struct {
    double freq_hz, wavelength_m;
    double edge_m[5];               /* edge lengths at the 5, 25, 50, 75 and 95 % points of all edges */
    double sagitta_m[3];            /* estimated, at the 50, 95 and 100 % points of the curved area; 0: flat facets only */
    double feature_turn_rad;        /* a turn above this is a feature and no tessellation: 31 degrees */
    size_t worst_part;              /* the part with the largest sagitta */
    double fit_up_to_hz;            /* the frequency at which the largest sagitta is lambda/16; infinite: flat facets only */
    double size_m;                  /* largest dimension D: the greatest distance between two vertices */
    double far_field_m;             /* 2 D^2/lambda */
    double aspect_step_rad;         /* half of lambda/(2 D): no lobe falls between two aspects */
    bool fit;                       /* freq_hz <= fit_up_to_hz */
    double curved_area_m2;          /* of the facets that stand for a curved surface */
    double over_area_m2;            /* of those whose sagitta is over lambda/16 at freq_hz */
    double edge_needed_m;           /* edges that long would have lambda/16 where the sagitta is largest; infinite: flat facets only */
    size_t n_feature_edges;         /* left out as edges of the shape: a turn above 31 degrees, or above 10 and met nowhere near */
    size_t n_unsure_edges;          /* of these: turns of 31 to 60 degrees that go on alike, as a coarse tube's do */
    double unsure_sagitta_m;        /* what the facets would stand off if the unsure edges were tessellation after all; else 0 */
} rg_fitness;

/** Judges a mesh for a frequency. The sagitta of a facet is the largest distance between it and the smooth surface that it stands for,
 *  taken to have the second fundamental form II all over it, and to pass through its corners. With the edges e_ij and the form's
 *  values q_ij = II(e_ij, e_ij) the surface stands off the point with the weights w_i by
 *    1/2 Sum_{i<j} w_i w_j q_ij          (the error of linear interpolation of a quadratic, exact)
 *  whose maximum is q_ij/8 on an edge, as of a chord over an arc, or in the facet's middle. The q_ij are found from the neighbours: the
 *  corner of a neighbour that meets the facet at angle t at the distance h from their edge has, unfolded, weights w_i too (one of them
 *  negative), and stands off by h 4 tan(t/4); three neighbours give the three unknowns, and at the rim of a
 *  patch the neighbours' own forms fill in. Two chords e of an arc that meet at t have thus exactly their e tan(t/4)/2. A second estimate,
 *  from the facets' normals averaged at the corners, large facets far before small ones, bounds the first at 2.5 times its own value:
 *  flat faces beside a fillet would otherwise take part in its turn.
 *
 *  Not taken for tessellation: edges with one facet, or three and more, or with windings that disagree; turns above 31 degrees; turns
 *  above 10 degrees that are over four times those of the edges near by. What turns less than the coordinates' own spacing could make it
 *  turn counts as flat.
 *
 *  RG_BAD_VALUE (freq_hz not finite or not positive), RG_NO_MEMORY. */
RG_API rg_status rg_mesh_fitness(const rg_mesh *mesh, double freq_hz, rg_fitness *out, rg_error *err);

/** The largest sagitta of each part, estimated as above: sagitta_m[rg_mesh_n_parts]. RG_NO_MEMORY. */
RG_API rg_status rg_mesh_part_sagitta(const rg_mesh *mesh, double sagitta_m[], rg_error *err);

#endif
