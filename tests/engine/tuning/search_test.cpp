// The gain search: optima known beforehand, limits, the same draws for all, and that it does as it is told.
#include "engine/tuning/search.h"

#include <cmath>

#include "engine/drive/drive.h"
#include "engine/theory/margins.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

SearchAnswer searched(const Scenario& scenario, const SearchSettings& settings) {
  const auto found = search_gains(scenario, settings);
  if (!found) FAIL(text_of(found.error()));
  return *found;
}

Scenario noisy_oval() {
  Scenario scenario = on_oval();
  scenario.sensors.noise_pct = 1.0;
  scenario.loop.jitter_pct = 10.0;
  return scenario;
}

}  // namespace

TEST_CASE("with a gain margin of 6.02 dB asked for, the straightest drive of P has half the critical gain") {
  // On a circle the error of P falls as its gain grows, so the margin is what ends it; a factor of 2 is 6.02
  // dB.
  Scenario scenario = on_circle(2000.0, 1.0);
  scenario.drive.start_offset_mm = 70.0 * 70.0 / (2.0 * 2000.0);  // the guide point starts on the line
  scenario.controller.kp = 0.2;
  SearchSettings settings;
  settings.free = {{Variable::kp, {}, {}}};
  settings.goal = Goal::deviation;
  settings.limits.gain_margin_db = 20.0 * std::log10(2.0);
  settings.evaluations = 150;
  const auto critical_gain = critical(loop_of(scenario)).gain;
  REQUIRE(critical_gain);
  const SearchAnswer found = searched(scenario, settings);
  CHECK(found.stops_it.empty());
  CHECK(found.scenario.controller.kp == Approx(0.5 * *critical_gain).epsilon(0.01));
  CHECK(found.best.deviation_max < found.own.deviation_max);
}

TEST_CASE("on a straight with nothing in the way the fastest base is full command") {
  Scenario scenario = on_straight(3000.0);
  SearchSettings settings;
  settings.free = {{Variable::base, {}, 90.0}};
  settings.evaluations = 80;
  const SearchAnswer found = searched(scenario, settings);
  CHECK(found.scenario.controller.base_pct == Approx(90.0).epsilon(1e-3));
}

TEST_CASE("what the search answers is what a drive of that scenario gives, and keeps the limits") {
  const Scenario scenario = noisy_oval();
  SearchSettings settings;
  settings.free = {
      {Variable::kp, {}, {}}, {Variable::kd, {}, {}}, {Variable::base, {}, {}}, {Variable::spacing, {}, {}}};
  settings.limits.deviation_mm = 4.0;
  settings.limits.saturated_pct = 2.0;
  settings.limits.gain_margin_db = 6.0;
  settings.evaluations = 200;
  settings.draws = 2;
  const SearchAnswer found = searched(scenario, settings);
  REQUIRE(found.best.breach == 0.0);
  CHECK(found.evaluations == 200);
  CHECK(found.best.time < found.own.time);
  double time = 0.0, most = 0.0;
  for (const std::uint64_t number : {0u, 1u}) {
    const auto plan = make_plan(found.scenario);
    REQUIRE(plan.ok());
    const Summary summary = drive(*plan, nullptr, number);
    CHECK(summary.outcome == Outcome::finished);
    time += 0.5 * summary.time;
    most = std::max(most, summary.deviation_max);
  }
  CHECK(found.best.time == Approx(time).epsilon(1e-12));
  CHECK(found.best.deviation_max == most);
  CHECK(most <= 4e-3);
  const Margins there = margins(loop_of(found.scenario));
  CHECK(there.stable);
  CHECK(decibels(*there.gain_high) >= 6.0);

  // Nothing on the front is beaten by another, and time and deviation run against each other.
  REQUIRE(found.front.size() >= 2);
  for (std::size_t i = 1; i < found.front.size(); ++i) {
    CHECK(found.front[i].time > found.front[i - 1].time);
    CHECK(found.front[i].deviation_max < found.front[i - 1].deviation_max);
  }
}

TEST_CASE("the answer is at least as good as every start, judged alike") {
  const Scenario scenario = noisy_oval();
  SearchSettings settings;
  settings.free = {{Variable::kp, {}, {}}, {Variable::ki, {}, {}}};
  settings.goal = Goal::deviation;
  settings.limits.gain_margin_db = 3.0;
  settings.evaluations = 30;
  settings.draws = 2;
  settings.starts = rule_starts(scenario, settings.free);
  REQUIRE(settings.starts.size() >= 8);
  const SearchAnswer found = searched(scenario, settings);
  for (const auto& start : settings.starts) {
    const auto judged = judge(with_values(scenario, settings.free, start), settings);
    REQUIRE(judged.ok());
    CHECK_FALSE(
        better({judged->breach, judged->deviation_max}, {found.best.breach, found.best.deviation_max}));
  }
}

TEST_CASE("a search repeats itself, and the seed of the search moves no drive") {
  const Scenario scenario = noisy_oval();
  SearchSettings settings;
  settings.free = {{Variable::kp, {}, {}}, {Variable::base, {}, {}}};
  settings.evaluations = 40;
  const SearchAnswer one = searched(scenario, settings), same = searched(scenario, settings);
  CHECK(one.best.values == same.best.values);
  CHECK(one.best.time == same.best.time);
  settings.seed = 9;
  const SearchAnswer other = searched(scenario, settings);
  CHECK(other.best.values != one.best.values);
  CHECK(other.own.deviation_rms == one.own.deviation_rms);
}

TEST_CASE("progress is told before every candidate, and false ends the search with the best so far") {
  const Scenario scenario = on_oval();
  SearchSettings settings;
  settings.free = {{Variable::kp, {}, {}}, {Variable::base, {}, {}}};
  settings.evaluations = 50;
  int calls = 0, last = -1;
  const auto found = search_gains(scenario, settings, [&](const SearchProgress& progress) {
    CHECK(progress.evaluations == ++last);
    CHECK(progress.of == 50);
    return ++calls < 12;
  });
  REQUIRE(found.ok());
  CHECK(found->stopped);
  CHECK(found->evaluations == 11);
  CHECK(found->words.find("stopped before the end") != std::string::npos);
}

TEST_CASE("limits that nothing keeps are named, with the nearest candidate") {
  Scenario scenario = on_oval();
  SearchSettings settings;
  settings.free = {{Variable::kp, {}, {}}};
  settings.limits.deviation_mm = 1e-3;
  settings.evaluations = 30;
  const SearchAnswer found = searched(scenario, settings);
  CHECK(found.best.breach > 0.0);
  CHECK(found.stops_it.find("deviation ") == 0);
  CHECK(found.stops_it.find("limit 0.001 mm") != std::string::npos);
  CHECK(found.words.find("Nothing was found that keeps the limits.") == 0);
}

TEST_CASE("gains of a search are in the controller's unit, sensors keep their order and shape") {
  Scenario scenario = on_oval();
  scenario.controller.gains = GainUnit::per_second;
  SearchSettings settings;
  settings.free = {{Variable::ki, {}, {}},
                   {Variable::kd, {}, {}},
                   {Variable::spacing, {}, {}},
                   {Variable::forward, {}, {}}};
  settings.limits.gain_margin_db = 6.0;
  settings.goal = Goal::deviation;
  settings.evaluations = 60;
  const SearchAnswer found = searched(scenario, settings);
  const Sensors& sensors = found.scenario.sensors;
  CHECK(sensors.lateral_mm[0] == -sensors.lateral_mm[1]);
  CHECK(found.best.values == values_of(found.scenario, settings.free));
  const auto loop = loop_of(found.scenario);
  CHECK(loop.gains.ki == Approx(found.best.values[0] * loop.period));
}

TEST_CASE("calls that make no sense are refused with the rule") {
  const Scenario scenario = on_oval();
  const auto refused = [&](const SearchSettings& settings) {
    const auto found = search_gains(scenario, settings);
    REQUIRE_FALSE(found.ok());
    return text_of(found.error());
  };
  SearchSettings settings;
  CHECK(refused(settings) == "free: nothing is set free to be searched");
  settings.free = {{Variable::kp, {}, {}}, {Variable::kp, {}, {}}};
  CHECK(refused(settings) == "free: kp: set free twice");
  settings.free = {{Variable::base, 20.0, 120.0}};
  CHECK(refused(settings) == "free: base = 120: between 0 and 100 %");
  settings.free = {{Variable::base, 60.0, 50.0}};
  CHECK(refused(settings) == "free: base = 60 to 50: the second is not above the first");
  settings.free = {{Variable::base, {}, {}}};
  settings.starts = {{1.0, 2.0}};
  CHECK(refused(settings) == "search: a start: has another number of values than are free");
  settings.starts = {};
  settings.evaluations = 0;
  CHECK(refused(settings) == "search: evaluations: at least 1");
}
