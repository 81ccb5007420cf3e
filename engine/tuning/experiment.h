// The critical gain as it is found on the floor: push the vehicle a little off a straight, see whether the
// swing grows or dies out, and close in on the gain between the two by bisection.
//
// A gain is first raised from small by a factor of 1.5 until the swing grows; bisection then halves the
// gap. A swing that ends well above the amplitude asked for has grown and one that ends well below it has
// died out, even if it goes on there: with rounding a small one never ends. The push is matched so that the
// swing keeps the amplitude asked for, because the gain that is found belongs to an amplitude: sensors see
// less of a swing larger than the edge under their spots, rounding hides a swing smaller than a step, and
// noise moves the vehicle on its own.
//
// Nothing of the theory of the loop goes into the figures but the places where the error is 0 and at what
// amplitude to try, so the two can be held against one another.
#pragma once

#include <optional>
#include <string>

#include "engine/tuning/straight.h"

namespace lw {

/// Which gain is sought: steer = kp e alone, or the I gain beside a P gain that stays.
enum class Sought { kp, ki };

struct ExperimentSetting {
  Sought sought = Sought::kp;
  double kp = 0.0;  // of Sought::ki, steer per unit of error
  /// m, of the guide point's swing. 0 = small_amplitude(), less where that would take commands to their
  /// limits.
  double amplitude = 0.0;
  int draws = 1;            // runs with different noise and jitter, over which the growth is taken as a mean
  double tolerance = 1e-4;  // share of the gain to which bisection goes on
  /// An experiment that begins where another ended, both given or both 0: a gain to search around, and the
  /// push (m) that leaves a swing of the amplitude.
  double near = 0.0, push = 0.0;
};

struct CriticalFound {
  std::optional<double> gain;  // per loop; steer per unit of error
  double period = 0.0;         // s, of the swing there
  double wanted = 0.0;         // m, amplitude that was aimed at
  double small = 0.0;          // m, small_amplitude(), above `wanted` where commands would reach their limits
  double push = 0.0;           // m, that left it
  double amplitude = 0.0;      // m, of the guide point's swing there
  double error_amplitude = 0.0;  // of the error: fraction of full scale, mm for a bar
  double steer_amplitude = 0.0;  // fraction of full command
  double limited = 0.0;          // share of loops, as SwingRow
  double scatter =
      0.0;             // standard deviation of the gain from draw to draw, share of the gain; 0 for one draw
  int trials = 0;      // swings driven
  std::string reason;  // in words, when there is no gain
};

CriticalFound critical_by_experiment(const Straight& straight, const ExperimentSetting& setting);

}  // namespace lw
