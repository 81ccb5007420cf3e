// The curve through drawn points: a cubic spline over the length of its chords.
//
// Each coordinate is a cubic between neighbouring points, with first and second derivative continuous at the
// points, so that curvature is continuous too; periodic on a closed course, with free (natural) ends
// otherwise (de Boor 1978, A practical guide to splines, chapters IV and XVI). The parameter is the chord
// length (Ahlberg, Nilson and Walsh 1967), which follows unevenly spaced points of a smooth line with an
// error of the fourth order in their distance and wavers least on strokes that are dense in the bends and
// sparse between. Points marked as corners cut the course into parts that are smooth each on its own.
#pragma once

#include <array>
#include <vector>

#include "engine/course/angles.h"

namespace lw {

/// One cubic from a point to the next: place = sum of part[k] t^k for t in [0, span]; m.
struct Cubic {
  std::array<Vector, 4> part;
  double span = 0.0;

  Vector place(double t) const { return part[0] + t * (part[1] + t * (part[2] + t * part[3])); }
  Vector first(double t) const { return part[1] + t * (2.0 * part[2] + (3.0 * t) * part[3]); }
  Vector second(double t) const { return 2.0 * part[2] + (6.0 * t) * part[3]; }
};

/// Cubics through the points in order (m, no two neighbours in one place): one fewer than points with free
/// ends, or as many as points when periodic, the last leading back to the first. At least 2 points; 3 when
/// periodic.
std::vector<Cubic> spline_through(const std::vector<Vector>& points, bool periodic);

/// Arc length of a cubic, m.
double length_of(const Cubic& cubic);

}  // namespace lw
