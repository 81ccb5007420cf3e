// Directions in the plane, from degrees as people write them.
//
// A quarter turn is exact: 90 degrees gives (0, 1) and not (6e-17, 1), so that an oval of whole and half
// turns closes to the last bit and its straights stay straight.
#pragma once

#include <cmath>

#include "engine/numeric/functions.h"

namespace lw {

inline constexpr double rad_per_deg = pi / 180.0;

/// A direction as a unit vector (cosine, sine of its heading); also a plain displacement, in m.
struct Vector {
  double x = 0.0, y = 0.0;
};

inline Vector operator+(Vector a, Vector b) { return {a.x + b.x, a.y + b.y}; }
inline Vector operator-(Vector a, Vector b) { return {a.x - b.x, a.y - b.y}; }
inline Vector operator*(double f, Vector a) { return {f * a.x, f * a.y}; }
inline double dot(Vector a, Vector b) { return a.x * b.x + a.y * b.y; }
/// Positive where b points to the left of a.
inline double cross(Vector a, Vector b) { return a.x * b.y - a.y * b.x; }
inline double length_of(Vector a) { return std::sqrt(dot(a, a)); }
/// Turned left by a quarter: the normal of a tangent.
inline Vector left_of(Vector a) { return {-a.y, a.x}; }
/// a turned left by the angle of the unit vector b.
inline Vector turned(Vector a, Vector b) { return {a.x * b.x - a.y * b.y, a.x * b.y + a.y * b.x}; }

/// Unit vector at `angle` (rad) counter-clockwise from x.
inline Vector direction_at(double angle) {
  const SineCosine<double> at = sine_cosine(angle);
  return {at.cosine, at.sine};
}

/// Unit vector at `degrees` counter-clockwise from x. Finite input; exact at multiples of 90.
inline Vector direction_of(double degrees) {
  const double quarters = std::rint(degrees / 90.0);
  const double rest = degrees - 90.0 * quarters;
  const double quadrant = quarters - 4.0 * std::floor(quarters / 4.0);
  Vector v{1.0, 0.0};
  if (rest != 0.0) v = direction_at(rest * rad_per_deg);
  if (quadrant == 1.0) return left_of(v);
  if (quadrant == 2.0) return {-v.x, -v.y};
  if (quadrant == 3.0) return {v.y, -v.x};
  return v;
}

/// Angle from a to b, in (-pi, pi], left positive.
inline double angle_between(Vector a, Vector b) { return direction_angle(dot(a, b), cross(a, b)); }

}  // namespace lw
