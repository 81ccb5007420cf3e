#include "engine/tuning/trial.h"

#include <algorithm>

#include "engine/numeric/words.h"
#include "engine/tuning/rules.h"

namespace lw {
namespace {

std::string against_by_loop(const Margins& margins) {
  if (margins.stable) {
    if (margins.gain_high && *margins.gain_high < least_gain_margin)
      return "gain margin of only " + formatted("%.1f dB", decibels(*margins.gain_high));
    if (margins.gain_low && *margins.gain_low > 1.0 / least_gain_margin)
      return "swings up when the loop gain falls by only " +
             formatted("%.1f dB", -decibels(*margins.gain_low));
    return "";
  }
  std::string words = "the loop on the straight is not stable";
  if (margins.gain_high && *margins.gain_high < 1.0)
    words += "; its gain would have to come down by " + formatted("%.1f dB", -decibels(*margins.gain_high));
  else if (margins.gain_low && *margins.gain_low > 1.0)
    words += "; its gain would have to go up by " + formatted("%.1f dB", decibels(*margins.gain_low));
  else
    words += " at any loop gain";
  return words;
}

std::string near_edge_of(const Trial& trial) {
  if (trial.margins.sensitivity_peak && *trial.margins.sensitivity_peak > sensible_sensitivity)
    return "sensitivity peak " + formatted("%.2f", *trial.margins.sensitivity_peak) + ", above 2";
  if (trial.drive.saturated > much_saturation)
    return "steer saturated over " + formatted("%.0f %%", 1e2 * trial.drive.saturated) + " of the drive";
  return "";
}

double peak_of(const Trial& trial) { return trial.margins.sensitivity_peak.value_or(HUGE_VAL); }

std::size_t least(const std::vector<Trial>& trials, const std::vector<std::size_t>& among,
                  double (*measure)(const Trial&)) {
  return *std::min_element(among.begin(), among.end(), [&](std::size_t a, std::size_t b) {
    return measure(trials[a]) < measure(trials[b]);
  });
}

std::string count_text(std::size_t of, std::size_t all) {
  return std::to_string(of) + " of " + std::to_string(all);
}

Choice none_of(const std::vector<Trial>& trials) {
  std::size_t unstable = 0, failing = 0;
  for (const Trial& trial : trials) {
    unstable += trial.margins.stable ? 0u : 1u;
    failing += trial.drive.outcome == Outcome::finished ? 0u : 1u;
  }
  return {std::nullopt, "None is recommended. Of " + std::to_string(trials.size()) + " settings " +
                            std::to_string(unstable) + " are not stable on the straight and " +
                            std::to_string(failing) +
                            " do not get round the course; what is left has next to no gain margin."};
}

}  // namespace

Result<Trial> tried(const Scenario& scenario, const SampledLoop& loop, std::shared_ptr<const Ground> ground,
                    std::string name, std::string source, const LoopGains& gains, double filter) {
  Trial trial;
  trial.name = std::move(name);
  trial.source = std::move(source);
  trial.gains = gains;
  trial.filter = filter;
  SampledLoop with = with_gains(loop, gains);
  with.filter = filter;
  trial.margins = margins(with);
  const auto plan = make_plan(with_gains(scenario, gains, filter), std::move(ground));
  if (!plan) return plan.error();
  Trace trace;
  trial.drive = drive(*plan, &trace);
  trial.how_it_went = reason(*plan, trial.drive, trace);
  trial.against = against_by_loop(trial.margins);
  if (trial.drive.outcome != Outcome::finished)
    trial.against += (trial.against.empty() ? "the drive " : "; the drive ") + trial.how_it_went;
  trial.near_edge = near_edge_of(trial);
  return trial;
}

Choice recommended(const std::vector<Trial>& trials) {
  std::vector<std::size_t> left, well_inside;
  for (std::size_t i = 0; i < trials.size(); ++i) {
    if (!trials[i].against.empty()) continue;
    left.push_back(i);
    if (trials[i].near_edge.empty()) well_inside.push_back(i);
  }
  if (left.empty()) return none_of(trials);
  if (well_inside.empty()) {
    const std::size_t best = least(trials, left, peak_of);
    return {best, trials[best].name + ": the lowest sensitivity peak (" +
                      formatted("%.2f", peak_of(trials[best])) + ") of the " +
                      count_text(left.size(), trials.size()) +
                      " that are stable and get round; none is well inside the stable range."};
  }
  const auto rms = [](const Trial& trial) { return trial.drive.deviation_rms; };
  const double least_rms = rms(trials[least(trials, well_inside, +rms)]);
  std::vector<std::size_t> level;
  for (const std::size_t i : well_inside) {
    if (rms(trials[i]) <= as_good * least_rms) level.push_back(i);
  }
  const std::size_t best = least(trials, level, peak_of);
  std::string why = trials[best].name + ": " + (level.size() > 1 ? "within 5 % of " : "") +
                    "the least rms deviation (" + formatted("%.2f mm", 1e3 * rms(trials[best])) +
                    ") of the " + count_text(well_inside.size(), trials.size()) +
                    " that get round and stay well inside the stable range";
  if (level.size() > 1) why += ", and the lowest sensitivity peak of those";
  why += " (peak " + formatted("%.2f", peak_of(trials[best]));
  if (trials[best].margins.gain_high)
    why += ", gain margin " + formatted("%.1f dB", decibels(*trials[best].margins.gain_high));
  return {best, why + ")."};
}

}  // namespace lw
