// The command loop: its keys, its words, its refusals.
#include <cmath>

#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

TEST_CASE("loop gives its keys in order, and null where there is no figure", "[shell]") {
  const Json json = json_from("loop --json " + scenario("straight"));
  CHECK(keys_of(json) ==
        "critical_gain critical_period_s gain_margin_db gain_margin_low_db phase_margin_deg delay_margin_ms "
        "sensitivity_peak stable poles critical_gain_low speed_mm_s error_per_mm lead_ms late_ms "
        "p_alone_speed_limit_mm_s p_alone_base_limit_pct summary notes");
  CHECK(json["stable"] == true);
  CHECK(json["gain_margin_low_db"].is_null());  // P alone may fall to nothing
  CHECK(json["poles"].size() == 3);
  CHECK(json["poles"][0].size() == 2);

  const Json swings = json_from("loop --json --set controller.kp=2 " + scenario("straight"));
  CHECK(swings["stable"] == false);
  CHECK(swings["gain_margin_db"].get<double>() < 0.0);
  CHECK(swings["delay_margin_ms"].is_null());
  CHECK(swings["sensitivity_peak"].is_null());
  CHECK(swings["critical_gain"] == json["critical_gain"]);  // of P alone, whatever the law
}

TEST_CASE("the margin in dB is the way from the gain to the critical gain of P alone", "[shell]") {
  const Json json = json_from("loop --json " + scenario("straight"));
  const double expected = 20.0 * std::log10(json["critical_gain"].get<double>() / 0.25);
  CHECK(json["gain_margin_db"].get<double>() == Approx(expected).epsilon(1e-9));
}

TEST_CASE("loop says in words what the forward offset does", "[shell]") {
  const Ran ran = linewright("loop " + scenario("straight"));
  CHECK(ran.code == 0);
  CHECK(ran.out.find("acts as a derivative of 253.2 ms (offset over speed) without any noise") !=
        std::string::npos);
}

TEST_CASE("a scenario without a linear loop is refused with the reason", "[shell]") {
  const auto refused = [](const std::string& set, const std::string& why) {
    const Ran ran = linewright("loop --json " + set + " " + scenario("straight"));
    CHECK(ran.code == 2);
    CHECK(ran.out.empty());
    CHECK(ran.err.find(why) != std::string::npos);
  };
  refused("--set course.line_mm=60", "no spot is over an edge of the line");
  refused("--set controller.base_pct=0", "the vehicle stands still");
  refused("--set controller.steer_limit_pct=0", "nothing steers");
}
