#include "engine/tuning/integral.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/words.h"
#include "engine/theory/loop.h"
#include "engine/theory/roots.h"

namespace lw {
namespace {

/// P alone on a section of one curvature, as a function of the guide point's deviation.
class Balance {
 public:
  Balance(const Scenario& scenario, double curvature)
      : train_(drivetrain_of(scenario.vehicle)),
        optics_(optics_of(scenario.sensors, scenario.floor)),
        law_(law_of(scenario.controller, scenario.sensors, scenario.vehicle)),
        wiring_(wiring_of(scenario).sensors),
        curvature_(curvature),
        half_width_(0.5e-3 * scenario.course.line_mm),
        spot_radius_(0.5e-3 * scenario.sensors.spot_mm),
        reach_(1e-3 * scenario.drive.lost_mm) {}

  void set_base(double base) { law_.base = base; }
  double reach() const { return reach_; }
  double step() const { return std::max(spot_radius_ / 16.0, reach_ / 4000.0); }

  /// Turn of the vehicle in excess of the turn that the bend takes, rad/s; the line is held where it falls
  /// through 0 as the deviation grows.
  double excess(double deviation) const {
    const Moving moving = moving_at(error_at(deviation));
    const double radius = axle_radius(deviation);
    return radius > 0.0 ? moving.yaw - moving.speed * turning() / radius
                        : moving.yaw - moving.speed * curvature_;
  }
  Held held_at(double deviation) const {
    const double error = error_at(deviation);
    return {deviation, error, held(law_.kp * error, -law_.steer_limit, law_.steer_limit),
            moving_at(error).speed};
  }

 private:
  struct Moving {
    double speed, yaw;
  };
  double turning() const { return curvature_ > 0.0 ? 1.0 : -1.0; }
  /// Of the axle's circle; 0 on a straight, or where no circle has the guide point there.
  double axle_radius(double deviation) const {
    if (curvature_ == 0.0) return 0.0;
    const double guide = 1.0 / std::fabs(curvature_) - turning() * deviation;
    return guide > optics_.forward ? std::sqrt(guide * guide - optics_.forward * optics_.forward) : 0.0;
  }
  double deviation_of_sensor(int i, double deviation) const {
    const double axle = axle_radius(deviation);
    if (axle <= 0.0) return deviation + optics_.lateral[i];
    const double from_middle = std::hypot(axle - turning() * optics_.lateral[i], optics_.forward);
    return turning() * (1.0 / std::fabs(curvature_) - from_middle);
  }
  double error_at(double deviation) const {
    SensorState<double> state{};
    state.last_side = deviation > 0.0 ? -1.0 : 1.0;  // where a bar saw the line last
    for (int i = 0; i < wiring_.count; ++i) {
      const double covered =
          strip_share_of_disc(deviation_of_sensor(i, deviation), half_width_, spot_radius_);
      state.reading[i] = held(optics_.dark[i] + optics_.contrast[i] * (1.0 - covered), 0.0, 1.0);
    }
    return error_from(optics_, wiring_, state);
  }
  Moving moving_at(double error) const {
    const double steer = held(law_.kp * error, -law_.steer_limit, law_.steer_limit);
    const double base = std::max(0.0, law_.base * (1.0 - law_.ease * std::fabs(error)));
    const WheelTarget<double> target =
        wheel_target(train_, held(base - steer, -1.0, 1.0), held(base + steer, -1.0, 1.0));
    return {axle_speed(train_, target.common, target.difference),
            axle_yaw(train_, target.common, target.difference)};
  }

  Drivetrain<double> train_;
  Optics<double> optics_;
  Law<double> law_;
  SensorWiring wiring_;
  double curvature_, half_width_, spot_radius_, reach_;
};

/// The deviation nearest to `from` at which the line is held.
std::optional<double> held_place(const Balance& balance, double from) {
  const auto excess = [&](double deviation) { return balance.excess(deviation); };
  const auto falls = [&](double low, double high) -> std::optional<double> {
    const double at_low = excess(low), at_high = excess(high);
    if (at_low == 0.0 && at_high < 0.0) return low;
    if (!(at_low > 0.0) || at_high > 0.0) return {};
    return bracketed_root(excess, low, high, 1e-12);
  };
  const double step = balance.step(), reach = balance.reach();
  for (double near = 0.0; near < 2.0 * reach; near += step) {
    const double left = from + near, right = from - near;
    if (left + step <= reach) {
      if (const auto place = falls(left, left + step)) return place;
    }
    if (right - step >= -reach) {
      if (const auto place = falls(right - step, right)) return place;
    }
  }
  return {};
}

/// The largest value of f on the deviations within reach.
template <class Function>
double largest(const Balance& balance, Function&& f) {
  const double step = balance.step(), reach = balance.reach();
  double at = -reach, most = f(at);
  for (double x = -reach + step; x <= reach; x += step) {
    const double value = f(x);
    if (value > most) most = value, at = x;
  }
  const double low = std::max(-reach, at - step), high = std::min(reach, at + step);
  const Minimum fine = bracketed_minimum([&](double x) { return -f(x); }, low, high, 1e-9);
  return std::max(most, -fine.value);
}

/// Whether somewhere the vehicle can turn more than the bend, and somewhere less.
bool holds(const Balance& balance) {
  const double more = largest(balance, [&](double x) { return balance.excess(x); });
  const double less = largest(balance, [&](double x) { return -balance.excess(x); });
  return more > 0.0 && less > 0.0;
}

double straight_rest(const Scenario& scenario) {
  Scenario equal = scenario;  // where the error is 0: equal wheels take no steer
  equal.vehicle.wheel_right_mm = equal.vehicle.wheel_left_mm;
  return held_place(Balance(equal, 0.0), 0.0).value_or(0.0);
}

double speed_at(const Scenario& scenario, double base) {
  const Drivetrain<double> train = drivetrain_of(scenario.vehicle);
  const WheelTarget<double> target = wheel_target(train, base, base);
  return axle_speed(train, target.common, target.difference);
}

double rough_error(const Scenario& scenario, double radius) {
  if (!std::isfinite(radius)) return 0.0;
  return 1e-2 * scenario.controller.base_pct * 1e-3 * scenario.vehicle.track_width_mm /
         (2.0 * radius * scenario.controller.kp);
}

/// Sections alike: the same side, and the same radius to a millimetre.
std::vector<BendFigures> bends_of(const Centreline& line) {
  std::vector<BendFigures> bends;
  for (const CourseSection& section : line.sections) {
    if (section.radius <= 0.0) continue;  // a corner has no steady state
    const bool left = section.turn > 0.0 && std::isfinite(section.radius);
    const double length = section.to - section.from;
    const auto same = [&](const BendFigures& bend) {
      if (!std::isfinite(bend.radius) || !std::isfinite(section.radius)) return bend.radius == section.radius;
      return bend.left == left && std::fabs(bend.radius - section.radius) < 1e-3;
    };
    const auto found = std::find_if(bends.begin(), bends.end(), same);
    if (found != bends.end()) {
      found->length = std::max(found->length, length);
      ++found->count;
      continue;
    }
    BendFigures bend;
    bend.radius = section.radius;
    bend.left = left;
    bend.length = length;
    bend.count = 1;
    bends.push_back(bend);
  }
  std::stable_sort(bends.begin(), bends.end(),
                   [](const BendFigures& a, const BendFigures& b) { return a.radius < b.radius; });
  return bends;
}

void work_out(const Scenario& scenario, const std::optional<double>& time, BendFigures& bend) {
  const double curvature = std::isfinite(bend.radius) ? (bend.left ? 1.0 : -1.0) / bend.radius : 0.0;
  bend.held = held_by_p(scenario, curvature);
  bend.rough_error = rough_error(scenario, bend.radius);
  bend.losing_base = losing_base(scenario, curvature);
  bend.losing_speed = speed_at(scenario, bend.losing_base);
  const double speed = bend.held ? bend.held->speed : speed_at(scenario, 1e-2 * scenario.controller.base_pct);
  bend.duration = speed > 0.0 ? bend.length / speed : HUGE_VAL;
  bend.integral_in_time = time && bend.duration > *time;
}

std::string error_text(const Scenario& scenario, double error) {
  if (scenario.sensors.scheme == Scheme::bar) return readable(error, 3) + " mm";
  return readable(1e2 * error, 3) + " % of full scale";
}

std::string bend_text(const BendFigures& bend) {
  if (!std::isfinite(bend.radius)) return "on the straight";
  return std::string("in the ") + (bend.left ? "left" : "right") + " bend of " +
         readable(1e3 * bend.radius, 4) + " mm";
}

std::string kept_text(const Scenario& scenario, const IntegralFigures& found) {
  if (found.bends.empty()) return "The course has neither straights nor bends, and no steady error. ";
  const BendFigures& tightest = found.bends.front();
  const BendFigures& last = found.bends.back();
  std::string text;
  if (std::isfinite(tightest.radius)) {
    text = tightest.held ? "P alone keeps an error of " + error_text(scenario, tightest.held->error) + " " +
                               bend_text(tightest) + " (" + readable(1e3 * tightest.held->deviation, 3) +
                               " mm beside the line)"
                         : "P alone cannot hold the line " + bend_text(tightest) + " at this base";
    text += tightest.losing_base < 1.0
                ? " and must lose it above a base of " + readable(1e2 * tightest.losing_base, 3) + " %, " +
                      readable(1e3 * tightest.losing_speed, 3) + " mm/s, if it is long enough. "
            : tightest.held ? " and need not lose it at any base. "
                            : ". ";
  }
  const bool uneven = scenario.vehicle.wheel_left_mm != scenario.vehicle.wheel_right_mm;
  if (uneven && !std::isfinite(last.radius))
    text += last.held
                ? "Unequal wheels cost it " + error_text(scenario, last.held->error) + " on the straight. "
                : "Unequal wheels are more than it can hold on the straight. ";
  if (text.empty()) text = "P alone keeps no error on the straight. ";
  return text;
}

std::string removed_text(const IntegralFigures& found) {
  if (found.tried || !found.time)
    return "The scenario has no I. One of Ki " + readable(found.tried_ki, 3) +
           " per loop would take the error away in about " +
           readable(1e3 * found.kp * found.period / found.tried_ki, 3) + " ms";
  std::string text = "I takes the error away in about " + readable(1e3 * *found.time, 3) + " ms";
  int bends = 0, in_time = 0;
  for (const BendFigures& bend : found.bends) {
    if (!std::isfinite(bend.radius)) continue;
    ++bends;
    in_time += bend.integral_in_time ? 1 : 0;
  }
  if (bends > 0)
    text += in_time == bends ? ", less than any bend of the course takes"
            : in_time == 0   ? ", longer than any bend of the course takes: it hardly helps there"
                             : ", which some bends of the course are too short for";
  return text;
}

std::string cost_text(const IntegralFigures& found) {
  if (!found.without.stable) return "; the loop is unstable even without it.";
  if (!found.with.stable) return ", but makes the loop unstable.";
  const auto margin = [](const Margins& m) {
    return (m.gain_high ? readable(decibels(*m.gain_high), 3) + " dB of gain, " : std::string()) +
           (m.phase ? readable(*m.phase * 57.29577951308232, 3) + " deg of phase, " : std::string()) +
           "sensitivity peak " + readable(m.sensitivity_peak.value_or(1.0), 3);
  };
  return ". It costs margin: " + margin(found.with) + " with it; " + margin(found.without) + " without.";
}

}  // namespace

std::optional<Held> held_by_p(const Scenario& scenario, double curvature) {
  const Balance balance(scenario, curvature);
  const auto place = held_place(balance, straight_rest(scenario));
  if (!place) return {};
  return balance.held_at(*place);
}

double losing_base(const Scenario& scenario, double curvature) {
  const bool even = scenario.vehicle.wheel_left_mm == scenario.vehicle.wheel_right_mm;
  if (curvature == 0.0 && even) return 1.0;
  Balance balance(scenario, curvature);
  const double dead = 1e-2 * scenario.vehicle.dead_band_pct;
  balance.set_base(1.0);
  if (holds(balance)) return 1.0;
  double low = dead, high = 1.0;
  for (int i = 0; i < 40; ++i) {
    const double middle = 0.5 * (low + high);
    balance.set_base(middle);
    (holds(balance) ? low : high) = middle;
  }
  return low > dead ? 0.5 * (low + high) : 0.0;
}

Result<IntegralFigures> explain_integral(const Scenario& scenario, std::shared_ptr<const Ground> ground) {
  Result<SampledLoop> loop = linearise(scenario);
  if (!loop) return loop.error();
  if (!(loop->gains.kp > 0.0))
    return Error{"controller.kp", readable(scenario.controller.kp, 6), "what P keeps needs a P gain above 0"};
  const Result<Plan> plan = make_plan(scenario, std::move(ground));
  if (!plan) return plan.error();

  IntegralFigures found;
  found.kp = loop->gains.kp;
  found.ki = loop->gains.ki;
  found.period = loop->period;
  if (found.ki > 0.0) found.time = found.kp * found.period / found.ki;
  found.bends = bends_of(plan->ground->line);
  for (BendFigures& bend : found.bends) work_out(scenario, found.time, bend);

  LoopGains gains = loop->gains;
  found.tried = gains.ki == 0.0;
  if (found.tried) {
    const Critical alone = critical(*loop);
    gains.ki = gains.kp * loop->period / (2.2 * alone.period.value_or(10.0 * speed_limit(*loop).late));
  }
  found.tried_ki = gains.ki;
  found.with = margins(with_gains(*loop, gains));
  gains.ki = 0.0;
  found.without = margins(with_gains(*loop, gains));
  found.words = kept_text(scenario, found) + removed_text(found) + cost_text(found);
  return found;
}

}  // namespace lw
