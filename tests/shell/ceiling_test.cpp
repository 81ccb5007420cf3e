// The command ceiling: its keys, kinds and refusals.
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

TEST_CASE("ceiling gives the base that gets round, what ends it, and every rung", "[shell]") {
  const Json json = json_from("ceiling --json --kind P " + scenario("too_fast"));
  CHECK(keys_of(json) ==
        "kind base_pct speed_mm_s limit finishes_again_pct slowest_pct summary note steps kinds");
  CHECK(json["kind"] == "P");
  const auto base = json["base_pct"].get<double>();
  CHECK(base > 20.0);
  CHECK(base < 90.0);  // the scenario loses its line at 90 %
  CHECK(json["limit"]["base_pct"].get<double>() - base < 0.11);
  CHECK(json["limit"]["where"] == "in the 150 mm bend");
  double before = 0.0;
  for (const Json& rung : json["steps"]) {
    CHECK(rung["base_pct"].get<double>() > before);
    before = rung["base_pct"].get<double>();
    CHECK(rung["finished"].get<bool>() == (rung["outcome"] == "finished"));
  }

  // A rung is what the command drive says of that base.
  const Json drive = json_from("drive --json --set controller.base_pct=" + json["limit"]["base_pct"].dump() +
                               " " + scenario("too_fast"));
  CHECK(drive["reason"] == json["limit"]["reason"]);
}

TEST_CASE("ceiling without --kind climbs with the scenario's own law and with all four kinds", "[shell]") {
  const Json json = json_from("ceiling --json " + scenario("hairpins"));
  CHECK(json["kind"] == "own");
  REQUIRE(json["kinds"].size() == 5);
  CHECK(json["kinds"][4]["kind"] == "PID");
  CHECK(json["kinds"][4]["base_pct"] == json["base_pct"]);  // its own law is a PID
  CHECK(json["kinds"][1]["note"] == "");

  const Json missing = json_from("ceiling --json --kind PI " + scenario("too_fast"));
  CHECK(missing["note"] == "the scenario's ki is 0: set a gain, or ask for --retune");
  const Json afresh = json_from("ceiling --json --kind PI --retune " + scenario("too_fast"));
  CHECK(afresh["note"] == "");
  CHECK(afresh["steps"][8]["ki"].get<double>() > 0.0);
}

TEST_CASE("a kind that is none is refused", "[shell]") {
  const Ran ran = linewright("ceiling --kind P,PX " + scenario("straight"));
  CHECK(ran.code == 2);
  CHECK(ran.out.empty());
  CHECK(ran.err.find("each is one of P, PI, PD, PID") != std::string::npos);
}
