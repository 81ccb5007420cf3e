#include "engine/tuning/search.h"

#include <algorithm>
#include <cmath>

#include "engine/drive/drive.h"
#include "engine/numeric/words.h"
#include "engine/theory/margins.h"
#include "engine/tuning/rules.h"
#include "engine/tuning/search_space.h"

namespace lw {
namespace {

constexpr double not_driven = 1e6, not_finished = 1e3;  // breaches beyond any limit's

/// One limit against one candidate.
struct Held {
  std::string text;  // "deviation 2.31 mm, limit 2 mm"
  double breach;     // share by which it is broken; 0 = kept
  bool of_deviation;
};

double over(double value, double limit) {
  if (value <= limit) return 0.0;
  return limit > 0.0 ? value / limit - 1.0 : 1.0 + value;
}

std::vector<Held> held_to(const SearchLimits& limits, const Candidate& candidate) {
  std::vector<Held> all;
  const auto most = [&](const char* name, double value, const std::optional<double>& limit, const char* unit,
                        bool of_deviation) {
    if (limit)
      all.push_back({name + significant(value, 3) + unit + ", limit " + significant(*limit, 3) + unit,
                     over(value, *limit), of_deviation});
  };
  most("deviation ", 1e3 * candidate.deviation_max, limits.deviation_mm, " mm", true);
  most("rms deviation ", 1e3 * candidate.deviation_rms, limits.deviation_rms_mm, " mm", true);
  most("reversals ", candidate.reversals_per_s, limits.reversals_per_s, " per s", false);
  most("saturated ", 1e2 * candidate.saturated, limits.saturated_pct, " % of the time", false);
  const bool of_loop = limits.gain_margin_db || limits.sensitivity_peak;
  if (of_loop && !candidate.stable) all.push_back({"the loop on the straight is unstable", 2.0, false});
  if (limits.gain_margin_db && candidate.stable) {
    const double high = candidate.gain_high_db.value_or(HUGE_VAL);
    const double low = candidate.gain_low_db ? -*candidate.gain_low_db : HUGE_VAL;
    const double margin = std::min(high, low);
    const double missing =
        std::max(0.0, *limits.gain_margin_db - margin) / std::max(1.0, *limits.gain_margin_db);
    all.push_back({"gain margin " + significant(margin, 3) + " dB, limit " +
                       significant(*limits.gain_margin_db, 3) + " dB",
                   missing, false});
  }
  if (candidate.stable)
    most("sensitivity peak ", candidate.sensitivity_peak.value_or(1.0), limits.sensitivity_peak, "", false);
  return all;
}

double breach_of(const std::vector<Held>& all, bool with_deviation) {
  double sum = 0.0;
  for (const Held& one : all) {
    if (with_deviation || !one.of_deviation) sum += one.breach;
  }
  return sum;
}

void add_margins(const Scenario& scenario, Candidate& candidate) {
  const Result<SampledLoop> loop = linearise(scenario);
  candidate.stable = false;
  if (!loop) return;
  const Margins found = margins(*loop);
  candidate.stable = found.stable;
  if (!found.stable) return;
  if (found.gain_high) candidate.gain_high_db = decibels(*found.gain_high);
  if (found.gain_low) candidate.gain_low_db = decibels(*found.gain_low);
  candidate.sensitivity_peak = found.sensitivity_peak;
}

int draws_of(const Scenario& scenario, int draws) {
  return scenario.sensors.noise_pct > 0.0 || scenario.loop.jitter_pct > 0.0 ? std::max(1, draws) : 1;
}

/// Drives a scenario as often as there are draws; the first drive that does not finish is enough to know.
void drive_all(const Plan& plan, int draws, Candidate& candidate) {
  candidate.progress = 1.0;
  for (int number = 0; number < draws; ++number) {
    const Summary summary = drive(plan, nullptr, static_cast<std::uint64_t>(number));
    candidate.time += summary.time / draws;
    candidate.deviation_max = std::max(candidate.deviation_max, summary.deviation_max);
    candidate.deviation_rms = std::max(candidate.deviation_rms, summary.deviation_rms);
    candidate.reversals_per_s += summary.reversals_per_s / draws;
    candidate.saturated += summary.saturated / draws;
    if (summary.outcome == Outcome::finished) {
      ++candidate.finished;
      continue;
    }
    candidate.progress = summary.progress / plan.rig.task.finish;
    return;
  }
}

class Search {
 public:
  Search(const Scenario& scenario, const SearchSettings& settings, std::vector<Axis> axes,
         std::shared_ptr<const Ground> ground)
      : scenario_(scenario),
        settings_(settings),
        axes_(std::move(axes)),
        ground_(std::move(ground)),
        draws_(draws_of(scenario, settings.draws)) {}

  const std::vector<Axis>& axes() const { return axes_; }
  Scenario with(const std::vector<double>& values) const {
    return with_values(scenario_, settings_.free, values);
  }

  /// Drives a candidate over the common ground and keeps it.
  Candidate tried(const std::vector<double>& values) {
    Candidate candidate = judged(with(values), ground_);
    candidate.values = values;
    ++evaluations;
    kept_.push_back(candidate);
    if (!best_ || better(worth_of(candidate, settings_.goal, true), worth_of(*best_, settings_.goal, true)))
      best_ = candidate;
    return candidate;
  }

  Candidate judged(const Scenario& scenario, const std::shared_ptr<const Ground>& ground) const {
    Candidate candidate;
    candidate.values = values_of(scenario, settings_.free);
    const Result<Plan> plan = make_plan(scenario, ground);
    if (!plan) {
      candidate.breach = not_driven;
      return candidate;
    }
    drive_all(*plan, draws_, candidate);
    if (settings_.limits.gain_margin_db || settings_.limits.sensitivity_peak)
      add_margins(scenario, candidate);
    candidate.breach = breach(candidate, true);
    return candidate;
  }

  Worth worth_of(const Candidate& candidate, Goal goal, bool with_deviation) const {
    if (candidate.breach >= not_driven) return {candidate.breach, 0.0};
    return {breach(candidate, with_deviation), goal == Goal::time ? candidate.time : candidate.deviation_max};
  }

  const std::optional<Candidate>& best() const { return best_; }

  /// Of all that keep every limit but those on deviation: not beaten in both time and deviation.
  std::vector<Candidate> front() const {
    std::vector<Candidate> able;
    for (const Candidate& candidate : kept_) {
      if (candidate.breach < not_driven && breach(candidate, false) == 0.0) able.push_back(candidate);
    }
    std::stable_sort(able.begin(), able.end(), [](const Candidate& a, const Candidate& b) {
      return a.time != b.time ? a.time < b.time : a.deviation_max < b.deviation_max;
    });
    std::vector<Candidate> front;
    for (const Candidate& candidate : able) {
      if (front.empty() || candidate.deviation_max < front.back().deviation_max) front.push_back(candidate);
    }
    return front;
  }

  int evaluations = 0;

 private:
  double breach(const Candidate& candidate, bool with_deviation) const {
    if (candidate.finished < draws_)
      return not_finished * (1.0 + (draws_ - candidate.finished) - std::clamp(candidate.progress, 0.0, 1.0));
    return breach_of(held_to(settings_.limits, candidate), with_deviation);
  }

  const Scenario& scenario_;
  const SearchSettings& settings_;
  std::vector<Axis> axes_;
  std::shared_ptr<const Ground> ground_;
  int draws_;
  std::vector<Candidate> kept_;
  std::optional<Candidate> best_;
};

/// Runs the minimiser for one goal over a number of candidates. False when it was stopped.
bool search_for(Search& search, const SearchSettings& settings, Goal goal, bool with_deviation,
                int evaluations, const std::vector<std::vector<double>>& starts, std::uint64_t seed,
                const std::function<bool(const SearchProgress&)>& progress) {
  std::vector<std::vector<double>> points;
  for (const auto& values : starts) points.push_back(point_at(search.axes(), values));
  const auto worth = [&](const std::vector<double>& point) {
    return search.worth_of(search.tried(values_at(search.axes(), point)), goal, with_deviation);
  };
  const auto go_on = [&](const Minimised&) {
    if (!progress) return true;
    return progress({search.evaluations, settings.evaluations, search.best().value_or(Candidate{})});
  };
  MinimiseSettings how;
  how.evaluations = evaluations;
  how.seed = seed;
  how.closed_in = 1e-4;  // four digits are driven
  return !minimise(points, worth, how, go_on).stopped;
}

/// Ground that serves every candidate: wide enough for sensors at their widest.
Result<std::shared_ptr<const Ground>> common_ground(const Scenario& scenario, const std::vector<Axis>& axes,
                                                    std::shared_ptr<const Ground> given) {
  for (const Axis& axis : axes) {
    if (axis.variable != Variable::spacing) continue;
    Scenario widest = scenario;
    set_value(widest, Variable::spacing, axis.high);
    return make_ground(widest);
  }
  if (given) return given;
  return make_ground(scenario);
}

std::optional<Error> fault_of(const SearchSettings& settings) {
  if (settings.evaluations < 1) return Error{"search", "evaluations", "at least 1"};
  if (settings.draws < 1) return Error{"search", "draws", "at least 1"};
  if (!(settings.front_share >= 0.0 && settings.front_share < 1.0))
    return Error{"search", "share for the front", "at least 0 and below 1"};
  for (const auto& start : settings.starts) {
    if (start.size() != settings.free.size())
      return Error{"search", "a start", "has another number of values than are free"};
  }
  return {};
}

std::string broken_limits(const SearchSettings& settings, const Candidate& candidate, int draws) {
  if (candidate.breach >= not_driven) return "it cannot be driven";
  if (candidate.finished < draws)
    return "it does not finish: " + significant(1e2 * candidate.progress, 3) + " % of the way";
  std::string text;
  for (const Held& one : held_to(settings.limits, candidate)) {
    if (one.breach > 0.0) text += (text.empty() ? "" : "; ") + one.text;
  }
  return text;
}

std::string values_text(const SearchSettings& settings, const Candidate& candidate) {
  static constexpr const char* units[] = {"", "", "", " ms", " %", " mm", " mm"};
  std::string text;
  for (std::size_t i = 0; i < settings.free.size(); ++i) {
    const Variable variable = settings.free[i].variable;
    text += (i > 0 ? ", " : "") + std::string(name_of(variable)) + ' ' + significant(candidate.values[i], 4) +
            units[static_cast<int>(variable)];
  }
  return text;
}

std::string figures_text(const Candidate& candidate) {
  return significant(candidate.time, 4) + " s, at most " + significant(1e3 * candidate.deviation_max, 3) +
         " mm off the line, " + significant(candidate.reversals_per_s, 3) + " reversals per s";
}

std::string words_of(const SearchSettings& settings, const SearchAnswer& answer, int draws) {
  const std::string goal = settings.goal == Goal::time ? "Fastest" : "Straightest";
  std::string text = answer.stops_it.empty()
                         ? goal + " within the limits: " + figures_text(answer.best)
                         : "Nothing was found that keeps the limits. Nearest: " + figures_text(answer.best) +
                               " (" + answer.stops_it + ")";
  text += ", with " + values_text(settings, answer.best) + ". ";
  const std::string own_breaks = broken_limits(settings, answer.own, draws);
  text += "The scenario as it stands: ";
  text += answer.own.finished == draws ? figures_text(answer.own) : "";
  if (!own_breaks.empty()) text += (answer.own.finished == draws ? " (" : "(") + own_breaks + ")";
  text += ". " + std::to_string(answer.evaluations) + " candidates, " + std::to_string(draws) +
          (draws == 1 ? " drive each" : " drives each, the same for all") +
          (answer.stopped ? "; stopped before the end." : ".");
  return text;
}

}  // namespace

std::vector<double> values_of(const Scenario& scenario, const std::vector<FreeVariable>& free) {
  std::vector<double> values;
  for (const FreeVariable& one : free) values.push_back(value_of(scenario, one.variable));
  return values;
}

std::vector<std::vector<double>> rule_starts(const Scenario& scenario,
                                             const std::vector<FreeVariable>& free) {
  std::vector<std::vector<double>> starts;
  const Result<SampledLoop> loop = linearise(scenario);
  if (!loop) return starts;
  const Critical alone = critical(*loop);
  if (!alone.gain) return starts;
  for (const Rule& rule : published_rules) {
    const LoopGains gains = per_loop(gains_by(rule, *alone.gain, *alone.period), loop->period);
    starts.push_back(values_of(with_gains(scenario, gains, filter_for(scenario, gains)), free));
  }
  return starts;
}

Scenario with_values(Scenario scenario, const std::vector<FreeVariable>& free,
                     const std::vector<double>& values) {
  for (std::size_t i = 0; i < free.size(); ++i) set_value(scenario, free[i].variable, values[i]);
  return scenario;
}

Result<Candidate> judge(const Scenario& scenario, const SearchSettings& settings,
                        std::shared_ptr<const Ground> ground) {
  const Result<Plan> plan = make_plan(scenario, std::move(ground));
  if (!plan) return plan.error();
  const Search search(scenario, settings, {}, plan->ground);
  Candidate candidate = search.judged(scenario, plan->ground);
  add_margins(scenario, candidate);
  return candidate;
}

Result<SearchAnswer> search_gains(const Scenario& scenario, const SearchSettings& settings,
                                  const std::function<bool(const SearchProgress&)>& progress,
                                  std::shared_ptr<const Ground> ground) {
  if (const auto fault = fault_of(settings)) return *fault;
  Result<std::vector<Axis>> axes = axes_of(scenario, settings.free);
  if (!axes) return axes.error();
  const Result<Candidate> own = judge(scenario, settings, ground);
  if (!own) return own.error();
  const auto common = common_ground(scenario, *axes, ground);
  if (!common) return common.error();

  Search search(scenario, settings, std::move(*axes), *common);
  std::vector<std::vector<double>> starts{own->values};
  starts.insert(starts.end(), settings.starts.begin(), settings.starts.end());
  const int other = static_cast<int>(settings.front_share * settings.evaluations);
  const Goal opposite = settings.goal == Goal::time ? Goal::deviation : Goal::time;
  SearchAnswer answer;
  answer.own = *own;
  answer.stopped = !search_for(search, settings, settings.goal, true, settings.evaluations - other, starts,
                               settings.seed, progress);
  if (!answer.stopped && other > 0)
    answer.stopped = !search_for(search, settings, opposite, false, other, {search.best()->values},
                                 settings.seed + 1, progress);

  const int draws = draws_of(scenario, settings.draws);
  answer.evaluations = search.evaluations;
  answer.front = search.front();
  answer.best = *own;
  answer.scenario = scenario;
  if (search.best()) {  // judged again over its own ground, where sensors may have moved
    Scenario found = search.with(search.best()->values);
    const auto best = judge(found, settings);
    if (best &&
        better(search.worth_of(*best, settings.goal, true), search.worth_of(*own, settings.goal, true))) {
      answer.best = *best;
      answer.scenario = std::move(found);
    }
  }
  answer.stops_it = broken_limits(settings, answer.best, draws);
  answer.words = words_of(settings, answer, draws);
  return answer;
}

}  // namespace lw
