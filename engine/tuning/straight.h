// A straight without an end to try loops on, as on the floor but in the drive's own kernel.
//
// The course is a straight with the scenario's line width along x. Its raster looks the same everywhere along
// it, so a vehicle that has gone a stretch is set back by that stretch, a whole number of raster cells, and a
// short floor serves a swing of any length. The vehicle starts at its base speed, wheels and commands
// settled, so that no start of the motors mixes with the swing. Unequal wheels get the steady steer that
// makes them go straight, put in as an I that has settled; the swing is then around the place where the error
// is 0, which is where the theory of the loop takes its slope.
//
// Left out of the scenario: its course, texture and light of the floor, where the drive starts. The rest
// counts, and what an experiment wants without it takes out of the scenario first (effects.h).
//
// Sensors that rest on the border of two raster cells see, in swings smaller than a cell, the step between
// the two fits as slope. The straight is laid so that they rest as near the middles of cells as they can.
#pragma once

#include <cstdint>
#include <functional>
#include <memory>
#include <vector>

#include "engine/drive/kernel.h"
#include "engine/drive/plan.h"
#include "engine/theory/loop.h"

namespace lw {

struct Straight {
  Plan plan;
  SampledLoop loop;         // the linear loop of the same scenario
  double trim = 0.0;        // steer (fraction of full command) that makes the wheels go straight
  double middle = 0.0;      // m, y of the line
  double start_x = 0.0;     // m, where the axle begins
  double stretch = 0.0;     // m, after which it is set back
  double half_width = 0.0;  // m, of the line
  double spot_radius = 0.0, outermost = 0.0;  // m, of the sensors
};

/// Lays the straight. `ground` may be that of another straight whose scenario differs in nothing but gains,
/// rounding, noise, jitter, easing. Errors: those of linearise and make_plan.
Result<Straight> make_straight(const Scenario& scenario, std::shared_ptr<const Ground> ground = nullptr);

/// One loop period of a swing, at the time the sensors were read.
struct SwingRow {
  double t = 0.0;          // s
  double deviation = 0.0;  // m, from where the error is 0; left positive
  double error = 0.0;      // as the controller is given it: fraction of full scale, mm for a bar
  double steer = 0.0;      // fraction of full command, without the trim
  bool limited = false;    // steer or a wheel command at its limit, or a wheel stopped by its dead band
};

/// What a swing is made of.
struct SwingSetting {
  LoopGains gains;         // per loop
  double offset = 0.0;     // m, of the axle, at the start
  std::uint64_t draw = 0;  // number of the noise and jitter draws
  /// When given, steer is what this returns for the error, and the gains are not used.
  std::function<double(double error)> steer;
};

/// Drives until `go_on` returns false; it is called once a loop period, after the row is added. Ends as well
/// after `most_rows`.
std::vector<SwingRow> swing(const Straight& straight, const SwingSetting& setting, std::size_t most_rows,
                            const std::function<bool(const std::vector<SwingRow>&)>& go_on);

/// What the sensors make of a swing of amplitude a (m) around rest on the floor's raster, without rounding:
/// the slope, per m, that a sine of this size meets on average,
///   N(a) = 1 / (pi a) integral over a turn of -e(rest + a sin u) sin u du,
/// the describing function (Gelb and Vander Velde 1968); it tends to the slope at rest as a falls to 0.
double swing_slope(const Straight& straight, double amplitude);

/// m: a quarter of the spot's radius, more where the edges lie in the blind space between two spots of a bar.
double small_amplitude(const Straight& straight);

}  // namespace lw
