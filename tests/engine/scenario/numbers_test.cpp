// Numbers by name, and setting any field by name.
#include "engine/scenario/numbers.h"
#include "engine/scenario/keys.h"
#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

TEST_CASE("a number is found by its path and written in place") {
  Scenario scenario = samples::seedling_cart();
  double* wheel = find_number(scenario, "vehicle.wheel_left_mm");
  REQUIRE(wheel);
  CHECK(wheel == &scenario.vehicle.wheel_left_mm);
  CHECK(find_number(scenario, "sensors.lateral_mm[1]") == &scenario.sensors.lateral_mm[1]);
  CHECK(find_number(scenario, "course.start_mm[0]") == &scenario.course.start_mm.x_mm);
  CHECK(find_number(scenario, "course.start_mm[1]") == &scenario.course.start_mm.y_mm);
  CHECK(number_at(scenario, "controller.kp") == 0.3);
  for (const char* path : {"", "vehicle", "vehicle.", "vehicle.wheel", "sensors.lateral_mm",
                           "sensors.lateral_mm[2]", "sensors.lateral_mm[-1]", "drive.laps", "drive.seed",
                           "sensors.scheme", "stress.drives", "expect.time_s_max", "title"}) {
    INFO(path);
    CHECK(!find_number(scenario, path));
    CHECK(!number_at(scenario, path));
  }
}

TEST_CASE("gains and offsets that were left out are written out when one is asked for") {
  Scenario scenario = samples::seedling_cart();
  CHECK(number_at(scenario, "sensors.gain[1]") == 1.0);
  CHECK(number_at(scenario, "sensors.offset_pct[0]") == 0.0);
  CHECK(scenario.sensors.gain.empty());
  *find_number(scenario, "sensors.gain[1]") = 1.1;
  CHECK(scenario.sensors.gain == std::vector<double>{1.0, 1.1});
  CHECK(!validate(scenario));
}

TEST_CASE("every listed number can be found, and takes the ends of its range") {
  const Scenario scenario = samples::seedling_cart();
  const auto fields = number_fields(scenario);
  CHECK(fields.size() > 45);
  for (const NumberField& field : fields) {
    INFO(field.path);
    Scenario changed = scenario;
    double* number = find_number(changed, field.path);
    REQUIRE(number);
    CHECK(field.info.range.holds(*number));
    const Range& range = field.info.range;
    *number = range.low_open ? range.high : range.low;
    CHECK(!find_fault_in(changed, path_of(field.info)));
    *number = range.high + 1;
    CHECK(find_fault_in(changed, path_of(field.info)));
    *number = range.low - 1;
    CHECK(find_fault_in(changed, path_of(field.info)));
  }
}

std::string error_of_set(std::string_view path, std::string_view value) {
  const auto changed = set_key(samples::seedling_cart(), path, value);
  return changed ? "no error" : text_of(changed.error());
}

TEST_CASE("a field is set by its path from text") {
  const Scenario scenario = samples::seedling_cart();
  const auto set = [&](std::string_view path, std::string_view value) {
    const auto changed = set_key(scenario, path, value);
    INFO(path << " = " << value << (changed ? "" : ": " + text_of(changed.error())));
    REQUIRE(changed);
    return *changed;
  };
  CHECK(set("controller.kp", "0.25").controller.kp == 0.25);
  CHECK(set("controller.kp", "1").controller.kp == 1.0);
  CHECK(set("controller.kp", " -1e-3 ").controller.kp == -1e-3);
  CHECK(set("drive.laps", "3").drive.laps == 3);
  CHECK(set("course.closed", "true").course.closed);
  CHECK(set("title", "Harbour tram").title == "Harbour tram");
  CHECK(set("title", "\"Harbour tram\"").title == "Harbour tram");
  CHECK(set("note", "line \"one\"\nline two").note == "line \"one\"\nline two");
  CHECK(set("sensors.scheme", "bar").sensors.scheme == Scheme::bar);
  CHECK(set("sensors.scheme", "'edge'").sensors.scheme == Scheme::edge);
  CHECK(set("expect.outcome", "finished").expect.outcome == Outcome::finished);
  CHECK(set("expect.time_s_max", "9").expect.time_s_max == 9.0);
  CHECK(set("sensors.lateral_mm", "[5, 0, -5]").sensors.lateral_mm.size() == 3);
  CHECK(set("course.pieces", "[{ straight_mm = 9 }]").course.pieces.size() == 1);
  CHECK(set("stress.spread", "{ \"loop.period_ms\" = { normal = 0.1 } }").stress.spread.size() == 1);
  CHECK(set("sensors.lateral_mm[1]", "-12").sensors.lateral_mm[1] == -12);
  CHECK(set("sensors.gain[0]", "1.5").sensors.gain == std::vector<double>{1.5, 1});
  CHECK(same(set("vehicle.wheel_left_mm", "59.8"), scenario));
}

TEST_CASE("setting a field says what is wrong") {
  CHECK(error_of_set("controler.kp", "1") == "controler.kp: unknown key; did you mean controller.kp?");
  CHECK(error_of_set("kp", "1") == "kp: unknown key; did you mean controller.kp?");
  CHECK(error_of_set("", "1") == "unknown key");
  CHECK(error_of_set("format", "linewright 2") == "format: unknown key");
  CHECK(error_of_set("controller.kp", "high") ==
        "controller.kp = high: not valid TOML: could not determine value type");
  CHECK(error_of_set("controller.kp", "\"1\"") == "controller.kp = \"1\": a number is wanted");
  CHECK(error_of_set("controller.kp", "1e7") == "controller.kp = 10000000: between -1000000 and 1000000");
  CHECK(error_of_set("controller.kp", "1\nki = 2") ==
        "controller.kp = 1?ki = 2: one value on one line is wanted");
  CHECK(error_of_set("sensors.scheme", "trio") ==
        "sensors.scheme = \"trio\": \"edge\", \"pair\" or \"bar\" is wanted");
  CHECK(error_of_set("drive.laps", "1.5") == "drive.laps = 1.5: a whole number is wanted");
  CHECK(error_of_set("sensors.gain[2]", "1") == "sensors.gain[2]: unknown key; did you mean sensors.gain?");
  CHECK(error_of_set("sensors.lateral_mm[0]", "x") ==
        "sensors.lateral_mm[0] = x: not valid TOML: could not determine value type");
  CHECK(error_of_set("sensors.lateral_mm[0]", "true") == "sensors.lateral_mm[0] = true: a number is wanted");
  CHECK(error_of_set("sensors.lateral_mm[0]", "5000") ==
        "sensors.lateral_mm[0] = 5000: between -1000 and 1000 mm");
  CHECK(error_of_set("controller.kp", "") != "no error");
}

TEST_CASE("only near names are suggested") {
  CHECK(nearest_path("vehicle.grp") == "vehicle.grip");
  CHECK(nearest_path("sensors.period_ms") == "loop.period_ms");
  CHECK(nearest_path("glasshouse").empty());
  CHECK(nearest_path(std::string(100000, 'x')).empty());
}

}  // namespace
}  // namespace lw
