#include "engine/tuning/rules.h"

#include "engine/tuning/kinds.h"

namespace lw {

SecondGains gains_by(const Rule& rule, double critical_gain, double critical_period) {
  const double kp = rule.gain * critical_gain;
  const double integral_time = rule.integral * critical_period;
  return {kp, integral_time > 0.0 ? kp / integral_time : 0.0, kp * rule.derivative * critical_period};
}

LoopGains per_loop(const SecondGains& gains, double period) {
  return {gains.kp, gains.ki * period, gains.kd / period};
}

SecondGains per_second(const LoopGains& gains, double period) {
  return {gains.kp, gains.ki / period, gains.kd * period};
}

Scenario with_gains(Scenario scenario, const LoopGains& gains, double filter) {
  scenario.controller = with_loop_gains(scenario.controller, gains, 1e-3 * scenario.loop.period_ms);
  scenario.controller.derivative_filter_ms = 1e3 * filter;
  return scenario;
}

double filter_for(const Scenario& scenario, const LoopGains& gains) {
  const double given = 1e-3 * scenario.controller.derivative_filter_ms;
  if (given > 0.0 || gains.kd == 0.0 || gains.kp <= 0.0) return given;
  return 0.1 * gains.kd * 1e-3 * scenario.loop.period_ms / gains.kp;
}

}  // namespace lw
