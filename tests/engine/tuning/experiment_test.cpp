// The critical gain found by experiment, against the theory of the loop.
#include "engine/tuning/experiment.h"

#include "engine/theory/margins.h"
#include "engine/tuning/effects.h"
#include "engine/tuning/tune.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

Straight straight_of(const Scenario& scenario) {
  Result<Straight> straight = make_straight(scenario);
  if (!straight) FAIL(text_of(straight.error()));
  return *straight;
}

CriticalStudy study_of(const Scenario& scenario) {
  Result<CriticalStudy> study = study_critical(scenario);
  if (!study) FAIL(text_of(study.error()));
  return *study;
}

std::string all_words(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& sentence : words) text += sentence + '\n';
  return text;
}

}  // namespace

TEST_CASE("the swing on a straight gives the critical gain of the theory") {
  for (const bool edge : {false, true}) {
    for (const double period_ms : {1.0, 5.5, 20.0}) {
      for (const double delay_ms : {0.0, 3.3, 7.5, 20.0}) {
        CAPTURE(edge, period_ms, delay_ms);
        const Straight straight =
            straight_of(edge ? edge_cart(period_ms, delay_ms) : cart(period_ms, delay_ms));
        const Critical theory = critical(straight.loop);
        REQUIRE(theory.gain);
        const CriticalFound found = critical_by_experiment(straight, {});
        REQUIRE(found.gain);
        CHECK(*found.gain == Approx(*theory.gain).epsilon(0.02));
        CHECK(found.period == Approx(*theory.period).epsilon(0.003));
        CHECK(found.limited == 0.0);
        CHECK(found.amplitude < 0.3 * straight.spot_radius);
        // What is left of the difference goes with the sensors' slope over the swing.
        const double share = swing_slope(straight, found.amplitude) / straight.loop.slope;
        CHECK(*found.gain * share == Approx(*theory.gain).epsilon(0.003));
      }
    }
  }
}

TEST_CASE("unequal wheels, dead band and lags leave experiment and theory together") {
  Scenario scenario = cart(8.0, 5.0);
  scenario.vehicle.wheel_left_mm = 48.5;
  scenario.vehicle.dead_band_pct = 6.0;
  scenario.vehicle.supply_pct = 90.0;
  scenario.sensors.lag_ms = 6.0;
  scenario.sensors.gain = {0.95, 1.04};
  scenario.sensors.offset_pct = {1.5, -0.5};
  scenario.floor.light_pct_per_m = {3.0, 40.0};  // left out of the experiment
  const Straight straight = straight_of(scenario);
  const CriticalFound found = critical_by_experiment(straight, {});
  REQUIRE(found.gain);
  CHECK(*found.gain == Approx(*critical(straight.loop).gain).epsilon(0.02));
}

TEST_CASE("the integral gain that a straight no longer stands is that of the theory") {
  const Scenario scenario = cart(5.0, 7.5);
  const double kp = 0.5 * *critical(loop_of(scenario)).gain;
  const Result<IntegralLimit> limit = integral_limit(scenario, kp);
  REQUIRE(limit);
  REQUIRE(limit->theory);
  REQUIRE(limit->experiment.gain);
  CHECK(*limit->experiment.gain == Approx(*limit->theory).epsilon(0.03));
}

// Above the speed at which the forward offset no longer outweighs the lags, every gain swings up.
TEST_CASE("where theory has no critical gain the experiment finds none either, and says so") {
  Scenario scenario = cart(5.0, 7.5);
  scenario.sensors.forward_mm = 10.0;
  REQUIRE_FALSE(critical(loop_of(scenario)).gain);
  const CriticalFound found = critical_by_experiment(straight_of(scenario), {});
  CHECK_FALSE(found.gain);
  CHECK(found.reason.find("however small Kp") != std::string::npos);
  CHECK(all_words(study_of(scenario).words).find("no critical gain of P alone. By theory") !=
        std::string::npos);
}

TEST_CASE("a larger swing needs more gain, by as much as the sensors lose of their slope") {
  Scenario scenario = cart(10.0, 20.0);
  scenario.controller.base_pct = 30.0;
  const CriticalStudy study = study_of(scenario);
  REQUIRE(study.theory.gain);
  int kept_up = 0;
  for (const LargerSwing& larger : study.larger) {
    if (!larger.kept_up) continue;
    ++kept_up;
    CHECK(larger.slope_left < 0.9);
    // The describing function takes the swing for a sine, which a strong loss of slope bends.
    const double good_to = larger.slope_left > 0.8 ? 0.02 : 0.08;
    CHECK(*larger.found.gain * larger.slope_left == Approx(*study.theory.gain).epsilon(good_to));
  }
  CHECK(kept_up >= 1);
}

TEST_CASE("effects are told apart, and the words name the one that explains") {
  Scenario scenario = cart(5.0, 20.0);
  scenario.vehicle.command_step_pct = 0.1;
  scenario.sensors.step_pct = 12.0;  // the swing is a few steps
  const CriticalStudy study = study_of(scenario);
  REQUIRE(study.alone.size() == 2);
  CHECK(study.alone[0].effect == Effect::reading_steps);
  CHECK(study.alone[1].effect == Effect::command_steps);
  REQUIRE(study.alone[0].found.gain);
  REQUIRE(study.alone[1].found.gain);
  CHECK(std::fabs(study.alone[0].change) > 0.03);
  CHECK(std::fabs(study.alone[1].change) < 0.01);
  CHECK(all_words(study.words).find("What explains it best is rounding of readings to 12 %") !=
        std::string::npos);
}

TEST_CASE("noise scatters the critical gain from draw to draw and hardly moves its mean") {
  Scenario scenario = cart(5.0, 20.0);
  scenario.sensors.noise_pct = 2.0;
  const CriticalStudy study = study_of(scenario);
  REQUIRE(study.alone.size() == 1);
  CHECK(study.alone[0].effect == Effect::noise);
  CHECK(study.alone[0].found.scatter > 0.005);
  CHECK(std::fabs(study.alone[0].change) < 0.1);
  CHECK(study.ideal.scatter == 0.0);
}

TEST_CASE("a scenario without any of these has an ideal experiment only") {
  const CriticalStudy study = study_of(cart(5.0, 7.5));
  CHECK(study.alone.empty());
  CHECK(*study.as_it_is.gain == Approx(*study.ideal.gain).epsilon(1e-3));
}

TEST_CASE("what no loop can be made of is refused with its reason") {
  Scenario scenario = cart(5.0, 7.5);
  scenario.course.line_mm = 60.0;
  const auto straight = make_straight(scenario);
  REQUIRE_FALSE(straight);
  CHECK(straight.error().why.find("no spot is over an edge") != std::string::npos);
}
