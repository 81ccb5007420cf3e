// Numbers of the panel: gains in both units, wheels of unequal size, spans, ticks, thinning out.
#include <cmath>

#include "tests/catch.h"
#include "web/panel/axis.h"
#include "web/panel/files.h"
#include "web/panel/grips.h"
#include "web/panel/quick.h"

using namespace lw;
using namespace lw::panel;

TEST_CASE("gains per loop and per second differ by the loop period, Ki and Kd the opposite way") {
  // By hand from design section 4: ki per second = ki / period, kd per second = kd * period.
  Scenario s;
  s.loop.period_ms = 5.0;
  s.controller.ki = 0.002;
  s.controller.kd = 0.4;
  CHECK(ki_of(s).per_second == Approx(0.4));
  CHECK(kd_of(s).per_second == Approx(0.002));
  set_ki(s, 1.0, GainUnit::per_second);
  set_kd(s, 0.01, GainUnit::per_second);
  CHECK(s.controller.ki == Approx(0.005));
  CHECK(s.controller.kd == Approx(2.0));
  s.controller.gains = GainUnit::per_second;
  CHECK(ki_of(s).per_second == s.controller.ki);
  set_ki(s, 0.005, GainUnit::per_loop);
  CHECK(s.controller.ki == Approx(1.0));
}

TEST_CASE("wheel mismatch is the difference over the mean, and keeps the mean") {
  Vehicle vehicle;
  vehicle.wheel_left_mm = 59.4;
  vehicle.wheel_right_mm = 60.6;
  CHECK(wheel_mismatch_pct(vehicle) == Approx(2.0));
  set_wheel_mismatch(vehicle, -1.0);
  CHECK(vehicle.wheel_left_mm == 60.3);
  CHECK(vehicle.wheel_right_mm == 59.7);
  set_wheel_mismatch(vehicle, 0.0);
  CHECK(vehicle.wheel_left_mm == vehicle.wheel_right_mm);
}

TEST_CASE("a spot stops at whole grains that read back as they look") {
  CHECK(snapped({0, 1}, 0.1, 0.29) == 0.3);
  CHECK(snapped({0, 100}, 0.005, 0.3012) == 0.3);
  CHECK(snapped({0, 5000}, 5.0, 352.0) == 350.0);
  CHECK(snapped({0, 10}, 1.0, 99.0) == 10.0);
  CHECK(snapped({0, 10, true}, 1.0, 0.0) == 1.0);
  CHECK_FALSE(std::signbit(snapped({-10, 10}, 1.0, -0.2)));
}

TEST_CASE("the line of a number spans a useful part of a wide range and always holds the value") {
  NumberGrip gain{"controller.kp", "", {-1e6, 1e6}, 0.005, 0.3};
  gain.one_sided = true;
  const Span usual = useful_span(gain, 0.3);
  CHECK(usual.low == 0.0);
  CHECK(usual.high == 2.0);
  CHECK(useful_span(gain, 700.0).high >= 700.0);
  CHECK(useful_span(gain, -3.0).low <= -3.0);
  const NumberGrip share{"loop.jitter_pct", "%", {0, 90}, 1.0, 0.0};
  CHECK(useful_span(share, 0.0).high == 90.0);
}

TEST_CASE("typed numbers may have a comma or a unit, and nothing that is no number passes") {
  CHECK(typed_number("0,25").value() == 0.25);
  CHECK(typed_number(" 12 mm").value() == 12.0);
  CHECK(typed_number("\xE2\x88\x92"
                     "3")
            .value() == -3.0);
  for (const char* text : {"", "mm", "nan", "inf", "1 2", "0x10", "1.2.3"}) {
    INFO(text);
    CHECK_FALSE(typed_number(text));
  }
}

TEST_CASE("shown numbers read back") {
  for (double value : {0.0, 0.3, 59.83, 0.00005, 1e-7, 123456.0, -12.5}) {
    INFO(value);
    CHECK(std::strtod(shown_number(value, 0.1).c_str(), nullptr) == Approx(value));
  }
  CHECK(shown_number(0.3, 0.005) == "0.300");
  CHECK(fixed(-0.001, 1) == "0.0");
  CHECK(fixed(-2.0, 1) ==
        "\xE2\x88\x92"
        "2.0");
}

TEST_CASE("ticks are round and lie within") {
  const Ticks ticks = ticks_of(-0.3, 7.4, 8);
  CHECK(ticks.step == 1.0);
  CHECK(ticks.at.front() == 0.0);
  CHECK(ticks.at.back() == 7.0);
  const Ticks fine = ticks_of(0.0, 0.013, 5);
  CHECK(fine.step == Approx(0.005));
  CHECK(fine.decimals == 3);
  CHECK(ticks_of(1.0, 1.0, 5).at.empty());
  CHECK(ticks_of(0.0, 1.0, 0).at.empty());
  for (int most = 1; most < 12; ++most) {
    const Ticks any = ticks_of(-3.7, 11.2, most);
    CHECK(any.at.size() <= static_cast<std::size_t>(most) + 1);
  }
}

TEST_CASE("thinning out keeps every peak") {
  std::vector<TraceRow> rows(10000);
  for (std::size_t i = 0; i < rows.size(); ++i) rows[i].t = 0.001 * static_cast<double>(i);
  rows[4321].error = 5.0;
  rows[4322].error = -7.0;
  const Curve error{"error", &TraceRow::error, 1.0};
  const Decimated thin = decimate(rows, error, 0.0, 10.0, 100);
  REQUIRE(thin.low.size() == 100);
  CHECK(thin.high[43] == 5.0f);
  CHECK(thin.low[43] == -7.0f);
  CHECK(thin.high[10] == 0.0f);
  const Decimated beyond = decimate(rows, error, 5.0, 15.0, 100);
  CHECK(beyond.low[0] == 0.0f);
  CHECK(std::isnan(beyond.low[99]));
  const Decimated near = decimate(rows, error, 4.3214, 4.3216, 10);
  CHECK(near.high[5] == 5.0f);  // the value that holds there
}

TEST_CASE("file names come from titles") {
  CHECK(file_stem("Seedling cart, aisle loop") == "seedling-cart-aisle-loop");
  CHECK(file_stem("  ...  ") == "scenario");
  CHECK(file_stem("../../x") == "x");
}
