// Loops that the tests of the theory are made over: library carts with every scheme, delay and period.
#pragma once

#include <string>
#include <vector>

#include "engine/theory/loop.h"
#include "tests/catch.h"
#include "tests/engine/drive/courses.h"

namespace lw::test {

inline SampledLoop loop_of(const Scenario& scenario) {
  const Result<SampledLoop> loop = linearise(scenario);
  if (!loop) FAIL(text_of(loop.error()));
  return *loop;
}

inline Scenario cart(double period_ms, double delay_ms) {
  Scenario scenario = on_straight();
  scenario.title = "Library cart";
  scenario.loop.period_ms = period_ms;
  scenario.vehicle.command_delay_ms = delay_ms;
  return scenario;
}

inline Scenario edge_cart(double period_ms, double delay_ms) {
  Scenario scenario = cart(period_ms, delay_ms);
  scenario.sensors.scheme = Scheme::edge;
  scenario.sensors.lateral_mm = {3.0};
  scenario.sensors.target_pct = 42.0;
  return scenario;
}

inline Scenario bar_cart(double period_ms, double delay_ms) {
  Scenario scenario = cart(period_ms, delay_ms);
  scenario.sensors.scheme = Scheme::bar;
  scenario.sensors.lateral_mm = {28.0, 20.0, 12.0, 4.0, -4.0, -12.0, -20.0, -28.0};
  scenario.controller.kp = 0.01;
  return scenario;
}

/// Every scheme, delays of 0 to 20 ms, periods of 1 to 20 ms, P to PID.
inline std::vector<Scenario> all_carts() {
  std::vector<Scenario> all;
  int number = 0;
  for (const double period : {1.0, 5.0, 11.0, 20.0}) {
    for (const double delay : {0.0, 3.3, 7.5, 20.0}) {
      Scenario scenario = number % 3 == 0   ? cart(period, delay)
                          : number % 3 == 1 ? edge_cart(period, delay)
                                            : bar_cart(period, delay);
      Controller& law = scenario.controller;
      if (number % 4 == 1) law.ki = 0.01 * law.kp * period / 5.0;
      if (number % 4 >= 2) law.kd = 3.0 * law.kp * 5.0 / period;
      if (number % 4 == 3) {
        law.gains = GainUnit::per_second;
        law.ki = 0.6 * law.kp;
        law.kd = 0.02 * law.kp;
        law.derivative_filter_ms = 12.0;
      }
      if (number % 5 == 1) scenario.sensors.lag_ms = 4.0;
      if (number % 5 == 2) scenario.vehicle.turn_time_constant_ms = 0.0;
      if (number % 5 == 3) scenario.vehicle.wheel_left_mm = 47.0;
      if (number % 5 == 4) scenario.vehicle.dead_band_pct = 7.0, scenario.vehicle.supply_pct = 88.0;
      if (number % 7 == 3) scenario.controller.kp *= 4.0;
      if (scenario.sensors.scheme == Scheme::pair) {
        scenario.sensors.gain = {0.95, 1.04};
        scenario.sensors.offset_pct = {1.5, -0.5};
      }
      all.push_back(scenario);
      ++number;
    }
  }
  return all;
}

}  // namespace lw::test
