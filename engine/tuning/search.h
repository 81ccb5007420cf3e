// Gains, base speed and sensor places by search: the fastest lap, or the straightest, within limits.
//
// Every candidate drives the course at hand, with the same draws of noise and jitter as every other (drive
// numbers 0 to draws - 1), and is judged by all of these drives: the mean time, the largest deviation, the
// mean rate of reversals, the mean share saturated. A limit that is broken comes before any time; a drive
// that does not finish before any limit. The margins of the loop on the straight are a limit as well, since a
// course holds few surprises and a floor many. Candidates are rounded to four digits before they are driven,
// so that what is printed is what was driven. The method is in search_minimise.h.
//
// Time and deviation pull against each other, so the answer is a front: of all candidates that keep the other
// limits those that no other one beats in both. A part of the tries is spent on its other end.
#pragma once

#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "engine/drive/plan.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"
#include "engine/tuning/search_minimise.h"

namespace lw {

/// What may be set free. Values are in the units of the scenario's keys; spacing is the outermost
/// |lateral_mm|, with which all sensors move out or in.
enum class Variable { kp, ki, kd, filter, base, forward, spacing };
inline constexpr std::string_view variable_names[] = {"kp",   "ki",      "kd",     "filter",
                                                      "base", "forward", "spacing"};
constexpr std::string_view name_of(Variable variable) { return variable_names[static_cast<int>(variable)]; }

/// One free value and where it may lie. Without bounds: gains up to a little beyond the critical gain of P
/// alone and what goes with its period, filter to 20 periods, base 5 to 100 %, forward 0.3 to 3 times and
/// spacing half to twice the scenario's.
struct FreeVariable {
  Variable variable = Variable::kp;
  std::optional<double> low, high;
};

enum class Goal { time, deviation };

/// Absent = no limit.
struct SearchLimits {
  std::optional<double> deviation_mm;      // largest
  std::optional<double> deviation_rms_mm;  // largest of the draws
  std::optional<double> reversals_per_s;   // of steer
  std::optional<double> saturated_pct;     // of the time
  std::optional<double> gain_margin_db;    // at least, upwards and downwards; the loop has to be stable
  std::optional<double> sensitivity_peak;
};

struct SearchSettings {
  std::vector<FreeVariable> free;
  Goal goal = Goal::time;
  SearchLimits limits;
  int evaluations = 600;     // candidates in all
  int draws = 3;             // drives a candidate; 1 is enough without noise and jitter
  double front_share = 0.3;  // of the evaluations, for the other end of the front
  std::uint64_t seed = 1;    // of the search, not of the drives
  std::vector<std::vector<double>>
      starts;  // more places to start from, such as published rules: values as `free`
};

/// One candidate and how it did.
struct Candidate {
  std::vector<double> values;                       // in the order of `free`
  int finished = 0;                                 // of the draws
  double time = 0.0;                                // s, mean
  double deviation_max = 0.0, deviation_rms = 0.0;  // m, the worst draw's
  double reversals_per_s = 0.0, saturated = 0.0;    // means
  double progress = 0.0;                            // share of the way, the worst draw's
  std::optional<double> gain_high_db, gain_low_db,
      sensitivity_peak;  // only where a limit asks, and of the answer
  bool stable = true;    // likewise
  double breach = 0.0;   // of limits: 0 = all are kept
};

struct SearchProgress {
  int evaluations = 0, of = 0;
  Candidate best;
};

struct SearchAnswer {
  Candidate own;                 // the scenario as it stands
  Candidate best;                // keeps all limits when breach is 0
  Scenario scenario;             // with the best values
  std::vector<Candidate> front;  // fastest first
  int evaluations = 0;
  bool stopped = false;
  std::string stops_it;  // the limits that the best still breaks, in words; empty when none
  std::string words;
};

/// Searches. `progress` is called before every candidate and ends the search by false. `ground` as in
/// make_plan() of the scenario. Errors: those of make_plan(); nothing free, or a variable twice; bounds that
/// cross or lie outside the field's range; starts of another size.
Result<SearchAnswer> search_gains(const Scenario& scenario, const SearchSettings& settings,
                                  const std::function<bool(const SearchProgress&)>& progress = {},
                                  std::shared_ptr<const Ground> ground = nullptr);

/// One candidate judged as the search does it: what a rule's gains come to under the same limits and draws.
Result<Candidate> judge(const Scenario& scenario, const SearchSettings& settings,
                        std::shared_ptr<const Ground> ground = nullptr);

/// The published rules (rules.h), from the critical gain of the theory, as places to start from: with them
/// the answer is no worse than any of them. In the order of published_rules; none without a critical gain.
std::vector<std::vector<double>> rule_starts(const Scenario& scenario, const std::vector<FreeVariable>& free);

/// Values of the scenario in the order of `free`, and the scenario with others.
std::vector<double> values_of(const Scenario& scenario, const std::vector<FreeVariable>& free);
Scenario with_values(Scenario scenario, const std::vector<FreeVariable>& free,
                     const std::vector<double>& values);

}  // namespace lw
