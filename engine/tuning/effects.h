// What makes a critical gain found by experiment differ from that of the linear loop, told apart.
//
// The experiment is run on the vehicle as it is, on the vehicle without anything that a linear loop cannot
// hold, and on the latter with one such thing at a time; and with larger swings. Each runs at the same
// amplitude, so that their differences belong to their causes.
#pragma once

#include <string>
#include <vector>

#include "engine/theory/margins.h"
#include "engine/tuning/experiment.h"

namespace lw {

/// What of a scenario blurs an experiment and can be taken out of it.
enum class Effect { reading_steps, command_steps, noise, jitter, easing, refresh };
inline constexpr Effect all_effects[] = {Effect::reading_steps, Effect::command_steps, Effect::noise,
                                         Effect::jitter,        Effect::easing,        Effect::refresh};

bool has(const Scenario& scenario, Effect effect);
Scenario without(Scenario scenario, Effect effect);
/// Without any of them.
Scenario ideal(Scenario scenario);
/// "rounding of readings to 1 %": with the scenario's amount.
std::string name_of(Effect effect, const Scenario& scenario);

/// One experiment beside the ideal one.
struct EffectFound {
  Effect effect;
  std::string name;
  CriticalFound found;
  double change = 0.0;  // of the gain against the ideal experiment, share; 0 where either found none
};

/// A swing of another size, without any effect.
struct LargerSwing {
  CriticalFound found;
  double slope_left = 1.0;  // the sensors' slope over this swing as a share of that at rest
  double change = 0.0;      // of the gain against ideal_theory, share
  bool kept_up = false;     // the swing has the size asked for, and no command reaches its limit
};

struct CriticalStudy {
  Critical theory;        // of the scenario; a refresh of readings counts as delay by their mean age
  Critical ideal_theory;  // without a refresh
  double expected = 0.0;  // ideal_theory's gain over the slope that a swing of this size meets; 0 = none
  double slope_left = 1.0;
  CriticalFound ideal, as_it_is;
  double ideal_change = 0.0, as_it_is_change = 0.0;  // against ideal_theory and theory, shares
  std::vector<EffectFound> alone;
  std::vector<LargerSwing> larger;
  std::vector<std::string> words;  // what was found and why it differs, a sentence each
};

/// Runs all of it. Errors: those of make_straight.
Result<CriticalStudy> study_critical(const Scenario& scenario);

}  // namespace lw
