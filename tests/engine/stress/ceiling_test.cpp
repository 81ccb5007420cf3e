// The ladder of base speeds: where it ends against closed forms, what it says, and that it is not fooled.
#include "engine/stress/ceiling.h"

#include "tests/catch.h"
#include "tests/engine/drive/courses.h"

using namespace lw;
using namespace lw::test;

namespace {

Ceiling ceiling_of(const Scenario& scenario, const Choice& choice, const LadderSettings& settings = {}) {
  const auto found = find_ceiling(scenario, choice, settings);
  if (!found) FAIL(text_of(found.error()));
  return *found;
}
Ceiling ceiling_of(const Scenario& scenario) { return ceiling_of(scenario, own_choice(scenario)); }

}  // namespace

TEST_CASE("on a circle the ceiling is the base at which the steer limit turns just tightly enough") {
  // A turn of radius R takes the steer b base / (2 R) on equal wheels (differential drive: yaw rate is the
  // difference of the rim speeds over the track width, Siegwart and Nourbakhsh 2004, chapter 3.2). The line
  // is lost 4 mm outside, 0.7 % of the radius.
  for (const double limit_pct : {4.0, 8.0}) {
    Scenario scenario = on_circle(600.0, limit_pct < 6.0 ? 1.0 : -1.0);
    scenario.controller.kp = 3.0;
    scenario.controller.steer_limit_pct = limit_pct;
    scenario.vehicle.turn_time_constant_ms = 0.0;
    scenario.vehicle.forward_time_constant_ms = 0.0;
    scenario.sensors.forward_mm = 40.0;
    scenario.drive.lost_mm = 4.0;
    scenario.drive.start_offset_mm = limit_pct < 6.0 ? 1.0 : -1.0;  // the guide point starts near the line
    const double expected_pct = limit_pct * 2.0 * 600.0 / 120.0;
    const Ceiling found = ceiling_of(scenario);
    REQUIRE(found.base_pct);
    CHECK(*found.base_pct == Approx(expected_pct).epsilon(0.02));
    REQUIRE(found.first_beyond() != nullptr);
    REQUIRE(found.first_beyond()->loss);
    CHECK(found.first_beyond()->loss->why == "steer saturated");
    CHECK(found.first_beyond()->loss->where == "in the 600 mm bend");
  }
}

TEST_CASE("a drive at the ceiling finishes, and the next rung up does not") {
  Scenario scenario = on_oval();
  scenario.vehicle.turn_time_constant_ms = 150.0;
  const Ceiling found = ceiling_of(scenario);
  REQUIRE(found.base_pct);
  REQUIRE(found.last() != nullptr);
  REQUIRE(found.first_beyond() != nullptr);
  CHECK(found.first_beyond()->base_pct - *found.base_pct <= 0.1 + 1e-9);
  for (const Rung* rung : {found.last(), found.first_beyond()}) {
    scenario.controller.base_pct = rung->base_pct;
    const auto plan = make_plan(scenario);
    REQUIRE(plan.ok());
    const Summary summary = drive(*plan);
    CHECK(summary.outcome == rung->summary.outcome);
    CHECK(summary.time == rung->summary.time);  // the same ground and draws: the same bits
    CHECK(summary.deviation_max == rung->summary.deviation_max);
  }
  CHECK(in_words(found).find("leaves the line at") != std::string::npos);
}

TEST_CASE("a rung that finishes again above the border is named and is no ceiling") {
  const Scenario scenario = on_straight(1500.0);
  const Choice gap = [&](double base_pct) {
    Controller controller = scenario.controller;
    controller.base_pct = base_pct;
    if (base_pct > 41.3 && base_pct < 61.0) controller.kp = -2.0;  // steers away
    return Result<Controller>(controller);
  };
  Scenario askew = scenario;
  askew.drive.start_offset_mm = 3.0;
  const Ceiling found = ceiling_of(askew, gap);
  REQUIRE(found.base_pct);
  CHECK(*found.base_pct == Approx(41.3).margin(0.1));
  CHECK(*found.base_pct <= 41.3);
  REQUIRE(found.again_pct);
  CHECK(*found.again_pct == 62.5);
  CHECK_FALSE(found.open);
  CHECK(in_words(found).find("At 62.50 % it finishes again") != std::string::npos);
}

TEST_CASE("a base without a choice is a rung that says why and is not driven") {
  const Scenario scenario = on_straight(1500.0);
  const Choice none_above = [&](double base_pct) -> Result<Controller> {
    if (base_pct > 50.0) return Error{"", "no gain", "nothing holds it"};
    Controller controller = scenario.controller;
    controller.base_pct = base_pct;
    return controller;
  };
  const Ceiling found = ceiling_of(scenario, none_above);
  REQUIRE(found.base_pct);
  CHECK(*found.base_pct == 50.0);
  CHECK_FALSE(found.first_beyond()->driven);
  CHECK(found.first_beyond()->reason == "no gain: nothing holds it");
}

TEST_CASE("what is too slow for the time limit lies below the ladder's first rung that finishes") {
  Scenario scenario = on_straight(2000.0);
  // 50 mm wheels at 33.75 % of 200 rpm, from 70 mm on and 80 ms late: between two rungs.
  scenario.drive.time_limit_s = 1930.0 / (0.3375 * 523.6) + 0.08;
  const Ceiling found = ceiling_of(scenario);
  CHECK(found.open);
  CHECK(*found.base_pct == 100.0);
  REQUIRE(found.slowest_pct);
  CHECK(*found.slowest_pct == 35.0);
  CHECK(in_words(found).find("the time limit ends it") != std::string::npos);

  scenario.drive.time_limit_s = 0.5;
  const Ceiling none = ceiling_of(scenario);
  CHECK_FALSE(none.base_pct);
  CHECK(none.last() == nullptr);
  CHECK(in_words(none).find("No base gets round. At 100.00 % it comes furthest") == 0);
}

TEST_CASE("settings of a ladder out of range are refused with the rule") {
  const Scenario scenario = on_straight();
  const auto refused = [&](const LadderSettings& settings) {
    const auto found = find_ceiling(scenario, own_choice(scenario), settings);
    REQUIRE_FALSE(found.ok());
    return text_of(found.error());
  };
  CHECK(refused({.low_pct = 0.0}) == "ladder: lowest base: above 0 and below 100 %");
  CHECK(refused({.low_pct = 50.0, .high_pct = 40.0}) ==
        "ladder: highest base: above the lowest base and at most 100 %");
  CHECK(refused({.step_pct = 0.0}) == "ladder: step: at least 0.1 %");
  CHECK(refused({.resolution_pct = 0.0}) == "ladder: resolution: at least 0.0001 %");
}
