// What is said about text that is no scenario: file, line, key, value and rule, word for word.
#include <string>

#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

std::string error_of_text(const std::string& text) {
  const auto scenario = read(text, "cart.toml");
  return scenario ? "no error" : text_of(scenario.error());
}

// Lines put between the format (line 1) and a valid [course].
std::string error_with(const std::string& lines) {
  return error_of_text(samples::format + lines + '\n' + samples::straight);
}

std::string error_in_course(const std::string& lines) {
  return error_of_text(samples::format + "[course]\n" + lines);
}

TEST_CASE("a text without or of another format is told so") {
  CHECK(error_of_text("") == "cart.toml: format: missing; a scenario begins with format = \"linewright 1\"");
  CHECK(error_of_text(samples::straight) ==
        "cart.toml: format: missing; a scenario begins with format = \"linewright 1\"");
  CHECK(
      error_of_text("\nformat = \"linewright 2\"\n[aisles]") ==
      "cart.toml:2: format = \"linewright 2\": made for a newer linewright; this one reads \"linewright 1\"");
  for (const std::string other :
       {"\"linewright\"", "\"linewright 0\"", "\"linewright 1.5\"", "\"cart 1\"", "1"})
    CHECK(error_of_text("format = " + other) ==
          "cart.toml:1: format = " + other +
              ": not a scenario of linewright; this one reads \"linewright 1\"");
  CHECK(error_of_text(samples::format) ==
        "cart.toml: [course]: missing; a scenario needs a course of pieces or points_mm");
  CHECK(error_of_text(samples::format + "course = 3") ==
        "cart.toml:2: course = 3: a section is wanted: [course] once, on a line of its own");
  CHECK(error_of_text(samples::format + "[[course]]\nclosed = true\n") ==
        "cart.toml:2: course = a list of 1: a section is wanted: [course] once, on a line of its own");
}

TEST_CASE("an error without a file name still has its line") {
  const auto scenario = read("format = \"linewright 1\"\n[vehicle]\ngrip = -1\n" + samples::straight, "");
  REQUIRE(!scenario);
  CHECK(text_of(scenario.error()) == "line 3: vehicle.grip = -1: between 0 and 10");
}

TEST_CASE("an unknown key is named with the nearest known one") {
  CHECK(error_with("[vehicle]\nwheel_lft_mm = 60") ==
        "cart.toml:3: vehicle.wheel_lft_mm: unknown key; did you mean vehicle.wheel_left_mm?");
  CHECK(error_with("[loop]\nkp = 1") == "cart.toml:3: loop.kp: unknown key; did you mean controller.kp?");
  CHECK(error_with("kp = 1") == "cart.toml:2: kp: unknown key; did you mean controller.kp?");
  CHECK(error_with("[greenhouse]\nglass = 1") == "cart.toml:2: greenhouse: unknown key");
  CHECK(error_with("[vehicle]\nanother_thing_altogether = 1") ==
        "cart.toml:3: vehicle.another_thing_altogether: unknown key");
  CHECK(error_with("[loop]\nb = 1\n[vehicle]\naaaaaaaaa = 1") == "cart.toml:3: loop.b: unknown key");
  CHECK(error_in_course("pieces = [{ straight_mm = 5, width = 2 }]") ==
        "cart.toml:3: course.pieces[0].width: unknown key; a piece is { straight_mm = ... } or "
        "{ radius_mm = ..., turn_deg = ... }");
}

TEST_CASE("a wrong type is named with what is wanted") {
  CHECK(error_with("title = 3") == "cart.toml:2: title = 3: text in quotes is wanted");
  CHECK(error_with("[vehicle]\ngrip = \"high\"") ==
        "cart.toml:3: vehicle.grip = \"high\": a number is wanted");
  CHECK(error_with("[vehicle]\ngrip = 2024-05-01") ==
        "cart.toml:3: vehicle.grip = a date or time: a number is wanted");
  CHECK(error_with("[vehicle]\ngrip = [1]") == "cart.toml:3: vehicle.grip = a list of 1: a number is wanted");
  CHECK(error_with("[drive]\nlaps = 1.5") == "cart.toml:3: drive.laps = 1.5: a whole number is wanted");
  CHECK(error_with("[drive]\nlaps = 2.0") == "cart.toml:3: drive.laps = 2.0: a whole number is wanted");
  CHECK(error_with("[sensors]\nscheme = \"trio\"") ==
        "cart.toml:3: sensors.scheme = \"trio\": \"edge\", \"pair\" or \"bar\" is wanted");
  CHECK(error_with("[controller]\ngains = true") ==
        "cart.toml:3: controller.gains = true: \"per_loop\" or \"per_second\" is wanted");
  CHECK(error_with("[sensors]\nlateral_mm = 10") ==
        "cart.toml:3: sensors.lateral_mm = 10: a list in [ ] is wanted");
  CHECK(error_with("[sensors]\nlateral_mm = [10,\n\n\"x\"]") ==
        "cart.toml:5: sensors.lateral_mm[1] = \"x\": a number is wanted");
  CHECK(error_in_course("closed = 1") == "cart.toml:3: course.closed = 1: true or false is wanted");
  CHECK(error_in_course("points_mm = [[0, 0],\n[1, 2, 3]]") ==
        "cart.toml:4: course.points_mm[1] = a list of 3: [x, y] is wanted");
  CHECK(error_in_course("points_mm = [[0, 0], [1, true]]") ==
        "cart.toml:3: course.points_mm[1][1] = true: a number is wanted");
  CHECK(error_in_course("gaps_mm = [10]") == "cart.toml:3: course.gaps_mm[0] = 10: [from, to] is wanted");
  CHECK(error_in_course("corners = [99999999999]") ==
        "cart.toml:3: course.corners[0] = 99999999999: a smaller whole number is wanted");
  CHECK(error_in_course("pieces = [3]") ==
        "cart.toml:3: course.pieces[0] = 3: { straight_mm = ... } or { radius_mm = ..., turn_deg = ... } is "
        "wanted");
  CHECK(error_in_course("pieces = [{ straight_mm = \"x\" }]") ==
        "cart.toml:3: course.pieces[0].straight_mm = \"x\": a number is wanted");
  CHECK(error_with("[stress]\nspread = 3") ==
        "cart.toml:3: stress.spread = 3: a table [stress.spread] is wanted");
  CHECK(error_with("[stress.spread]\n\"loop.period_ms\" = 3") ==
        "cart.toml:3: stress.spread.\"loop.period_ms\" = 3: { uniform = half-width } or "
        "{ normal = standard deviation } is wanted");
  CHECK(error_with("[stress.spread]\nloop.period_ms = 3") ==
        "cart.toml:3: stress.spread.\"loop\" = a table: { uniform = half-width } or "
        "{ normal = standard deviation } is wanted");
}

TEST_CASE("a value out of range is named with its range") {
  CHECK(error_with("[vehicle]\ngrip = 11") == "cart.toml:3: vehicle.grip = 11: between 0 and 10");
  CHECK(error_with("[vehicle]\n\ndead_band_pct = 100") ==
        "cart.toml:4: vehicle.dead_band_pct = 100: at least 0 and below 100 %");
  CHECK(error_with("[drive]\nlost_mm = 0") ==
        "cart.toml:3: drive.lost_mm = 0: above 0 and at most 100000 mm");
  CHECK(error_with("[drive]\nlaps = 0") == "cart.toml:3: drive.laps = 0: a whole number between 1 and 1000");
  CHECK(error_with("[drive]\nseed = 9007199254740993") ==
        "cart.toml:3: drive.seed = 9007199254740993: a whole number between 0 and 9007199254740992");
  CHECK(error_with("[loop]\nperiod_ms = nan") ==
        "cart.toml:3: loop.period_ms = nan: between 0.1 and 1000 ms");
  CHECK(error_with("[controller]\nkp = inf") ==
        "cart.toml:3: controller.kp = inf: between -1000000 and 1000000");
  CHECK(error_with("[controller]\nkp = 1e-301") ==
        "cart.toml:3: controller.kp = 1e-301: 0, or at least 1e-300 in size");
  CHECK(error_with("[sensors]\nlateral_mm = [0, 2000]") ==
        "cart.toml:3: sensors.lateral_mm[1] = 2000: between -1000 and 1000 mm");
  CHECK(error_in_course("pieces = [\n{ straight_mm = 1 },\n{ straight_mm = 0 }]") ==
        "cart.toml:5: course.pieces[1].straight_mm = 0: above 0 and at most 1000000 mm");
  CHECK(error_in_course("points_mm = [[0, 0],\n[0, 1e7]]") ==
        "cart.toml:4: course.points_mm[1][1] = 10000000: between -1000000 and 1000000 mm");
  CHECK(error_in_course("gaps_mm = [[-1, 2]]") ==
        "cart.toml:3: course.gaps_mm[0][0] = -1: between 0 and 10000000 mm");
  CHECK(error_with("[stress.spread]\n\"loop.period_ms\" = { normal = -1 }") ==
        "cart.toml:3: stress.spread.\"loop.period_ms\" = -1: between 0 and 1000000");
  CHECK(error_with("[expect]\nstress_share_min = 95") ==
        "cart.toml:3: expect.stress_share_min = 95: between 0 and 1");
  CHECK(error_with("title = \"" + std::string(301, 'x') + '"') ==
        "cart.toml:2: title = 301 bytes: at most 300 bytes");
}

TEST_CASE("fields that do not fit together are named with the rule") {
  CHECK(error_with("[sensors]\nscheme = \"edge\"") ==
        "cart.toml:2: sensors.lateral_mm = 2 offsets: scheme \"edge\" takes exactly 1 sensor");
  CHECK(error_with("[sensors]\nlateral_mm = [1]") ==
        "cart.toml:3: sensors.lateral_mm = 1 offset: scheme \"pair\" takes exactly 2 sensors");
  CHECK(error_with("[sensors]\nscheme = \"bar\"") ==
        "cart.toml:2: sensors.lateral_mm = 2 offsets: scheme \"bar\" takes 3 to 16 sensors");
  CHECK(error_with("[sensors]\nlateral_mm = [4,\n4]") ==
        "cart.toml:4: sensors.lateral_mm[1] = 4: the same offset as sensor 0; each needs its own");
  CHECK(error_with("[sensors]\nwhite_pct = 10.5") ==
        "cart.toml:3: sensors.white_pct = 10.5: at least 1 above black_pct, which is 10");
  CHECK(error_with("[sensors]\ngain = [1]") ==
        "cart.toml:3: sensors.gain = 1 entry: one a sensor, and lateral_mm has 2");
  CHECK(error_with("[sensors]\noffset_pct = [1, 2, 3]") ==
        "cart.toml:3: sensors.offset_pct = 3 entries: one a sensor, and lateral_mm has 2");
  CHECK(error_with("[floor]\nlight_pct_per_m = [1]") ==
        "cart.toml:3: floor.light_pct_per_m = 1 entry: two entries, along x and y");
  CHECK(error_with("[drive]\ntime_limit_s = 6000\n[loop]\nperiod_ms = 1") ==
        "cart.toml:3: drive.time_limit_s = 6000: with a period of 1 ms this is more than 5000000 loops; "
        "shorten it or lengthen loop.period_ms");
  CHECK(error_with("[stress.spread]\n\"loop.period\" = { normal = 1 }") ==
        "cart.toml:3: stress.spread.\"loop.period\": names no number of the scenario; such a name is "
        "\"vehicle.wheel_left_mm\"");
  CHECK(error_with("[stress.spread]\n\"drive.seed\" = { normal = 1 }") ==
        "cart.toml:3: stress.spread.\"drive.seed\": names no number of the scenario; such a name is "
        "\"vehicle.wheel_left_mm\"");
}

TEST_CASE("a course that cannot be laid is named with the rule") {
  CHECK(error_in_course("closed = false") ==
        "cart.toml:2: course.pieces = []: a course needs pieces or points_mm");
  CHECK(error_in_course("pieces = []") ==
        "cart.toml:3: course.pieces = []: a course needs pieces or points_mm");
  CHECK(
      error_in_course("pieces = [{ straight_mm = 5 }]\npoints_mm = [[0, 0], [1, 1]]") ==
      "cart.toml:4: course.points_mm = 2 points: a course has either pieces or points_mm, and here are both");
  CHECK(error_in_course("pieces = [{ straight_mm = 5 },\n{ radius_mm = 5 }]") ==
        "cart.toml:4: course.pieces[1] = { radius_mm = 5 }: a piece is { straight_mm = ... } or "
        "{ radius_mm = ..., turn_deg = ... }");
  CHECK(error_in_course("pieces = [{ }]") ==
        "cart.toml:3: course.pieces[0] = {}: a piece is { straight_mm = ... } or { radius_mm = ..., turn_deg "
        "= ... }");
  CHECK(error_in_course("pieces = [{ straight_mm = 5, radius_mm = 5, turn_deg = 90 }]") ==
        "cart.toml:3: course.pieces[0] = { straight_mm = 5, radius_mm = 5, turn_deg = 90 }: a piece is "
        "{ straight_mm = ... } or { radius_mm = ..., turn_deg = ... }");
  CHECK(error_in_course("pieces = [{ radius_mm = 5, turn_deg = 0 }]") ==
        "cart.toml:3: course.pieces[0].turn_deg = 0: a bend turns by some angle, left positive");
  CHECK(error_in_course("points_mm = [[0, 0], [1, 1]]") ==
        "cart.toml:3: course.points_mm = 2 points: a closed course takes at least 3");
  CHECK(error_in_course("points_mm = [[0, 0]]\nclosed = false") ==
        "cart.toml:3: course.points_mm = 1 point: an open course takes at least 2");
  const std::string triangle = "points_mm = [[0, 0], [9, 0], [0, 9]]\n";
  CHECK(error_in_course(triangle + "corners = [0, 3]") ==
        "cart.toml:4: course.corners[1] = 3: an index of points_mm, which has 3");
  CHECK(error_in_course(triangle + "corners = [1, 1]") == "cart.toml:4: course.corners[1] = 1: named twice");
  CHECK(error_in_course(triangle + "corners = [-1]") ==
        "cart.toml:4: course.corners[0] = -1: a whole number between 0 and 4999");
  CHECK(error_in_course("corners = [0]\npieces = [{ straight_mm = 5 }]") ==
        "cart.toml:3: course.corners[0] = 0: an index of points_mm, which has 0");
  CHECK(error_in_course(triangle + "gaps_mm = [[1, 2], [5, 5]]") ==
        "cart.toml:4: course.gaps_mm[1] = [5, 5]: a gap is [from, to] with from below to");
  std::string many = "points_mm = [";
  for (int i = 0; i < 5001; ++i) many += "[0," + std::to_string(i) + "],";
  CHECK(error_in_course(many + "]") == "cart.toml:3: course.points_mm = 5001 entries: at most 5000");
}

TEST_CASE("text that is not TOML is named with its line") {
  CHECK(error_with("[vehicle]\ngrip = 1\ngrip = 2") == "cart.toml:4: grip: given twice");
  CHECK(error_with("[loop]\nperiod_ms = 5\n[loop]") == "cart.toml:4: loop: given twice");
  for (const std::string bad :
       {"grip 5", "= 3", "a = \"x", "a = [1, 2", "a = {", "[vehicle", "a = 01", "a = 1e999999"}) {
    INFO(bad);
    CHECK(error_with("\n" + bad).rfind("cart.toml:", 0) == 0);
    CHECK(error_with("\n" + bad).find("not valid TOML: ") != std::string::npos);
  }
  CHECK(error_with("grip 5").rfind("cart.toml:2: not valid TOML: ", 0) == 0);
  // Letters beyond ASCII where only keys may stand; the end of the sentence is toml++'s.
  for (const std::string bad :
       {"\u00e9 = 1", "a \u00e9 = 1", "a = \u00e9", "a = [\u049a]", "\u3001", "\ufe00 = 2"}) {
    INFO(bad);
    CHECK(error_with(bad).rfind("cart.toml:2: not valid TOML: ", 0) == 0);
  }
  CHECK(error_with("note = \"\"\"\\\n  \u00dcber\"\"\"") == "no error");
  CHECK(error_with("title = \"\x80\"") == "cart.toml: not text in UTF-8");
  CHECK(error_with("title = \"a\x1b[2J\"").find('\x1b') == std::string::npos);
}

TEST_CASE("hostile text is refused before it costs anything") {
  CHECK(error_of_text(std::string(most_text_bytes + 1, '#')) ==
        "cart.toml: 1048577 bytes: a scenario has at most 1048576");
  CHECK(error_with("a = " + std::string(1000, '[')).find("not valid TOML: ") != std::string::npos);
  std::string dots = "a";
  for (int i = 0; i < 200000; ++i) dots += ".a";
  const std::string refused = "cart.toml:2: a key of more than 8 parts";
  CHECK(error_with(dots + " = 1") == refused);
  CHECK(error_with('[' + dots + ']') == refused);
  CHECK(error_with("x = { " + dots + " = 1 }") == refused);
  CHECK(error_with("x = { a = \"\"\"q\"\"\"\", " + dots + " = 1 }") == refused);
  CHECK(error_with("x = { a = 'q\\', " + dots + " = 1 }") == refused);
  CHECK(error_with("x = { a = \"q\\\"\", " + dots + " = 1 }") == refused);
  CHECK(error_with("note = \"\"\"\n" + std::string(90, '.') + "\"\"\"") == "no error");
  CHECK(error_with("# " + std::string(90, '.')) == "no error");
}

TEST_CASE("validate() says the same without a line") {
  Scenario scenario = samples::seedling_cart();
  CHECK(!validate(scenario));
  scenario.vehicle.grip = -1;
  REQUIRE(validate(scenario));
  CHECK(text_of(*validate(scenario)) == "vehicle.grip = -1: between 0 and 10");
  scenario = samples::seedling_cart();
  scenario.title = "\xff";
  CHECK(text_of(*validate(scenario)) == "title = (bytes): text in UTF-8");
  scenario = samples::seedling_cart();
  scenario.sensors.scheme = static_cast<Scheme>(7);
  CHECK(text_of(*validate(scenario)) == "sensors.scheme = 7: one of the named values");
  scenario = samples::seedling_cart();
  scenario.stress.spread = {Spread{"loop.period_ms"}, Spread{"loop.period_ms"}};
  CHECK(text_of(*validate(scenario)) == "stress.spread.\"loop.period_ms\": named twice");
  scenario.stress.spread.resize(201);
  CHECK(text_of(*validate(scenario)) == "stress.spread = 201 entries: at most 200");
}

}  // namespace
}  // namespace lw
