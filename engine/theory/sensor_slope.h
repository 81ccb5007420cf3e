// What the error does as the vehicle moves sideways over a straight line: the sensors' part of the loop.
//
// A spot of radius r at distance x from the middle of a line of half-width h is covered by it to the share
//   S((h - x) / r) - S((-h - x) / r),   S(z) the share of a unit disc on the low side of a chord at z,
// whose slope is the length of that chord: S'(z) = 2 sqrt(1 - z^2) / pi inside the disc, 0 beyond. Brightness
// F is one minus the share, so
//   dF/dx = 2 / (pi r) (sqrt(1 - ((h - x) / r)^2) - sqrt(1 - ((h + x) / r)^2)),
// and the schemes (engine/vehicle/sensors.h) are differentiated by the chain rule, gains, contrast and the
// limits 0 and 1 of a reading included. The heading is small, noise, rounding and light gradient are left
// out.
//
// Frame: m; left positive. The error is a fraction of full scale, mm for a bar.
#pragma once

#include <optional>

#include "engine/numeric/result.h"
#include "engine/vehicle/sensors.h"

namespace lw {

/// Sensors above a straight line.
struct StraightSensors {
  Optics<double> optics;
  SensorWiring wiring;
  double half_width = 0.01;    // m, > 0, of the line
  double spot_radius = 0.004;  // m, > 0
};

/// The error at a deviation of the guide point (m). Nothing where a bar sees no line.
std::optional<double> straight_error(const StraightSensors& sensors, double deviation);

/// d error / d deviation, per m; negative where the loop steers back under a positive gain. 0 where a bar
/// sees no line.
double straight_slope(const StraightSensors& sensors, double deviation);

/// Where a straight is held when nothing disturbs, and how steep the error is there.
struct SensorPoint {
  double deviation = 0.0;  // m, where the error is 0, nearest to the middle of the line
  double slope = 0.0;      // 1/m or mm/m, > 0: error = -slope (deviation - deviation at rest)
  double exact = 0.0;      // the derivative right there, which `slope` is unless `averaged`
  bool averaged = false;   // a bar whose edges lie between two spots: the mean over one sensor spacing
};

/// Finds it within `reach` (m) of the line. Errors: no deviation within reach gives an error of 0 with the
/// sign that steers back; or the error does not change there, because no spot is over an edge.
Result<SensorPoint> sensor_point(const StraightSensors& sensors, double reach);

}  // namespace lw
