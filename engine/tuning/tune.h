// Gains for a scenario by experiment and rule, each with its evidence.
//
//   rules     critical gain and period by theory; every published rule and habit, tried
//   critical  the same from the critical gain that the vehicle shows on the straight (effects.h)
//   relay     the same from the relay experiment (relay.h)
//   habit     what is done on the floor alone: half the critical gain; then Ki raised until the straight
//   cannot
//             be held, and a quarter and a half of that (common practice, no source)
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "engine/tuning/effects.h"
#include "engine/tuning/relay.h"
#include "engine/tuning/trial.h"

namespace lw {

enum class TuneMethod { rules, critical, relay, habit };
inline constexpr const char* tune_methods[] = {"rules", "critical", "relay", "habit"};
std::optional<TuneMethod> tune_method_of(std::string_view name);

/// The relay experiment without rounding, noise and jitter, and on the vehicle as it is.
struct RelayStudy {
  RelayFound ideal, as_it_is;
  RelayParts parts;                // of the ideal one
  std::vector<std::string> words;  // why it differs from theory
};
Result<RelayStudy> study_relay(const Scenario& scenario);

/// Ki (per loop) at which a straight is no longer held, beside half the critical gain.
struct IntegralLimit {
  double kp = 0.0;
  std::optional<double> theory;
  CriticalFound experiment;  // on the ideal vehicle
};
/// `kp` > 0, at which the loop is stable without I.
Result<IntegralLimit> integral_limit(const Scenario& scenario, double kp);

struct Tuning {
  TuneMethod method = TuneMethod::rules;
  Critical theory;                                    // of P alone
  std::optional<CriticalFound> floor;                 // rules: the experiment on the ideal vehicle
  std::optional<CriticalStudy> study;                 // critical
  std::optional<RelayStudy> relay;                    // relay
  std::optional<IntegralLimit> integral;              // habit, rules
  double critical_gain = 0.0, critical_period = 0.0;  // what the settings are worked out from; 0 = none
  std::string from;  // where these come from, in words: theory also where an experiment finds nothing
  std::vector<Trial> trials;
  Choice choice;
};

/// Errors: those of linearise and make_plan.
Result<Tuning> tune(const Scenario& scenario, TuneMethod method);

}  // namespace lw
