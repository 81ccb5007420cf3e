#include "engine/stress/ceiling.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/words.h"

namespace lw {
namespace {

std::string percent(double value) { return formatted("%.2f", value) + " %"; }

class Ladder {
 public:
  Ladder(const Scenario& scenario, const Choice& choice, std::shared_ptr<const Ground> ground,
         std::uint64_t drive_number)
      : scenario_(scenario), choice_(choice), ground_(std::move(ground)), number_(drive_number) {}

  /// Drives one base and keeps its rung in order.
  bool finishes_at(double base_pct) {
    Rung rung = driven_at(base_pct);
    const bool finished = rung.finished();
    const auto after =
        std::find_if(steps_.begin(), steps_.end(), [&](const Rung& r) { return r.base_pct > base_pct; });
    steps_.insert(after, std::move(rung));
    return finished;
  }
  std::vector<Rung> take_steps() { return std::move(steps_); }

 private:
  Rung driven_at(double base_pct) {
    Rung rung;
    rung.base_pct = base_pct;
    const Result<Controller> chosen = choice_(base_pct);
    if (!chosen) {
      rung.reason = text_of(chosen.error());
      return rung;
    }
    scenario_.controller = rung.controller = *chosen;
    const Result<Plan> plan = make_plan(scenario_, ground_);
    if (!plan) {
      rung.reason = text_of(plan.error());
      return rung;
    }
    rung.driven = true;
    rung.summary = drive(*plan, &trace_, number_);
    rung.reason = reason(*plan, rung.summary, trace_);
    if (rung.summary.outcome == Outcome::line_lost) rung.loss = loss_of(*plan, trace_);
    return rung;
  }

  Scenario scenario_;
  const Choice& choice_;
  std::shared_ptr<const Ground> ground_;
  std::uint64_t number_;
  Trace trace_;
  std::vector<Rung> steps_;
};

std::optional<Error> fault_of(const LadderSettings& settings) {
  const auto fault = [](const char* what, const char* why) { return Error{"ladder", what, why}; };
  if (!(settings.low_pct > 0.0 && settings.low_pct < 100.0))
    return fault("lowest base", "above 0 and below 100 %");
  if (!(settings.high_pct > settings.low_pct && settings.high_pct <= 100.0))
    return fault("highest base", "above the lowest base and at most 100 %");
  if (!(settings.step_pct >= 0.1)) return fault("step", "at least 0.1 %");
  if (!(settings.resolution_pct >= 1e-4)) return fault("resolution", "at least 0.0001 %");
  return {};
}

/// Climbs from slow to fast, every rung, so that a rung that finishes again is seen; then closes in.
void climb(Ladder& ladder, const LadderSettings& settings) {
  const double gap = settings.high_pct - settings.low_pct;
  const int count = std::max(1, static_cast<int>(std::ceil(gap / settings.step_pct - 1e-9)));
  std::optional<double> holds, fails;
  for (int i = 0; i <= count; ++i) {
    const double base = i < count ? settings.low_pct + i * settings.step_pct : settings.high_pct;
    const bool finished = ladder.finishes_at(base);
    if (finished && !fails) holds = base;
    if (!finished && holds && !fails) fails = base;
  }
  while (holds && fails && *fails - *holds > settings.resolution_pct * (1.0 + 1e-9)) {
    const double middle = 0.5 * (*holds + *fails);
    (ladder.finishes_at(middle) ? holds : fails) = middle;
  }
}

double steady_speed(const Vehicle& vehicle, double base) {
  const Drivetrain<double> train = drivetrain_of(vehicle);
  const WheelTarget<double> target = wheel_target(train, base, base);
  return axle_speed(train, target.common, target.difference);
}

const Rung* furthest(const Ceiling& ceiling) {
  const Rung* best = nullptr;
  for (const Rung& rung : ceiling.steps) {
    if (rung.driven && (!best || rung.summary.progress > best->summary.progress)) best = &rung;
  }
  return best;
}

std::string nothing_finishes(const Ceiling& ceiling) {
  const Rung* best = furthest(ceiling);
  if (best)
    return "No base gets round. At " + percent(best->base_pct) + " it comes furthest: " + best->reason + ".";
  return "No base gets round: " +
         (ceiling.steps.empty() ? "nothing was driven" : ceiling.steps.front().reason) + ".";
}

}  // namespace

const Rung* Ceiling::last() const {
  for (const Rung& rung : steps) {
    if (base_pct && rung.base_pct == *base_pct) return &rung;
  }
  return nullptr;
}

const Rung* Ceiling::first_beyond() const {
  for (const Rung& rung : steps) {
    if (base_pct && rung.base_pct > *base_pct && !rung.finished()) return &rung;
  }
  return nullptr;
}

Choice own_choice(const Scenario& scenario) {
  return [controller = scenario.controller](double base_pct) {
    Controller own = controller;
    own.base_pct = base_pct;
    return Result<Controller>(own);
  };
}

Result<Ceiling> find_ceiling(const Scenario& scenario, const Choice& choice, const LadderSettings& settings,
                             std::shared_ptr<const Ground> ground) {
  if (const auto fault = fault_of(settings)) return *fault;
  const Result<Plan> plan = make_plan(scenario, std::move(ground));
  if (!plan) return plan.error();
  Ladder ladder(scenario, choice, plan->ground, settings.number);
  climb(ladder, settings);

  Ceiling ceiling;
  ceiling.steps = ladder.take_steps();
  bool beyond = false;
  for (const Rung& rung : ceiling.steps) {
    if (rung.finished() && !ceiling.slowest_pct) ceiling.slowest_pct = rung.base_pct;
    if (rung.finished() && !beyond) ceiling.base_pct = rung.base_pct;
    if (rung.finished() && beyond && !ceiling.again_pct) ceiling.again_pct = rung.base_pct;
    beyond = beyond || (!rung.finished() && ceiling.slowest_pct);
  }
  ceiling.open = ceiling.base_pct && !beyond;
  if (ceiling.base_pct) ceiling.speed = steady_speed(scenario.vehicle, 1e-2 * *ceiling.base_pct);
  return ceiling;
}

std::string in_words(const Ceiling& ceiling) {
  if (!ceiling.base_pct) return nothing_finishes(ceiling);
  std::string text = "Gets round up to a base of " + percent(*ceiling.base_pct) + ", " +
                     formatted("%.0f", 1e3 * ceiling.speed) + " mm/s";
  const Rung* beyond = ceiling.first_beyond();
  text += beyond ? "; at " + percent(beyond->base_pct) + " it does not: " + beyond->reason + "."
                 : ", the highest that was tried.";
  if (ceiling.again_pct)
    text += " At " + percent(*ceiling.again_pct) +
            " it finishes again: chance of how it meets the bends there, not to be relied on.";
  const Rung& lowest = ceiling.steps.front();
  if (!lowest.finished() && ceiling.slowest_pct)
    text += lowest.driven && lowest.summary.outcome == Outcome::time_out
                ? " Below " + percent(*ceiling.slowest_pct) + " the time limit ends it."
                : " Below " + percent(*ceiling.slowest_pct) + " it does not get round either (" +
                      percent(lowest.base_pct) + ": " + lowest.reason + ").";
  return text;
}

}  // namespace lw
