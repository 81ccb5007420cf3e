// The command terms: its keys, its words, its refusals.
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

TEST_CASE("terms says what I removes and whether D pays, with the figures behind it", "[shell]") {
  const Json json = json_from("terms --json " + scenario("circle_left"));
  CHECK(keys_of(json) == "integral derivative");
  CHECK(keys_of(json["integral"]) == "summary time_ms ki_per_loop tried with without bends");
  CHECK(
      keys_of(json["derivative"]) ==
      "pays verdict summary lead_ms late_ms noise_allowed_pct without best sharpest drive_without drive_with "
      "grid");
  REQUIRE(json["integral"]["bends"].size() == 1);
  const Json& bend = json["integral"]["bends"][0];
  CHECK(bend["side"] == "left");
  CHECK(bend["radius_mm"].get<double>() == Approx(300.0));
  // b c / (2 R kp), rolling without slip (Siegwart and Nourbakhsh 2004, chapter 3)
  CHECK(bend["rough_error"].get<double>() == Approx(90.0 * 0.5 / (2.0 * 300.0 * 0.3)));
  CHECK(bend["error"].get<double>() == Approx(bend["rough_error"].get<double>()).epsilon(0.05));

  // The mean error of the drive is that of the steady state, but for its start.
  const Json drive = json_from("drive --json " + scenario("circle_left"));
  CHECK(drive["error_mean"].get<double>() == Approx(bend["error"].get<double>()).epsilon(0.03));
  CHECK(json["derivative"]["drive_without"]["deviation_max_mm"] == drive["deviation_max_mm"]);
}

TEST_CASE("terms in words: sections as a table, and a verdict", "[shell]") {
  const Ran ran = linewright("terms " + scenario("oval"));
  CHECK(ran.code == 0);
  for (const char* said : {"P alone keeps an error of ", "left 800 mm", "without D", "of derivative already"})
    CHECK(ran.out.find(said) != std::string::npos);
}

TEST_CASE("terms refuses a scenario without a P gain or without a loop", "[shell]") {
  const Ran none = linewright("terms --set controller.kp=0 " + scenario("oval"));
  CHECK(none.code == 2);
  CHECK(none.err.find("controller.kp: 0") != std::string::npos);
  const Ran blind = linewright("terms --set course.line_mm=60 " + scenario("oval"));
  CHECK(blind.code == 2);
  CHECK(blind.err.find("no spot is over an edge of the line") != std::string::npos);
}
