// How much of the sensor's spot a line covers, as a surface over one cell of the raster.
//
// Take the spot as a disc of radius r around the origin and an edge across it at x, everything to the left of
// x dark. Its dark share is S(x), a circular segment: S = 1/2 + (x c + r^2 asin(x / r)) / (pi r^2), c =
// sqrt(r^2 - x^2). An edge of curvature K departs from its tangent by K y^2 / 2, which adds K c^3 / (3 pi
// r^2) in first order (the next term is of the order (K r)^2 / 50). A line of half-width h whose middle is at
// deviation d is the difference of its two edges, at h - d and -h - d, with curvatures k / (1 - k h) and k /
// (1 + k h).
//
// Over a cell of side p all this is a function of d, nearly linear in place. The table holds, for the edge
// function f, its least-squares line over a width p (value and slope) and its mean second derivative; so a
// cell costs one look-up an edge instead of a quadrature.
#pragma once

#include <vector>

#include "engine/course/floor.h"

namespace lw {

/// Where a cell's middle lies from the nearest place of the line.
struct SpotPlace {
  double deviation = 0.0;                   // m, left positive
  double tangent_x = 1.0, tangent_y = 0.0;  // unit, of the centreline at the foot
  double curvature = 0.0;                   // 1/m, there
};

class SpotTable {
 public:
  /// All in m; spot_radius > 0, pitch > 0, half_width > 0.
  SpotTable(double spot_radius, double half_width, double pitch);

  /// The cell whose middle is at `place`. Good to 1e-3 up to curvature_most().
  Cell cell_at(const SpotPlace& place) const;

  /// The most curvature (1/m) of a centreline for which the closed form holds: spot radius over radius of
  /// curvature of the sharper edge is 0.3 there.
  double curvature_most() const { return 0.3 / (radius_ + 0.3 * half_width_); }

 private:
  struct Entry {
    double share, slope, second;  // of the straight edge: 1, 1/m, 1/m^2
    double lens, lens_slope;      // what a curvature of 1/m adds: m, 1
  };
  struct Edge {
    double share, slope, second;
  };
  Edge edge_at(double x, double curvature) const;

  double radius_, half_width_, pitch_;
  double low_, per_step_, last_ = 0.0;
  std::vector<Entry> table_;
};

/// A cell from its four coefficients, rounded to the unit of the raster and held to its range.
Cell cell_from(double c0, double c1, double c2, double c3);

}  // namespace lw
