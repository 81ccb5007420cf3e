// The check signal: its text, its shape, and what each term makes of it, against closed forms.
#include "engine/controller/check_signal.h"

#include <cmath>

#include "tests/catch.h"

using namespace lw;

namespace {

std::vector<Knot> knots(const char* text) {
  const auto read = read_knots(text);
  if (!read) FAIL(text_of(read.error()));
  return *read;
}

std::string refusal(const char* text) {
  const auto read = read_knots(text);
  REQUIRE_FALSE(read.ok());
  return text_of(read.error());
}

Law<double> plain_law() {
  return {.base = 0.4,
          .ease = 0.0,
          .kp = 0.5,
          .ki = 0.01,
          .kd = 2.0,
          .filter = 0.015,
          .integral_limit = 10.0,
          .steer_limit = 10.0,
          .command_step = 0.0,
          .command_steps_per_unit = 0.0};
}

std::vector<SignalRow> answer(const char* text, const Law<double>& law, const LawWiring& wiring = {}) {
  const auto rows = answer_to(knots(text), law, wiring, 0.005);
  if (!rows) FAIL(text_of(rows.error()));
  return *rows;
}

}  // namespace

TEST_CASE("a signal's text is levels and the seconds in which they are reached") {
  const std::vector<Knot> read = knots(" 0@0.1, 0.2@0,\t-1e-1@2 ");
  REQUIRE(read.size() == 3);
  CHECK(read[1].level == 0.2);
  CHECK(read[1].duration == 0.0);
  CHECK(read[2].level == -0.1);
  CHECK(duration_of(read) == Approx(2.1));
  CHECK(refusal("0.2") == "segments: 0.2: an entry is LEVEL@SECONDS, such as 0.2@0.5");
  CHECK(refusal("0.2@1,") == "segments: an entry is LEVEL@SECONDS, such as 0.2@0.5");
  CHECK(refusal("high@1") == "segments: high@1: the level is a number within +-1e6");
  CHECK(refusal("0x1@1") == "segments: 0x1@1: the level is a number within +-1e6");
  CHECK(refusal("0.1@-1") == "segments: 0.1@-1: the duration is a number of seconds, 0 to 1e6");
  CHECK(refusal("0.1@inf") == "segments: 0.1@inf: the duration is a number of seconds, 0 to 1e6");
  std::string many = "0@0";
  for (int i = 0; i < 1000; ++i) many += ",0@0";
  CHECK(refusal(many.c_str()) == "segments: at most 1000 entries");
}

TEST_CASE("ramps are straight, holds hold, and a step has its new level at its moment") {
  const std::vector<Knot> signal = knots("0@0.1, 0.2@0, 0.2@0.5, -0.1@1");
  CHECK(signal_at(signal, 0.0) == 0.0);
  CHECK(signal_at(signal, 0.0999) == 0.0);
  CHECK(signal_at(signal, 0.1) == 0.2);
  CHECK(signal_at(signal, 0.4) == 0.2);
  CHECK(signal_at(signal, 1.1) == Approx(0.05));
  CHECK(signal_at(signal, 1.6) == -0.1);
  CHECK(signal_at(signal, 9.0) == -0.1);
  CHECK(signal_at(knots("0.3@0"), 0.0) == 0.3);
}

TEST_CASE("on a ramp P follows, I is the sum of whole numbers, and D settles to kd times the rise") {
  const Law<double> law = plain_law();
  const std::vector<SignalRow> rows = answer("0.4@0.2", law);  // 40 loops, 0.01 more in each
  REQUIRE(rows.size() == 41);
  for (std::size_t n = 0; n < rows.size(); ++n) {
    const double count = static_cast<double>(n);
    CHECK(rows[n].t == Approx(0.005 * count));
    CHECK(rows[n].p == Approx(0.5 * 0.01 * count));
    CHECK(rows[n].i == Approx(0.01 * 0.01 * count * (count + 1.0) / 2.0));  // n (n + 1) / 2
    // A first-order filter of share a on a constant input c gives c (1 - (1 - a)^n), a = T / (filter + T).
    CHECK(rows[n].d == Approx(2.0 * 0.01 * (1.0 - std::pow(0.75, count))).margin(1e-15));
    CHECK(rows[n].steer == Approx(rows[n].p + rows[n].i + rows[n].d));
    CHECK(rows[n].left == Approx(0.4 - rows[n].steer));
  }
}

TEST_CASE("after a step D dies out by the filter's share, and gains per second count the period") {
  const Law<double> law = plain_law();
  const std::vector<SignalRow> loops = answer("0@0.02, 0.1@0, 0.1@0.05", law);
  REQUIRE(loops.size() == 15);
  for (std::size_t n = 4; n < loops.size(); ++n)
    CHECK(loops[n].d == Approx(2.0 * 0.1 * 0.25 * std::pow(0.75, static_cast<double>(n - 4))));

  Law<double> seconds = law;
  seconds.ki = law.ki / 0.005;
  seconds.kd = law.kd * 0.005;
  const std::vector<SignalRow> same = answer("0@0.02, 0.1@0, 0.1@0.05", seconds, {.per_second = true});
  for (std::size_t n = 0; n < loops.size(); ++n) CHECK(same[n].steer == Approx(loops[n].steer).margin(1e-15));
}

TEST_CASE("a signal too long for its period is refused, and the CSV reads back") {
  const auto rows = answer_to(knots("0@1e5"), plain_law(), {}, 0.005);
  REQUIRE_FALSE(rows.ok());
  CHECK(text_of(rows.error()) == "segments: 100000 s: more than a million loops at this period");
  Law<double> law = plain_law();  // of halves and eighths, which have few digits
  law.base = 0.5;
  law.ki = 0.125;
  CHECK(csv_of(answer("0.25@0, 0.25@0.005", law)) ==
        "t_s,error,p,i,d,steer,left,right\n"
        "0,0.25,0.125,0.03125,0,0.15625,0.34375,0.65625\n"
        "0.005,0.25,0.125,0.0625,0,0.1875,0.3125,0.6875\n");
}
