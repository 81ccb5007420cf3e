// The command tune: its keys, its methods, and that the gains it gives can be driven.
#include "tests/catch.h"
#include "tests/shell/calls.h"

using namespace lw::test;

TEST_CASE("tune has the keys that others rely on, whatever the method", "[shell]") {
  for (const std::string method : {"rules", "critical", "relay", "habit"}) {
    CAPTURE(method);
    const Json json = json_from("tune --json --method " + method + " " + scenario("oval"));
    CHECK(keys_of(json) == "method kp ki kd filter evidence");
    CHECK(json["method"] == method);
    CHECK(json["kp"].get<double>() > 0.0);
    CHECK(json["evidence"]["settings"].size() >= 3);
    CHECK_FALSE(json["evidence"]["words"].empty());
  }
  CHECK(json_from("tune --json " + scenario("oval"))["method"] == "rules");
}

TEST_CASE("the gains of tune, set in the scenario's unit, drive as its table says", "[shell]") {
  for (const std::string unit : {"per_loop", "per_second"}) {
    CAPTURE(unit);
    const std::string set = " --set controller.gains=" + unit;
    const Json json = json_from("tune --json" + set + " " + scenario("oval"));
    const auto value = [&](const char* key) {
      return " --set controller." + std::string(key) + '=' + json[key].dump();
    };
    const Json drive =
        json_from("drive --json" + set + value("kp") + value("ki") + value("kd") +
                  " --set controller.derivative_filter_ms=" + json["filter"].dump() + " " + scenario("oval"));
    for (const Json& setting : json["evidence"]["settings"]) {
      if (setting["name"] != json["evidence"]["setting"]) continue;
      CHECK(drive["time_s"] == setting["time_s"]);
      CHECK(drive["deviation_rms_mm"] == setting["deviation_rms_mm"]);
    }
    CHECK(json["evidence"]["gains"] == unit);
  }
}

TEST_CASE("an unstable rule is in the table as such, with both units of its gains", "[shell]") {
  const Json json = json_from("tune --json " + scenario("oval"));
  const double period = 0.01;
  bool seen = false;
  for (const Json& setting : json["evidence"]["settings"]) {
    const double loop = setting["per_loop"]["ki"].get<double>();
    const double second = setting["per_second"]["ki"].get<double>();
    CHECK(second == Approx(loop / period));
    if (setting["name"] != "Ziegler-Nichols PI") continue;
    seen = true;
    CHECK(setting["stable"] == false);
    CHECK(setting["against"].get<std::string>().find("not stable") != std::string::npos);
  }
  CHECK(seen);
  CHECK(json["evidence"]["setting"] != "Ziegler-Nichols PI");
  const Ran ran = linewright("tune " + scenario("oval"));
  CHECK(ran.out.find("Contradicted, and never recommended\n  Ziegler-Nichols PI") != std::string::npos);
}

TEST_CASE("a course that no setting gets round leaves the gains null and says why", "[shell]") {
  const Json json = json_from("tune --json " + scenario("too_fast"));
  CHECK(json["kp"].is_null());
  CHECK(json["filter"].is_null());
  CHECK(json["evidence"]["reason"].get<std::string>().find("None is recommended") == 0);
}

TEST_CASE("tune hands a search on, with its options", "[shell]") {
  const Json json = json_from(
      "tune --json --method search --free kp --free base=20:40 --limit deviation_mm=9 "
      "--evaluations 30 --draws 1 --goal deviation --seed 2 " +
      scenario("circle_left"));
  CHECK(json["method"] == "search");
  CHECK(json["kp"].get<double>() > 0.0);
  const Ran ran = linewright("tune --method search --free kq " + scenario("circle_left"));
  CHECK(ran.code == 2);
  CHECK(ran.err.find("--free: kq") != std::string::npos);
}

TEST_CASE("where the experiment finds nothing the settings come from theory, which is said", "[shell]") {
  const Json json = json_from("tune --json --method critical " + scenario("bar"));
  CHECK(json["evidence"]["experiment"]["ideal"]["critical_gain"].is_null());
  CHECK(json["evidence"]["from"] == "theory, since the experiment gives none");
  CHECK(json["evidence"]["critical_gain"] == json["evidence"]["theory"]["critical_gain"]);
}

TEST_CASE("tune refuses a method it does not have, and a scenario without a loop", "[shell]") {
  const Ran method = linewright("tune --method guess " + scenario("oval"));
  CHECK(method.code == 2);
  CHECK(method.out.empty());
  CHECK(method.err.find("--method: guess: it is one of rules, critical, relay, habit, search") !=
        std::string::npos);
  const Ran loop = linewright("tune --set course.line_mm=90 " + scenario("oval"));
  CHECK(loop.code == 2);
  CHECK(loop.err.find("no spot is over an edge of the line") != std::string::npos);
}
