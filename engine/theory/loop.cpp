#include "engine/theory/loop.h"

#include <cmath>

#include "engine/drive/plan.h"
#include "engine/numeric/words.h"
#include "engine/scenario/validate.h"
#include "engine/theory/notes.h"
#include "engine/theory/sensor_slope.h"

namespace lw {
namespace {

using Complex = std::complex<double>;

/// The vehicle's matrix exponential over a time h, by its entries that are neither 0 nor 1:
///   y     <- y + v h theta + v bend w + v push_y u
///   theta <- theta + swing w + push_theta u
///   w     <- (1 - settles) w + settles u          (w in units of K u)
struct Exponential {
  double settles, swing, bend, push_theta, push_y;
};

/// With r = h / t these are h^n times the functions p1 = (1 - e^-r) / r, p2 = (1 - p1) / r, p3 = (1/2 - p2) /
/// r, by their common series for small r, where the subtractions would lose digits.
Exponential exponential_over(double h, double turn_time) {
  if (turn_time <= 0.0) return {1.0, 0.0, 0.0, h, 0.5 * h * h};
  const double r = h / turn_time;
  double p1 = -std::expm1(-r) / r, p2 = (1.0 - p1) / r, p3 = (0.5 - p2) / r;
  if (r < 1.0) {
    double term = 1.0 / 6.0;
    p3 = term;
    for (int n = 4; n < 24; ++n) p3 += term *= -r / n;
    p2 = 0.5 - r * p3;
    p1 = 1.0 - r * p2;
  }
  return {r * p1, h * p1, h * h * p2, h * r * p2, h * h * r * p3};
}

/// What a unit of steer acting for a while leaves in the state.
struct Push {
  double y, theta, w;
};

Push push_over(const SampledLoop& loop, double h) {
  const Exponential e = exponential_over(h, loop.turn_time);
  const double k = loop.yaw_gain;
  return {k * loop.speed * e.push_y, k * e.push_theta, k * e.settles};
}

Push carried_on(const SampledLoop& loop, Push push, double h) {
  const Exponential e = exponential_over(h, loop.turn_time);
  return {push.y + loop.speed * (h * push.theta + e.bend * push.w), push.theta + e.swing * push.w,
          push.w * (1.0 - e.settles)};
}

/// [1 forward 0] adj(zI - Phi) push, in s = z - 1. Without a turning lag w is no state, and a factor falls
/// out.
void numerator_of(const SampledLoop& loop, Push push, double n[3]) {
  const double travel = loop.speed * loop.period, guide = push.y + loop.forward * push.theta;
  if (loop.turn_time <= 0.0) {
    n[0] = travel * push.theta;
    n[1] = guide;
    n[2] = 0.0;
    return;
  }
  const Exponential e = exponential_over(loop.period, loop.turn_time);
  const double turned = e.settles * push.theta + e.swing * push.w;
  n[0] = travel * turned;
  n[1] = e.settles * push.y + travel * push.theta + loop.speed * e.bend * push.w + loop.forward * turned;
  n[2] = guide;
}

/// The extra age of a reading in the mean over loops. Readings are refreshed every n or n + 1 loops, n the
/// whole part of refresh / period; over n loops the ages are 0 to n - 1 periods.
double mean_age(double refresh, double period) {
  const double ratio = refresh / period;
  if (ratio <= 1.0) return 0.0;
  const double n = std::floor(ratio + 1e-9), more = std::max(0.0, ratio - n);
  const double mean_square = (1.0 - more) * n * n + more * (n + 1.0) * (n + 1.0);
  return 0.5 * period * (mean_square / ratio - 1.0);
}

/// z - 1 without the cancellation at low frequency.
Complex shift_at(double angle) {
  return Complex(0.0, 2.0 * std::sin(0.5 * angle)) * std::polar(1.0, 0.5 * angle);
}

/// Going straight needs equal rim speeds; on unequal wheels that takes a steady difference, and leaves the
/// harmonic mean of the radii. speed_per_common is half the radii's sum, speed_per_difference half of right
/// minus left.
double straight_speed(const Drivetrain<double>& train) {
  const double mean = train.speed_per_common, half = train.speed_per_difference;
  return (mean * mean - half * half) / mean * train.speed_past_dead_band;
}

LoopGains gains_of(const Controller& controller, double period) {
  if (controller.gains == GainUnit::per_loop) return {controller.kp, controller.ki, controller.kd};
  return {controller.kp, controller.ki * period, controller.kd / period};
}

Result<SensorPoint> point_of(const Scenario& scenario, const Optics<double>& optics) {
  const StraightSensors sensors{optics, wiring_of(scenario).sensors, 0.5e-3 * scenario.course.line_mm,
                                0.5e-3 * scenario.sensors.spot_mm};
  return sensor_point(sensors, 1e-3 * scenario.drive.lost_mm);
}

}  // namespace

Result<SampledLoop> linearise(const Scenario& scenario) {
  if (const auto error = validate(scenario)) return *error;
  const Drivetrain<double> train = drivetrain_of(scenario.vehicle);
  const Optics<double> optics = optics_of(scenario.sensors, scenario.floor);
  const double base = 1e-2 * scenario.controller.base_pct;
  if (base <= train.dead_band)
    return Error{"controller.base_pct", significant(scenario.controller.base_pct, 6),
                 "not beyond the motors' dead band: the vehicle stands still, and there is no loop"};
  if (scenario.controller.steer_limit_pct <= 0.0)
    return Error{"controller.steer_limit_pct", "0", "nothing steers, and there is no loop"};
  const Result<SensorPoint> point = point_of(scenario, optics);
  if (!point) return point.error();

  SampledLoop loop;
  loop.turn_time = train.turn_time;
  loop.forward = optics.forward;
  loop.period = 1e-3 * scenario.loop.period_ms;
  loop.delay = 1e-3 * scenario.vehicle.command_delay_ms + mean_age(optics.refresh, loop.period);
  loop.slope = point->slope;
  loop.rest = point->deviation;
  loop.sensor_lag = optics.lag;
  loop.filter = 1e-3 * scenario.controller.derivative_filter_ms;
  loop.gains = gains_of(scenario.controller, loop.period);
  loop.dead_band = train.dead_band;
  loop.speed_past_dead = straight_speed(train);
  loop.yaw_unlimited = train.yaw_per_difference * train.speed_past_dead_band;
  set_base(loop, base);
  loop.notes = notes_of(scenario, loop, *point);
  return loop;
}

void sample(SampledLoop& loop) {
  SampledPlant& plant = loop.plant;
  const double periods = loop.delay / loop.period;
  plant.waiting = static_cast<int>(std::floor(periods + 1e-9));
  const double part = loop.period * std::max(0.0, periods - plant.waiting);
  plant.split = part > 1e-9 * loop.period;
  plant.lags = loop.turn_time > 0.0;
  plant.settles = exponential_over(loop.period, loop.turn_time).settles;
  const double rest = loop.period - (plant.split ? part : 0.0);
  numerator_of(loop, push_over(loop, rest), plant.n0);
  plant.n1[0] = plant.n1[1] = plant.n1[2] = 0.0;
  if (plant.split) numerator_of(loop, carried_on(loop, push_over(loop, part), rest), plant.n1);
}

void set_base(SampledLoop& loop, double base) {
  loop.base = base;
  loop.speed = loop.speed_past_dead * std::max(0.0, base - loop.dead_band);
  loop.yaw_gain = base < 1.0 ? loop.yaw_unlimited : 0.5 * loop.yaw_unlimited;
  sample(loop);
}

SampledLoop with_gains(SampledLoop loop, LoopGains gains) {
  loop.gains = gains;
  return loop;
}

Complex integral_response(const SampledLoop& loop, double omega) {
  const Complex s = shift_at(omega * loop.period);
  return (1.0 + s) / s;
}

Complex derivative_response(const SampledLoop& loop, double omega) {
  const Complex s = shift_at(omega * loop.period);
  const double share = loop.period / (loop.filter + loop.period);
  return share * s / (s + share);
}

Complex law_response(const SampledLoop& loop, double omega) {
  Complex law = loop.gains.kp;
  if (loop.gains.ki != 0.0) law += loop.gains.ki * integral_response(loop, omega);
  if (loop.gains.kd != 0.0) law += loop.gains.kd * derivative_response(loop, omega);
  return law;
}

Complex path_response(const SampledLoop& loop, double omega) {
  const SampledPlant& plant = loop.plant;
  const double angle = omega * loop.period;
  const Complex s = shift_at(angle), z = 1.0 + s;
  Complex above = plant.n0[0] + s * (plant.n0[1] + s * plant.n0[2]);
  if (plant.split) above += (plant.n1[0] + s * (plant.n1[1] + s * plant.n1[2])) / z;
  Complex below = s * s;
  if (plant.lags) below *= s + plant.settles;
  Complex path = loop.slope * above / below * std::polar(1.0, -angle * plant.waiting);
  if (loop.sensor_lag > 0.0) {
    const double share = loop.period / (loop.sensor_lag + loop.period);
    path *= share * z / (s + share);
  }
  return path;
}

Complex response(const SampledLoop& loop, double omega) {
  return law_response(loop, omega) * path_response(loop, omega);
}

SpeedLimit speed_limit(const SampledLoop& loop) {
  SpeedLimit limit;
  limit.lead = loop.forward / loop.speed;
  limit.late = loop.turn_time + loop.delay + 0.5 * loop.period + loop.sensor_lag;
  limit.speed = loop.forward / limit.late;
  limit.base = loop.dead_band + limit.speed / loop.speed_past_dead;
  return limit;
}

std::string in_words(const SpeedLimit& limit, const SampledLoop& loop) {
  const auto ms = [](double seconds) { return significant(1e3 * seconds, 4) + " ms"; };
  const std::string offset = loop.forward > 0.0
                                 ? "The sensors lie " + significant(1e3 * loop.forward, 4) +
                                       " mm ahead of the axle, which acts as a derivative of " +
                                       ms(limit.lead) + " (offset over speed) without any noise"
                                 : "The sensors lie above the axle and give the loop no lead";
  const std::string against =
      "; turning lag, delay, half a period and sensor lag come " + ms(limit.late) + " late. ";
  const bool stable = limit.lead > limit.late;
  std::string verdict =
      stable ? "P alone is stable at small gains up to " : "P alone is stable at no small gain";
  if (stable) {
    verdict += significant(1e3 * limit.speed, 4) + " mm/s";
    verdict += limit.base > 1.0 ? ", faster than this vehicle goes."
                                : ", a base of " + significant(1e2 * limit.base, 3) + " %.";
  } else if (limit.speed > 0.0) {
    verdict += " above " + significant(1e3 * limit.speed, 4) + " mm/s, a base of " +
               significant(1e2 * limit.base, 3) + " %.";
  } else {
    verdict += " at any speed.";
  }
  return offset + against + verdict;
}

}  // namespace lw
