// P, PI, PD and PID of one vehicle: terms taken away, and gains set afresh from the critical gain.
#include "engine/tuning/kinds.h"

#include "engine/theory/margins.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

TEST_CASE("a kind keeps its own terms of a controller and drops the others") {
  Controller controller;
  controller.kp = 0.4, controller.ki = 0.01, controller.kd = 2.0;
  for (const Kind kind : all_kinds) {
    const Controller of = of_kind(controller, kind);
    CHECK(of.kp == 0.4);
    CHECK((of.ki != 0.0) == has_integral(kind));
    CHECK((of.kd != 0.0) == has_derivative(kind));
    CHECK(covers(controller, kind));
  }
  controller.ki = 0.0;
  CHECK(covers(controller, Kind::PD));
  CHECK_FALSE(covers(controller, Kind::PI));
  CHECK_FALSE(covers(controller, Kind::PID));
}

TEST_CASE("gains set afresh are the published shares of the critical gain, in the controller's unit") {
  Scenario scenario = cart(5.0, 3.0);
  const Critical alone = critical(loop_of(scenario));
  REQUIRE(alone.gain);
  const auto at = [&](Kind kind) {
    const auto controller = retuned(scenario, kind, scenario.controller.base_pct);
    if (!controller) FAIL(text_of(controller.error()));
    return *controller;
  };
  CHECK(at(Kind::P).kp == Approx(0.5 * *alone.gain));
  // Tyreus and Luyben 1992: Kc / 3.2 and 2.2 Tc; with D Kc / 2.2, 2.2 Tc, Tc / 6.3.
  const Controller both = at(Kind::PID);
  CHECK(both.kp == Approx(*alone.gain / 2.2));
  CHECK(both.kp * 5e-3 / both.ki == Approx(2.2 * *alone.period));
  CHECK(both.kd * 5e-3 / both.kp == Approx(*alone.period / 6.3));
  CHECK(at(Kind::PI).kp == Approx(*alone.gain / 3.2));

  scenario.controller.gains = GainUnit::per_second;
  const Controller seconds = at(Kind::PID);
  CHECK(seconds.kp / seconds.ki == Approx(2.2 * *alone.period));
  CHECK(seconds.kd / seconds.kp == Approx(*alone.period / 6.3));
}

TEST_CASE("where P alone has no critical gain, gains afresh are refused with the reason") {
  Scenario scenario = cart(5.0, 0.0);
  scenario.sensors.forward_mm = 0.0;
  const auto controller = retuned(scenario, Kind::P, 40.0);
  REQUIRE_FALSE(controller.ok());
  CHECK(text_of(controller.error()).find("no critical gain to set gains from") == 0);
}
