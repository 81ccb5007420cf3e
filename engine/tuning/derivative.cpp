#include "engine/tuning/derivative.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/words.h"
#include "engine/theory/margins.h"
#include "engine/theory/poles.h"

namespace lw {
namespace {

constexpr double weakest = 0.05, strongest = 5.0;  // Td over what comes late
// Judgement: changes from without D to with it.
constexpr double unseen = 0.02;         // of a deviation: none
constexpr double worth = 0.05;          // of a deviation: worth more noise
constexpr double most_reversals = 2.0;  // of steer, times
constexpr double most_noise = 1.5;      // of steer, times

double least_damping(const SampledLoop& loop) {
  double least = 1.0;
  for (const auto& pole : poles(loop)) {
    if (pole.imag() == 0.0) continue;
    least = std::min(least, motion_of(pole, loop.period).damping);
  }
  return least;
}

DerivativePoint point_of(SampledLoop loop, double kd, double filter, const ErrorNoise& noise) {
  loop.gains.kd = kd;
  loop.filter = filter;
  DerivativePoint point;
  point.kd = kd;
  point.filter = filter;
  point.time = kd * loop.period / loop.gains.kp;
  const Margins found = margins(loop);
  point.stable = found.stable;
  if (!found.stable) return point;
  point.peak = found.sensitivity_peak.value_or(1.0);
  point.gain_high = found.gain_high;
  point.damping = least_damping(loop);
  point.noise = loop_noise(loop, noise).value_or(LoopNoise{});
  return point;
}

std::vector<DerivativePoint> grid_of(const SampledLoop& loop, const ErrorNoise& noise, double late,
                                     const DerivativeSettings& settings) {
  std::vector<DerivativePoint> grid;
  for (int i = 0; i < settings.strengths; ++i) {
    const double share = static_cast<double>(i) / std::max(1, settings.strengths - 1);
    const double time = late * weakest * std::pow(strongest / weakest, share);
    for (int k = 0; k < settings.filters; ++k) {
      const double filter = k == 0 ? 0.0 : loop.period * std::ldexp(1.0, k - 1);
      grid.push_back(point_of(loop, loop.gains.kp * time / loop.period, filter, noise));
    }
  }
  return grid;
}

/// The least noise among the points that reach the peak that is enough or, where none does, come within the
/// slack of the lowest; of those that `may` be had.
template <class May>
std::optional<DerivativePoint> choose(const std::vector<DerivativePoint>& grid,
                                      const DerivativeSettings& settings, May may) {
  double lowest = HUGE_VAL;
  for (const DerivativePoint& point : grid) {
    if (point.stable && may(point)) lowest = std::min(lowest, point.peak);
  }
  const double enough = std::max(settings.peak_enough, lowest * (1.0 + settings.peak_slack));
  std::optional<DerivativePoint> best;
  for (const DerivativePoint& point : grid) {
    if (!point.stable || !may(point) || point.peak > enough) continue;
    const bool quieter = best && point.noise.steer < best->noise.steer;
    const bool as_quiet = best && point.noise.steer == best->noise.steer;
    if (!best || quieter || (as_quiet && point.peak < best->peak)) best = point;
  }
  return best;
}

std::optional<DerivativePoint> lowest_peak(const std::vector<DerivativePoint>& grid) {
  std::optional<DerivativePoint> lowest;
  for (const DerivativePoint& point : grid) {
    if (point.stable && (!lowest || point.peak < lowest->peak)) lowest = point;
  }
  return lowest;
}

bool gains(const DerivativePoint& with, const DerivativePoint& without, const DerivativeSettings& settings) {
  if (!without.stable) return true;
  if (without.peak <= settings.peak_enough) return false;
  const bool calmer =
      without.damping < settings.damping_enough && with.damping >= without.damping + settings.damping_gain;
  return calmer || with.peak <= without.peak * (1.0 - settings.peak_gain);
}

/// Steer before a wheel command, or the steer itself, is at its limit.
double steer_left(const Controller& controller) {
  const double limit = 1e-2 * controller.steer_limit_pct, left = 1.0 - 1e-2 * controller.base_pct;
  return left > 0.0 ? std::min(limit, left) : limit;
}

bool contradicts(const DerivativeCase& found) {
  const Summary &with = found.drive_with, &without = found.drive_without;
  if (with.outcome != Outcome::finished) return without.outcome == Outcome::finished;
  if (without.outcome != Outcome::finished) return false;
  const double most = with.deviation_max / without.deviation_max;
  const double usual = with.deviation_rms / without.deviation_rms;
  if (most > 1.0 + unseen && usual > 1.0 + unseen) return true;
  const bool restless = with.reversals_per_s > most_reversals * without.reversals_per_s + 1.0 ||
                        found.best->noise.steer > most_noise * found.without.noise.steer;
  return restless && most > 1.0 - worth && usual > 1.0 - worth;
}

std::string ms(double seconds) { return readable(1e3 * seconds, 3) + " ms"; }
std::string percent(double share) { return readable(1e2 * share, 2) + " %"; }
std::string point_text(const DerivativePoint& point) {
  return "Kd " + readable(point.kd, 3) + " per loop (" + ms(point.time) + " of derivative)" +
         (point.filter > 0.0 ? " behind a filter of " + ms(point.filter) : " without a filter");
}

std::string gained_text(const DerivativePoint& with, const DerivativePoint& without) {
  if (!without.stable)
    return "makes a loop stable that is not without it (sensitivity peak " + readable(with.peak, 3) +
           ", least damping " + readable(with.damping, 2) + ")";
  return "takes the sensitivity peak from " + readable(without.peak, 3) + " to " + readable(with.peak, 3) +
         " and the least damping from " + readable(without.damping, 2) + " to " + readable(with.damping, 2);
}

std::string paid_text(const DerivativePoint& with, const DerivativePoint& without, double allowed) {
  return "noise of " + percent(with.noise.steer) + " of full command on the steer" +
         (without.stable ? " instead of " + percent(without.noise.steer) : "") + " (may be up to " +
         percent(allowed) + ")";
}

std::string drive_text(const Summary& summary) {
  if (summary.outcome != Outcome::finished)
    return summary.outcome == Outcome::line_lost ? "loses the line" : "does not finish in time";
  return readable(1e3 * summary.deviation_max, 3) + " mm at most, " +
         readable(1e3 * summary.deviation_rms, 3) + " mm rms, " + readable(summary.reversals_per_s, 3) +
         " reversals per s";
}

std::string words_of(const DerivativeCase& found) {
  const std::string offset = "The sensors' forward offset gives " + ms(found.lead) +
                             " of derivative already, without noise, against " + ms(found.late) +
                             " that come late. ";
  const std::string course = " On the course: " + drive_text(found.drive_with) + " with it; " +
                             drive_text(found.drive_without) + " without.";
  switch (found.verdict) {
    case DerivativeVerdict::pays:
      return "D pays. " + point_text(*found.best) + " " + gained_text(*found.best, found.without) + ", for " +
             paid_text(*found.best, found.without, found.noise_allowed) + ". " +
             offset.substr(0, offset.size() - 1) + course;
    case DerivativeVerdict::drive_is_worse:
      return "D does not pay. On the straight, " + point_text(*found.best) + " " +
             gained_text(*found.best, found.without) + ", but for " +
             paid_text(*found.best, found.without, found.noise_allowed) + " the drive is no better. " +
             offset.substr(0, offset.size() - 1) + course;
    case DerivativeVerdict::too_noisy:
      return "D does not pay: " + point_text(*found.sharpest) + " " +
             gained_text(*found.sharpest, found.without) + ", but brings " +
             paid_text(*found.sharpest, found.without, found.noise_allowed) +
             ", and no weaker one or stronger filter keeps enough of the gain. " + offset +
             "Finer, less noisy readings, or sensors further ahead, would do more." + course;
    case DerivativeVerdict::nothing_gained:
      break;
  }
  if (!found.without.stable)
    return "D does not pay: the loop is unstable without it, and no D makes it stable. " + offset +
           "Less gain, less speed or less delay is needed first.";
  const std::string now = "D does not pay: without it the sensitivity peak is " +
                          readable(found.without.peak, 3) + " and the least damping " +
                          readable(found.without.damping, 2);
  if (!found.sharpest) return now + ", and every D makes the loop unstable. " + offset;
  return now +
         (found.enough ? ", which is well damped. "
                       : ", and no D makes that better by enough to matter (a peak of " +
                             readable(found.sharpest->peak, 3) + " at the lowest). ") +
         offset.substr(0, offset.size() - 1) + course;
}

Result<Summary> driven(Scenario scenario, const Controller& controller,
                       std::shared_ptr<const Ground> ground) {
  scenario.controller = controller;
  const Result<Plan> plan = make_plan(scenario, std::move(ground));
  if (!plan) return plan.error();
  return drive(*plan);
}

std::optional<Error> drive_both(const Scenario& scenario, std::shared_ptr<const Ground> ground,
                                DerivativeCase& found) {
  if (!ground) {
    auto made = make_ground(scenario);
    if (!made) return made.error();
    ground = *made;
  }
  const Result<Summary> without = driven(scenario, with_derivative(scenario, found.without), ground);
  if (!without) return without.error();
  found.drive_without = *without;
  const auto& tried = found.best ? found.best : found.sharpest;
  if (!tried) return {};
  const Result<Summary> with = driven(scenario, with_derivative(scenario, *tried), ground);
  if (!with) return with.error();
  found.drive_with = *with;
  return {};
}

}  // namespace

Controller with_derivative(const Scenario& scenario, const DerivativePoint& point) {
  Controller controller = scenario.controller;
  const double period = 1e-3 * scenario.loop.period_ms;
  controller.kd = controller.gains == GainUnit::per_second ? point.kd * period : point.kd;
  controller.derivative_filter_ms = 1e3 * point.filter;
  return controller;
}

Result<DerivativeCase> weigh_derivative(const Scenario& scenario, const DerivativeSettings& settings,
                                        std::shared_ptr<const Ground> ground) {
  Result<SampledLoop> loop = linearise(scenario);
  if (!loop) return loop.error();
  if (!(loop->gains.kp > 0.0))
    return Error{"controller.kp", readable(scenario.controller.kp, 6),
                 "D is weighed beside a P gain, which has to be above 0"};
  const ErrorNoise noise = error_noise(scenario, *loop);
  const SpeedLimit limit = speed_limit(*loop);

  DerivativeCase found;
  found.kp = loop->gains.kp;
  found.ki = loop->gains.ki;
  found.period = loop->period;
  found.lead = limit.lead;
  found.late = limit.late;
  found.noise_allowed = settings.noise_share * steer_left(scenario.controller) / 3.0;
  found.without = point_of(*loop, 0.0, 0.0, noise);
  found.enough = found.without.stable && found.without.peak <= settings.peak_enough;
  found.grid = grid_of(*loop, noise, limit.late, settings);
  const auto useful = [&](const DerivativePoint& point) { return gains(point, found.without, settings); };
  const auto affordable = [&](const DerivativePoint& point) {
    return useful(point) && point.noise.steer <= found.noise_allowed;
  };
  found.best = choose(found.grid, settings, affordable);
  found.sharpest = choose(found.grid, settings, useful);
  const bool any_useful = found.sharpest.has_value();
  if (!any_useful) found.sharpest = lowest_peak(found.grid);
  if (const auto error = drive_both(scenario, std::move(ground), found)) return *error;

  if (found.best)
    found.verdict = contradicts(found) ? DerivativeVerdict::drive_is_worse : DerivativeVerdict::pays;
  else
    found.verdict = any_useful ? DerivativeVerdict::too_noisy : DerivativeVerdict::nothing_gained;
  found.words = words_of(found);
  return found;
}

}  // namespace lw
