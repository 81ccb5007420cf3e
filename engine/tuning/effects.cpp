#include "engine/tuning/effects.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/words.h"

namespace lw {
namespace {

constexpr int noisy_draws = 6;
constexpr double worth_a_word = 0.01;  // share of the gain

double change(const std::optional<double>& found, const std::optional<double>& from) {
  return found && from ? *found / *from - 1.0 : 0.0;
}

/// Begins where the experiment without any effect ended, when there was one; the swing `times` as large.
CriticalFound found_on(const Straight& straight, const CriticalFound& before = {}, double times = 1.0) {
  ExperimentSetting setting;
  setting.amplitude = times * before.wanted;
  setting.near = before.gain.value_or(0.0);
  setting.push = times * before.push;
  const bool random = straight.plan.wiring.sensors.noise || straight.plan.wiring.jitter;
  setting.draws = random ? noisy_draws : 1;
  if (random) setting.tolerance = 1e-3;
  return critical_by_experiment(straight, setting);
}

std::string signed_percent(double share) { return formatted("%+.1f %%", 1e2 * share); }

std::string ideal_words(const CriticalStudy& study) {
  const CriticalFound& ideal = study.ideal;
  std::string words =
      formatted("A swing of %.3g mm without rounding, noise or jitter: Kp %.4g against %.4g by theory, ",
                1e3 * ideal.amplitude, *ideal.gain, *study.ideal_theory.gain) +
      signed_percent(study.ideal_change) +
      formatted(" (period %.1f against %.1f ms).", 1e3 * ideal.period, 1e3 * *study.ideal_theory.period);
  words +=
      formatted(" Over such a swing the sensors give %.1f %% of the slope that theory takes, which makes ",
                1e2 * study.slope_left) +
      signed_percent(1.0 / study.slope_left - 1.0) + "; " +
      signed_percent(*ideal.gain / study.expected - 1.0) + " is left.";
  if (ideal.limited > 0.0)
    words += formatted(
        " Commands reach their limits in %.0f %% of the loops even so, and a swing small enough not to "
        "moves no reading.",
        1e2 * ideal.limited);
  else if (ideal.wanted < ideal.small)
    words += " A larger swing would take the commands to their limits.";
  return words;
}

/// How coarse rounding is against the swing, where that is what it does.
std::string grain_words(const CriticalStudy& study, const EffectFound& one, const Scenario& scenario) {
  const bool readings = one.effect == Effect::reading_steps;
  if (!readings && one.effect != Effect::command_steps) return "";
  if (readings && scenario.sensors.scheme == Scheme::bar) return "";
  const double step = 1e-2 * (readings ? scenario.sensors.step_pct : scenario.vehicle.command_step_pct);
  const double swing = readings ? study.ideal.error_amplitude : study.ideal.steer_amplitude;
  return formatted(", the swing being %.1f steps of ", swing / step) +
         (readings ? "the reading" : "the command");
}

std::string effect_words(const CriticalStudy& study, const EffectFound& one, const Scenario& scenario) {
  if (!one.found.gain)
    return "With " + one.name + " alone there is no critical gain to find" +
           grain_words(study, one, scenario) + ": " + one.found.reason + ".";
  std::string line =
      "With " + one.name + " alone: " + signed_percent(one.change) + grain_words(study, one, scenario);
  if (one.found.scatter > 0.0)
    line += formatted(", and from draw to draw it strays by %.1f %%", 1e2 * one.found.scatter);
  if (one.effect == Effect::refresh)
    line += "; theory, which takes the mean age of readings as delay, has " +
            signed_percent(change(study.theory.gain, study.ideal_theory.gain));
  return line + ".";
}

/// Which effect alone comes nearest to the whole difference.
std::string whole_words(const CriticalStudy& study) {
  if (study.alone.empty())
    return "The vehicle has no rounding, noise, jitter, easing or refresh that could change it.";
  if (!study.as_it_is.gain)
    return "As it is, the vehicle shows no critical gain: " + study.as_it_is.reason + ".";
  const std::string line = formatted("As it is, the vehicle swings on from Kp %.4g, ", *study.as_it_is.gain) +
                           signed_percent(study.as_it_is_change) + " against theory. ";
  const double whole = change(study.as_it_is.gain, study.ideal.gain);
  if (std::fabs(whole) < worth_a_word)
    return line + "None of these moves it from the swing without them, or they cancel.";
  const EffectFound* nearest = &study.alone.front();
  for (const EffectFound& one : study.alone) {
    if (std::fabs(one.change - whole) < std::fabs(nearest->change - whole)) nearest = &one;
  }
  if (std::fabs(nearest->change - whole) > 0.5 * std::fabs(whole))
    return line + "No single one of these explains it: they act on one another.";
  return line + "What explains it best is " + nearest->name + '.';
}

std::string larger_words(const LargerSwing& larger) {
  const CriticalFound& found = larger.found;
  const std::string swing = formatted("A swing of %.3g mm ", 1e3 * found.wanted);
  if (!larger.kept_up)
    return swing +
           "is not kept up at any gain: the commands reach their limits before it, and a swing that "
           "large dies out to a smaller one.";
  return swing + formatted("needs Kp %.4g to keep up, ", *found.gain) + signed_percent(larger.change) +
         formatted(": over it the sensors give %.0f %% of their slope.", 1e2 * larger.slope_left);
}

std::string no_gain_words(const CriticalStudy& study) {
  if (study.ideal_theory.gain)
    return "Theory has a critical gain, the experiment finds none: " + study.ideal.reason + ".";
  std::string words = "There is no critical gain of P alone. By theory: " + study.ideal_theory.reason;
  if (!study.ideal.gain) words += "; by experiment: " + study.ideal.reason;
  return words + '.';
}

std::vector<std::string> words_of(const CriticalStudy& study, const Scenario& scenario) {
  if (!study.ideal.gain || !study.ideal_theory.gain) return {no_gain_words(study)};
  std::vector<std::string> words{ideal_words(study)};
  for (const EffectFound& one : study.alone) words.push_back(effect_words(study, one, scenario));
  words.push_back(whole_words(study));
  for (const LargerSwing& larger : study.larger) words.push_back(larger_words(larger));
  return words;
}

LargerSwing larger_swing(const Straight& straight, double amplitude, const CriticalStudy& study) {
  LargerSwing larger;
  larger.found = found_on(straight, study.ideal, amplitude / study.ideal.wanted);
  larger.change = change(larger.found.gain, study.ideal_theory.gain);
  const double reached = larger.found.amplitude;
  larger.kept_up = larger.found.gain && larger.found.limited == 0.0 && reached > 0.7 * amplitude &&
                   reached < 1.5 * amplitude;
  if (reached > 0.0) larger.slope_left = swing_slope(straight, reached) / straight.loop.slope;
  return larger;
}

Scenario only(Scenario scenario, Effect effect) {
  for (const Effect other : all_effects) {
    if (other != effect) scenario = without(std::move(scenario), other);
  }
  return scenario;
}

}  // namespace

bool has(const Scenario& scenario, Effect effect) {
  switch (effect) {
    case Effect::reading_steps:
      return scenario.sensors.step_pct > 0.0;
    case Effect::command_steps:
      return scenario.vehicle.command_step_pct > 0.0;
    case Effect::noise:
      return scenario.sensors.noise_pct > 0.0;
    case Effect::jitter:
      return scenario.loop.jitter_pct > 0.0;
    case Effect::easing:
      return scenario.controller.ease > 0.0;
    case Effect::refresh:
      return scenario.sensors.refresh_ms > scenario.loop.period_ms;
  }
  return false;
}

Scenario without(Scenario scenario, Effect effect) {
  switch (effect) {
    case Effect::reading_steps:
      scenario.sensors.step_pct = 0.0;
      break;
    case Effect::command_steps:
      scenario.vehicle.command_step_pct = 0.0;
      break;
    case Effect::noise:
      scenario.sensors.noise_pct = 0.0;
      break;
    case Effect::jitter:
      scenario.loop.jitter_pct = 0.0;
      break;
    case Effect::easing:
      scenario.controller.ease = 0.0;
      break;
    case Effect::refresh:
      scenario.sensors.refresh_ms = 0.0;
      break;
  }
  return scenario;
}

Scenario ideal(Scenario scenario) {
  for (const Effect effect : all_effects) scenario = without(std::move(scenario), effect);
  return scenario;
}

std::string name_of(Effect effect, const Scenario& scenario) {
  switch (effect) {
    case Effect::reading_steps:
      return formatted("rounding of readings to %.3g %%", scenario.sensors.step_pct);
    case Effect::command_steps:
      return formatted("rounding of commands to %.3g %%", scenario.vehicle.command_step_pct);
    case Effect::noise:
      return formatted("noise of %.3g points", scenario.sensors.noise_pct);
    case Effect::jitter:
      return formatted("jitter of %.3g %%", scenario.loop.jitter_pct);
    case Effect::easing:
      return formatted("easing of %.3g", scenario.controller.ease);
    case Effect::refresh:
      return formatted("readings refreshed every %.3g ms", scenario.sensors.refresh_ms);
  }
  return "";
}

Result<CriticalStudy> study_critical(const Scenario& scenario) {
  const Result<Straight> plain = make_straight(ideal(scenario));
  if (!plain) return plain.error();
  const Result<SampledLoop> loop = linearise(scenario);
  if (!loop) return loop.error();
  CriticalStudy study;
  study.theory = critical(*loop);
  study.ideal_theory = critical(plain->loop);
  study.ideal = found_on(*plain);
  study.ideal_change = change(study.ideal.gain, study.ideal_theory.gain);
  if (!study.ideal.gain || !study.ideal_theory.gain) {
    study.words = words_of(study, scenario);
    return study;
  }
  study.slope_left = swing_slope(*plain, study.ideal.amplitude) / plain->loop.slope;
  study.expected = *study.ideal_theory.gain / study.slope_left;
  const auto run = [&](const Scenario& with) -> Result<CriticalFound> {
    const Result<Straight> straight = make_straight(with, plain->plan.ground);
    if (!straight) return straight.error();
    return found_on(*straight, study.ideal);
  };
  const auto as_it_is = run(scenario);
  if (!as_it_is) return as_it_is.error();
  study.as_it_is = *as_it_is;
  study.as_it_is_change = change(study.as_it_is.gain, study.theory.gain);
  for (const Effect effect : all_effects) {
    if (!has(scenario, effect)) continue;
    const auto found = run(only(scenario, effect));
    if (!found) return found.error();
    study.alone.push_back({effect, name_of(effect, scenario), *found, change(found->gain, study.ideal.gain)});
  }
  for (const double radii : {1.0, 2.0}) {
    const double amplitude = radii * plain->spot_radius;
    if (amplitude > 1.2 * study.ideal.amplitude)
      study.larger.push_back(larger_swing(*plain, amplitude, study));
  }
  study.words = words_of(study, scenario);
  return study;
}

}  // namespace lw
