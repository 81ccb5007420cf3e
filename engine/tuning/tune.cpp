#include "engine/tuning/tune.h"

#include <cmath>

#include "engine/numeric/words.h"
#include "engine/theory/roots.h"
#include "engine/tuning/rules.h"

namespace lw {
namespace {

constexpr const char* habit_source = "common practice, no source";

double percent(double factor) { return 1e2 * (factor - 1.0); }

std::vector<std::string> relay_words(const RelayStudy& study, const Straight& straight,
                                     const Critical& theory) {
  const RelayFound& found = study.ideal;
  if (!found.reading) return {"The relay experiment gives nothing: " + found.reason + "."};
  const RelayReading& reading = *found.reading;
  std::vector<std::string> words{formatted(
      "A relay of +-%.3g %% steer with hysteresis %.3g swings %.3g mm every %.1f ms: Kp %.4g by its formula.",
      1e2 * found.size, found.hysteresis, 1e3 * found.amplitude, 1e3 * reading.period, reading.gain)};
  if (!theory.gain) {
    words.push_back("By theory there is no critical gain of P alone: " + theory.reason + ".");
    return words;
  }
  const RelayParts& parts = study.parts;
  words.push_back(formatted(
      "Theory has Kp %.4g and %.1f ms: the relay's gain is %+.1f %%, its period %+.1f %%.", *theory.gain,
      1e3 * *theory.period, percent(reading.gain / *theory.gain), percent(reading.period / *theory.period)));
  const double wait = 0.5 * straight.loop.period / reading.period * 360.0;
  words.push_back(formatted(
      "Hysteresis and the wait for the next loop (%.1f deg in the mean) make the relay switch %.1f deg "
      "late, so "
      "that it swings more slowly than the critical loop, whose phase changes little with frequency: "
      "%+.1f %%.",
      wait, reading.late * 180.0 / pi, percent(parts.frequency)));
  words.push_back(
      formatted("The sensors' slope over the swing: %+.1f %%. The formula counts the square wave's first "
                "harmonic alone (the describing-function error): %+.1f %%.",
                percent(parts.slope), percent(parts.formula)));
  if (reading.gain < *theory.gain)
    words.push_back("Settings worked out from it are on the slow side, not on the dangerous one.");
  if (study.as_it_is.reading)
    words.push_back(formatted("On the vehicle as it is: Kp %.4g, period %.1f ms.",
                              study.as_it_is.reading->gain, 1e3 * study.as_it_is.reading->period));
  else
    words.push_back("On the vehicle as it is it gives nothing: " + study.as_it_is.reason + ".");
  return words;
}

bool holds(const SampledLoop& loop, double kp, double ki) {
  const SampledLoop with = with_gains(loop, {kp, ki, 0.0});
  return margins(with, sweep(with), false).stable;
}

std::optional<double> most_integral(const SampledLoop& loop, double kp) {
  double low = 1e-6 * kp, high = low;
  if (!holds(loop, kp, low)) return {};
  while (holds(loop, kp, high)) {
    low = high;
    high *= 2.0;
    if (high > 10.0 * kp) return {};
  }
  while (high - low > 1e-6 * high) {
    const double middle = 0.5 * (low + high);
    (holds(loop, kp, middle) ? low : high) = middle;
  }
  return 0.5 * (low + high);
}

/// What the settings are worked out from: the experiment asked for, on the vehicle as it is where it gives
/// one; theory where no experiment was asked for or none gives one.
void set_critical(Tuning& tuning) {
  const auto take = [&](std::optional<double> gain, double period, const char* from) {
    if (tuning.critical_gain > 0.0 || !gain || !(*gain > 0.0) || !(period > 0.0)) return;
    tuning.critical_gain = *gain;
    tuning.critical_period = period;
    tuning.from = from;
  };
  if (tuning.study) {
    take(tuning.study->as_it_is.gain, tuning.study->as_it_is.period, "the swing of the vehicle as it is");
    take(tuning.study->ideal.gain, tuning.study->ideal.period,
         "the swing without rounding, noise and jitter");
  }
  if (tuning.relay) {
    const auto take_relay = [&](const RelayFound& found, const char* from) {
      if (found.reading) take(found.reading->gain, found.reading->period, from);
    };
    take_relay(tuning.relay->as_it_is, "the relay on the vehicle as it is");
    take_relay(tuning.relay->ideal, "the relay without rounding, noise and jitter");
  }
  const bool asked = tuning.study || tuning.relay;
  take(tuning.theory.gain, tuning.theory.period.value_or(0.0),
       asked ? "theory, since the experiment gives none" : "theory");
}

struct Setting {
  std::string name, source;
  LoopGains gains;
};

std::vector<Setting> settings_of(const Tuning& tuning, double period) {
  std::vector<Setting> settings;
  if (tuning.method != TuneMethod::habit) {
    for (const Rule& rule : published_rules)
      settings.push_back({rule.name, rule.source,
                          per_loop(gains_by(rule, tuning.critical_gain, tuning.critical_period), period)});
  }
  const double half = 0.5 * tuning.critical_gain;
  settings.push_back({"habit: half the critical gain", habit_source, {half, 0.0, 0.0}});
  if (!tuning.integral) return settings;
  const auto most =
      tuning.integral->experiment.gain ? tuning.integral->experiment.gain : tuning.integral->theory;
  if (!most) return settings;
  settings.push_back(
      {"habit: and a quarter of the Ki that is too much", habit_source, {half, 0.25 * *most, 0.0}});
  settings.push_back({"habit: and half of the Ki that is too much", habit_source, {half, 0.5 * *most, 0.0}});
  return settings;
}

/// Runs the method's experiments. Nothing on success.
std::optional<Error> experiment(const Scenario& scenario, Tuning& tuning) {
  if (tuning.method == TuneMethod::critical) {
    auto study = study_critical(scenario);
    if (!study) return study.error();
    tuning.study = std::move(*study);
  }
  if (tuning.method == TuneMethod::relay) {
    auto relay = study_relay(scenario);
    if (!relay) return relay.error();
    tuning.relay = std::move(*relay);
  }
  if (tuning.method == TuneMethod::rules) {
    const auto straight = make_straight(ideal(scenario));
    if (!straight) return straight.error();
    tuning.floor = critical_by_experiment(*straight, {});
  }
  return {};
}

}  // namespace

std::optional<TuneMethod> tune_method_of(std::string_view name) {
  for (int i = 0; i < 4; ++i)
    if (name == tune_methods[i]) return static_cast<TuneMethod>(i);
  return {};
}

Result<RelayStudy> study_relay(const Scenario& scenario) {
  const auto plain = make_straight(ideal(scenario));
  if (!plain) return plain.error();
  const auto real = make_straight(scenario, plain->plan.ground);
  if (!real) return real.error();
  RelayStudy study;
  study.ideal = relay_experiment(*plain, {});
  study.as_it_is = relay_experiment(*real, {});
  const Critical theory = critical(plain->loop);
  if (theory.gain) study.parts = relay_parts(*plain, study.ideal, *theory.gain);
  study.words = relay_words(study, *plain, theory);
  return study;
}

Result<IntegralLimit> integral_limit(const Scenario& scenario, double kp) {
  const auto loop = linearise(scenario);
  if (!loop) return loop.error();
  const auto straight = make_straight(ideal(scenario));
  if (!straight) return straight.error();
  IntegralLimit limit;
  limit.kp = kp;
  limit.theory = most_integral(*loop, kp);
  ExperimentSetting setting;
  setting.sought = Sought::ki;
  setting.kp = kp;
  limit.experiment = critical_by_experiment(*straight, setting);
  return limit;
}

Result<Tuning> tune(const Scenario& scenario, TuneMethod method) {
  const auto loop = linearise(scenario);
  if (!loop) return loop.error();
  Tuning tuning;
  tuning.method = method;
  tuning.theory = critical(*loop);
  if (auto error = experiment(scenario, tuning)) return *error;
  set_critical(tuning);
  if (tuning.critical_gain <= 0.0) {
    tuning.choice.reason =
        "None is recommended: there is no critical gain of P alone to work from (" +
        (tuning.theory.reason.empty() ? "the experiment finds none" : tuning.theory.reason) + ").";
    return tuning;
  }
  if (method == TuneMethod::habit || method == TuneMethod::rules) {
    auto limit = integral_limit(scenario, 0.5 * tuning.critical_gain);
    if (!limit) return limit.error();
    tuning.integral = std::move(*limit);
  }
  const auto ground = make_ground(scenario);
  if (!ground) return ground.error();
  for (const Setting& setting : settings_of(tuning, loop->period)) {
    auto trial = tried(scenario, *loop, *ground, setting.name, setting.source, setting.gains,
                       filter_for(scenario, setting.gains));
    if (!trial) return trial.error();
    tuning.trials.push_back(std::move(*trial));
  }
  tuning.choice = recommended(tuning.trials);
  return tuning;
}

}  // namespace lw
