#include "engine/tuning/kinds.h"

#include "engine/theory/margins.h"

namespace lw {

Controller of_kind(Controller controller, Kind kind) {
  if (!has_integral(kind)) controller.ki = 0.0;
  if (!has_derivative(kind)) controller.kd = 0.0;
  return controller;
}

bool covers(const Controller& controller, Kind kind) {
  return (!has_integral(kind) || controller.ki != 0.0) && (!has_derivative(kind) || controller.kd != 0.0);
}

Controller with_loop_gains(Controller controller, const LoopGains& gains, double period) {
  const bool per_second = controller.gains == GainUnit::per_second;
  controller.kp = gains.kp;
  controller.ki = per_second ? gains.ki / period : gains.ki;
  controller.kd = per_second ? gains.kd * period : gains.kd;
  return controller;
}

Result<Controller> retuned(const Scenario& scenario, Kind kind, double base_pct) {
  Scenario at = scenario;
  at.controller.base_pct = base_pct;
  Result<SampledLoop> loop = linearise(at);
  if (!loop) return loop.error();
  const Critical alone = critical(*loop);
  if (!alone.gain) return Error{"", "no critical gain to set gains from", alone.reason};

  LoopGains& gains = loop->gains;
  const double ultimate = *alone.gain, swing = *alone.period;
  gains = {ultimate / (has_derivative(kind) ? 2.2 : has_integral(kind) ? 3.2 : 2.0), 0.0, 0.0};
  if (has_integral(kind)) gains.ki = gains.kp * loop->period / (2.2 * swing);
  if (has_derivative(kind)) gains.kd = gains.kp * swing / 6.3 / loop->period;
  if (!margins(*loop).stable)
    return Error{"", "gains set from the critical gain", "the loop on the straight is unstable with them"};
  return with_loop_gains(at.controller, gains, loop->period);
}

}  // namespace lw
