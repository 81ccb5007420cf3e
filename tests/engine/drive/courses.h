// Small scenarios that the tests of the drive start from: a harbour-model tram with continuous readings and
// commands.
#pragma once

#include "engine/scenario/scenario.h"

namespace lw::test {

inline Scenario tram() {
  Scenario scenario;
  scenario.title = "Harbour-model tram";
  scenario.vehicle = {
      .track_width_mm = 120.0, .wheel_left_mm = 50.0, .wheel_right_mm = 50.0, .top_speed_rpm = 200.0};
  scenario.vehicle.command_step_pct = 0.0;
  scenario.sensors.step_pct = 0.0;
  scenario.loop.period_ms = 5.0;
  scenario.controller = {.base_pct = 40.0, .kp = 0.3};
  scenario.course.closed = false;
  return scenario;
}

inline Scenario on_straight(double length_mm = 4000.0) {
  Scenario scenario = tram();
  scenario.course.pieces = {{.straight_mm = length_mm}};
  return scenario;
}

/// A full circle, by left turns when sense is +1 and by right turns when it is -1.
inline Scenario on_circle(double radius_mm, double sense) {
  Scenario scenario = tram();
  scenario.course.closed = true;
  scenario.course.pieces = {{.radius_mm = radius_mm, .turn_deg = sense * 360.0}};
  return scenario;
}

inline Scenario on_oval() {
  Scenario scenario = tram();
  scenario.course.closed = true;
  const Piece straight{.straight_mm = 700.0}, bend{.radius_mm = 300.0, .turn_deg = 180.0};
  scenario.course.pieces = {straight, bend, straight, bend};
  return scenario;
}

/// A figure of eight: two three-quarter circles joined by straights that cross.
inline Scenario on_eight() {
  Scenario scenario = tram();
  scenario.course.closed = true;
  scenario.course.pieces = {{.straight_mm = 600.0},
                            {.radius_mm = 300.0, .turn_deg = 270.0},
                            {.straight_mm = 600.0},
                            {.radius_mm = 300.0, .turn_deg = -270.0}};
  return scenario;
}

}  // namespace lw::test
