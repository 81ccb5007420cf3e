// The case for or against D, for the vehicle, readings and loop at hand.
//
// D damps: it adds phase where the loop is about to swing. It also passes on the noise and the rounding of
// the readings, the more the faster the loop runs and the less it is filtered. And a vehicle whose sensors
// lie ahead of its axle has a derivative already, of forward / speed seconds and free of noise
// (theory/loop.h). So D is weighed here: over a grid of its strength Td = Kd T / Kp and its filter, with P
// and I as the scenario has them,
//   gained   sensitivity peak and least damping of the straight loop, from the theory;
//   paid     the noise on the steer, in the steady state (derivative_noise.h).
// What may be paid: three standard deviations of the steer's noise within a tenth of the steer that is left
// before a wheel command is at its limit. What is worth having: a loop whose sensitivity peak is above 1.4,
// brought down by a tenth or more, or with a least damping below 0.5 raised by 0.1, or made stable at all.
// Peaks of 1.4 and 2.0 are the usual careful and bold design values (Astrom and Hagglund 2006, "Advanced PID
// Control"); the other figures are judgement. All are settings.
//
// The best choice is the least noisy one that may be paid for and brings the peak down to 1.4; where none
// does, the least noisy one within 5 % of the lowest peak. Then the course is driven with and without it. The
// drive contradicts where it no longer finishes, where both the largest and the root mean square deviation
// are worse, or where neither is a twentieth better while steer is half as noisy again or changes sides
// twice as often. A deviation within 2 % of another counts as the same.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "engine/drive/drive.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"
#include "engine/tuning/derivative_noise.h"

namespace lw {

struct DerivativeSettings {
  double noise_share = 0.1;   // of the steer that is left, for three standard deviations
  double peak_enough = 1.4;   // a loop with a lower peak has nothing to gain
  double peak_gain = 0.1;     // the share by which the sensitivity peak has to fall
  double damping_gain = 0.1;  // by which a least damping below damping_enough has to rise
  double damping_enough = 0.5;
  double peak_slack = 0.05;  // peaks within this share of the lowest count as equal
  int strengths = 16;        // of Td, geometric from a twentieth to five times what comes late
  int filters = 6;           // none, then 1, 2, 4, ... periods
};

/// One choice of D, and what the straight loop makes of it.
struct DerivativePoint {
  double kd = 0.0;      // per loop
  double filter = 0.0;  // s
  double time = 0.0;    // s, Td = kd T / kp
  bool stable = false;
  // Of a stable loop only:
  double peak = 0.0;                // sensitivity peak
  double damping = 0.0;             // the least of all poles that swing; 1 where none does
  std::optional<double> gain_high;  // factor up to which the gain may grow
  LoopNoise noise;
};

enum class DerivativeVerdict {
  pays,
  nothing_gained,  // damped well enough without, or no D damps better
  too_noisy,       // what D gains costs more noise than may be
  drive_is_worse,  // gained on the straight, lost on the course
};

struct DerivativeCase {
  DerivativeVerdict verdict = DerivativeVerdict::nothing_gained;
  bool pays() const { return verdict == DerivativeVerdict::pays; }
  DerivativePoint without;                  // P and I alone
  bool enough = false;                      // its peak is low enough as it is
  std::vector<DerivativePoint> grid;        // strengths x filters, row by row of strength
  std::optional<DerivativePoint> best;      // among those that may be paid for; nothing where there is none
  std::optional<DerivativePoint> sharpest;  // lowest peak of all, whatever its noise
  double kp = 0.0, ki = 0.0;                // per loop, as the scenario has them
  double period = 0.0;                      // s
  double lead = 0.0, late = 0.0;  // s: of the forward offset; of lag, delay, half a period and sensor lag
  double noise_allowed = 0.0;     // standard deviation of steer
  Summary drive_without,
      drive_with;     // of the whole course; with the best, or the sharpest where none is best
  std::string words;  // the verdict with its numbers
};

/// Weighs D. `ground` as in make_plan(). Errors: those of linearise() and make_plan(); a kp that is not above
/// 0.
Result<DerivativeCase> weigh_derivative(const Scenario& scenario, const DerivativeSettings& settings = {},
                                        std::shared_ptr<const Ground> ground = nullptr);

/// The scenario's controller with this D.
Controller with_derivative(const Scenario& scenario, const DerivativePoint& point);

}  // namespace lw
