// Package orbit holds what is computed once a frame at full precision: the
// reference orbit that every pixel is measured against, the choice of its
// starting point, and the tables that let a pixel leap many iterations at
// once. It knows the plane and its precision, but no pixel, sheet or colour.
//
// Methods: perturbation about a reference orbit (K. I. Martin 2013), bilinear
// approximation with merged radii, ball-period detection and Newton's method
// for nuclei, all published.
package orbit
