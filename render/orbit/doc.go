// Package orbit holds what is computed once a frame at full precision: the
// reference orbit that every pixel is measured against, the choice of its
// starting point, and the tables that let a pixel leap many iterations at
// once. It also finds special points, nuclei and Misiurewicz points, for whoever
// looks for a view; those decide no pixel. It knows the plane and its precision,
// but no pixel, sheet or colour.
//
// Methods: perturbation about a reference orbit (K. I. Martin 2013), bilinear
// approximation with merged radii, ball-period detection, Newton's method with
// Möbius products over the divisors of a period, and the secant method, all
// published.
package orbit
