// Reading and writing scenario text: what is written reads back bit for bit.
#include <cmath>
#include <cstdlib>
#include <limits>

#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "engine/scenario/value_text.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

Scenario read_back(const std::string& text) {
  const auto scenario = read(text, "text");
  INFO(text << '\n' << (scenario ? "" : text_of(scenario.error())));
  REQUIRE(scenario);
  return *scenario;
}

// Every key of the contract, with other values than the defaults where that is possible.
const char* const every_key = R"(format = "linewright 1"
title = "Library cart"
note = "Two shelves, one corner"
[vehicle]
track_width_mm = 141.0
wheel_left_mm = 60.5
wheel_right_mm = 60
top_speed_rpm = 221.0
supply_pct = 99.0
forward_time_constant_ms = 81.0
turn_time_constant_ms = 61.0
dead_band_pct = 2.0
command_step_pct = 0
command_delay_ms = 1.5
grip = 0.6
[loop]
period_ms = 5.0
jitter_pct = 3.0
[sensors]
scheme = "bar"
forward_mm = 71.0
lateral_mm = [12.0, 0, -12.0]
spot_mm = 9.0
black_pct = 11.0
white_pct = 91.0
noise_pct = 0.25
step_pct = 0.5
gain = [1.0, 1.1, 0.9]
offset_pct = [0.0, 1, -1.0]
refresh_ms = 3.0
lag_ms = 2.0
edge = "right"
target_pct = 45.0
[controller]
base_pct = 41.0
kp = 0.01
ki = 0.002
kd = 0.4
gains = "per_second"
derivative_filter_ms = 6.0
integral_limit_pct = 90.0
steer_limit_pct = 80.0
ease = 0.5
[course]
line_mm = 19.0
closed = false
start_mm = [1.0, -2]
heading_deg = 45.0
points_mm = [[0, 0], [120, 4.5], [240, 90]]
corners = [1]
gaps_mm = [[60, 80.5]]
[floor]
texture_pct = 1.0
texture_mm = 70.0
light_pct_per_m = [0.5, -0.5]
seed = 7
[drive]
laps = 2
time_limit_s = 30.0
lost_mm = 50.0
start_offset_mm = 3.0
start_heading_deg = -4.0
seed = 8
[stress]
drives = 300
seed = 9
[stress.spread]
"vehicle.wheel_left_mm" = { normal = 0.3 }
"sensors.noise_pct" = { uniform = 0.5 }
"sensors.gain[1]" = { uniform = 0.1 }
[expect]
outcome = "line_lost"
time_s_max = 20.0
deviation_mm_max = 25.0
deviation_rms_mm_max = 8.0
saturated_pct_max = 5.0
reversals_per_s_max = 12.0
stress_share_min = 0.95
gain_margin_db_min = 6.0
)";

TEST_CASE("every key of the contract is read into its own field") {
  const Scenario s = read_back(every_key);
  const auto values = field_bytes(s);
  const auto defaults = field_bytes(Scenario{});
  std::size_t index = 0;
  each_field(s, [&](const FieldInfo& info, const auto&) {
    INFO(path_of(info));
    const bool meant = info.key == "wheel_right_mm" || info.key == "pieces";
    CHECK((values[index] == defaults[index]) == meant);
    ++index;
  });
  CHECK(s.title == "Library cart");
  CHECK(s.vehicle.wheel_left_mm == 60.5);
  CHECK(s.sensors.scheme == Scheme::bar);
  CHECK(s.sensors.edge == Edge::right);
  CHECK(s.sensors.lateral_mm == std::vector<double>{12, 0, -12});
  CHECK(s.controller.gains == GainUnit::per_second);
  CHECK(s.course.start_mm.y_mm == -2);
  CHECK(s.course.points_mm[1].y_mm == 4.5);
  CHECK(s.course.corners == std::vector<int>{1});
  CHECK(s.course.gaps_mm[0].to_mm == 80.5);
  CHECK(s.drive.seed == 8);
  REQUIRE(s.stress.spread.size() == 3);
  CHECK(s.stress.spread[0].key == "vehicle.wheel_left_mm");  // the order of the text, not of the alphabet
  CHECK(s.stress.spread[0].kind == SpreadKind::normal);
  CHECK(s.stress.spread[1].amount == 0.5);
  CHECK(s.expect.outcome == Outcome::line_lost);
  CHECK(s.expect.gain_margin_db_min == 6.0);
}

TEST_CASE("what is left out has its default, and only format and [course] must be there") {
  Scenario expected;
  expected.course.closed = false;
  Piece piece;
  piece.straight_mm = 500;
  expected.course.pieces = {piece};
  CHECK(same(read_back(samples::format + samples::straight), expected));
}

TEST_CASE("line ends of either kind, comments and a byte order mark do not matter") {
  const Scenario plain = read_back(samples::format + samples::straight);
  CHECK(same(read_back("\xEF\xBB\xBF# a straight\r\nformat = \"linewright 1\"\r\n[course] # here\r\n"
                       "closed = false\r\npieces = [\r\n  { straight_mm = 500 },\r\n]\r\n"),
             plain));
}

TEST_CASE("the written text has a look of its own") {
  Scenario scenario = samples::seedling_cart();
  scenario.stress.spread = {Spread{"sensors.noise_pct", SpreadKind::normal, 0.5}};
  scenario.expect.outcome = Outcome::finished;
  const std::string text = write(scenario);
  CHECK(text.rfind("format = \"linewright 1\"\ntitle = \"Seedling cart, aisle end\"\n\n[vehicle]\n"
                   "track_width_mm = 140.0\nwheel_left_mm = 59.8\n",
                   0) == 0);
  CHECK(text.find(
            "\npieces = [\n  { straight_mm = 800.0 },\n  { radius_mm = 350.0, turn_deg = 180.0 },\n]\n") !=
        std::string::npos);
  CHECK(text.find("\n\n[stress.spread]\n\"sensors.noise_pct\" = { normal = 0.5 }\n\n[expect]\n"
                  "outcome = \"finished\"\n") != std::string::npos);
  CHECK(
      write_short(scenario) ==
      "format=\"linewright 1\"\ntitle=\"Seedling cart, aisle end\"\n[vehicle]\nwheel_left_mm=59.8\n[course]\n"
      "closed=false\npieces=[{straight_mm=800},{radius_mm=350,turn_deg=180}]\n[stress]\n"
      "spread={\"sensors.noise_pct\"={normal=0.5}}\n[expect]\noutcome=\"finished\"\n");
}

TEST_CASE("no line of written lists is wider than a screen") {
  Scenario scenario = samples::seedling_cart();
  scenario.course.pieces.clear();
  for (int i = 0; i < 400; ++i) scenario.course.points_mm.push_back(Point{i * 1.1, i / 3.0});
  const std::string text = write(scenario);
  std::size_t longest = 0;
  for (std::size_t at = 0, end = 0; (end = text.find('\n', at)) != std::string::npos; at = end + 1)
    longest = std::max(longest, end - at);
  CHECK(longest > 60);
  CHECK(longest <= 110);
  CHECK(same(read_back(text), scenario));
}

TEST_CASE("any valid scenario reads back bit for bit from both texts") {
  int with_points = 0;
  for (std::uint64_t seed = 1000; seed < 1150; ++seed) {
    const Scenario scenario = samples::random_scenario(seed);
    INFO("seed " << seed << '\n' << write(scenario));
    const auto fault = validate(scenario);
    INFO((fault ? text_of(*fault) : ""));
    REQUIRE(!fault);
    CHECK(same(read_back(write(scenario)), scenario));
    CHECK(same(read_back(write_short(scenario)), scenario));
    CHECK(write_short(scenario).size() <= write(scenario).size());
    with_points += scenario.course.points_mm.empty() ? 0 : 1;
  }
  CHECK(with_points > 20);
  CHECK(with_points < 130);
}

TEST_CASE("a number is written as the shortest of 15 to 17 digits that reads back") {
  CHECK(number_text(40) == "40");
  CHECK(number_text(0.1) == "0.1");
  CHECK(number_text(-2.5) == "-2.5");
  CHECK(number_text(0.1 + 0.2) == "0.30000000000000004");  // IEEE 754 double, the well-known 17 digits
  CHECK(number_text(1.0 / 3) == "0.3333333333333333");     // 16 digits suffice
  CHECK(number_text(1e300) == "1e+300");
  CHECK(number_text(0.0) == "0");
  CHECK(number_text(-0.0) == "-0.0");
  CHECK(number_text(std::numeric_limits<double>::infinity()) == "inf");
  CHECK(number_text(-std::numeric_limits<double>::infinity()) == "-inf");
  CHECK(number_text(std::nan("")) == "nan");
  CHECK(float_text(40) == "40.0");
  CHECK(float_text(1e300) == "1e+300");
  CHECK(float_text(0.1) == "0.1");
  samples::Dice dice{77};
  for (int i = 0; i < 20000; ++i) {
    const double value = __builtin_bit_cast(double, dice.bits());
    if (!std::isfinite(value)) continue;
    CHECK(std::strtod(number_text(value).c_str(), nullptr) == value);
  }
}

TEST_CASE("texts in quotes follow TOML 1.0") {
  CHECK(in_quotes("a\"b\\c") == R"("a\"b\\c")");
  CHECK(in_quotes("\n\t\r") == R"("\n\t\u000D")");
  CHECK(in_quotes(std::string(1, '\0') + "\x7f") == R"("\u0000\u007F")");
  CHECK(in_quotes("Gie\u00dfwagen") == "\"Gie\u00dfwagen\"");
}

TEST_CASE("text for a message is short and harmless") {
  CHECK(clipped("plain") == "plain");
  CHECK(clipped("a\x1b[2Jb\n") == "a?[2Jb?");
  CHECK(clipped("abcdef", 3) == "abc...");
  CHECK(clipped("ab\u00e9", 3) == "ab...");  // not in the middle of the two bytes of e acute
}

// Sequences from the tables of RFC 3629, sections 3 and 10, and of the Unicode Standard, table 3-7.
TEST_CASE("UTF-8 is told from other bytes") {
  CHECK(is_utf8(""));
  CHECK(is_utf8("\x41\xE2\x89\xA2\xCE\x91\x2E"));  // RFC 3629, section 7: A<NOT IDENTICAL TO><ALPHA>.
  CHECK(is_utf8("\xED\x95\x9C\xEA\xB5\xAD\xEC\x96\xB4"));
  CHECK(is_utf8("\xEF\xBB\xBF\xF0\xA3\x8E\xB4"));
  CHECK(is_utf8("\xF4\x8F\xBF\xBF"));       // U+10FFFF
  CHECK(!is_utf8("\xC0\x80"));              // overlong NUL, RFC 3629, section 10
  CHECK(!is_utf8("\x2F\xC0\xAE\x2E\x2F"));  // overlong dot, the same section
  CHECK(!is_utf8("\xE0\x9F\xBF"));          // overlong
  CHECK(!is_utf8("\xF0\x8F\xBF\xBF"));      // overlong
  CHECK(!is_utf8("\xED\xA0\x80"));          // surrogate
  CHECK(!is_utf8("\xF4\x90\x80\x80"));      // above U+10FFFF
  CHECK(!is_utf8("\xE2\x89"));              // cut off
  CHECK(!is_utf8("\x80"));                  // continuation alone
  CHECK(!is_utf8("\xE2\x41\x41"));
  CHECK(!is_utf8("\xFF"));
}

}  // namespace
}  // namespace lw
