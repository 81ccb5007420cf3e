// The floor's texture: brightness that wanders from place to place.
//
// A random field of mean 0 and standard deviation 1 at every point. A square lattice carries independent
// standard normal numbers, one a lattice point, drawn by seed and lattice index alone (so a floor grows
// without changing). They are joined by cubic B-splines, whose weights at each point are scaled to a sum of
// squares of 1. The autocorrelation of such a field is the seventh-order B-spline, close to a Gaussian bell
// and nearly the same in every direction; the lattice is spaced so that it falls to 1/e at the correlation
// length.
//
// The field is what the sensor sees, after its spot has averaged. A spot cannot show what is finer than
// itself: lengths below half its radius are taken as half its radius.
#pragma once

#include <cstdint>
#include <vector>

#include "engine/course/floor.h"

namespace lw {

struct Texture {
  double amount = 0.0;   // standard deviation of brightness; 0 = none
  double spacing = 1.0;  // m, of the lattice
  std::uint64_t seed = 1;
};

/// The texture of a floor seen with a spot of the given radius (m).
Texture texture_of(const FloorLook& look, double spot_radius);

/// Adds the texture to a tile of cells whose low corner is (x, y), m.
void add_texture(const Texture& texture, double x, double y, double pitch, Cell* tile);

}  // namespace lw
