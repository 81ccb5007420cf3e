// What the error does across a straight line.
#include "engine/theory/sensor_slope.h"

#include <cmath>

#include "engine/drive/drive.h"
#include "engine/drive/plan.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

StraightSensors sensors_of(const Scenario& scenario) {
  return {optics_of(scenario.sensors, scenario.floor), wiring_of(scenario).sensors,
          0.5e-3 * scenario.course.line_mm, 0.5e-3 * scenario.sensors.spot_mm};
}

}  // namespace

// A spot halved by an edge: the chord is its diameter, so brightness changes by 2 / (pi r) a metre (area of a
// circular segment, any handbook of geometry).
TEST_CASE("a pair over the edges has twice the slope of a halved disc, times its contrast") {
  const Result<SensorPoint> point = sensor_point(sensors_of(cart(5.0, 0.0)), 0.06);
  REQUIRE(point.ok());
  CHECK(point->slope == Approx(2.0 * 0.8 * 2.0 / (pi * 0.004)).epsilon(1e-12));
  CHECK(point->deviation == 0.0);
}

// The chord has a vertical tangent where a spot leaves the line; differences there are good to half a per
// cent.
TEST_CASE("the slope is the derivative of the error") {
  for (const Scenario& scenario : {cart(5.0, 0.0), edge_cart(5.0, 0.0), bar_cart(5.0, 0.0)}) {
    Scenario uneven = scenario;
    for (std::size_t i = 0; i < uneven.sensors.lateral_mm.size(); ++i) {
      uneven.sensors.gain.push_back(0.93 + 0.03 * static_cast<double>(i));
      uneven.sensors.offset_pct.push_back(1.0 - 0.4 * static_cast<double>(i));
    }
    const StraightSensors sensors = sensors_of(uneven);
    for (double deviation = -0.0093; deviation < 0.01; deviation += 0.0011) {
      const double h = 1e-7;
      const auto left = straight_error(sensors, deviation + h),
                 right = straight_error(sensors, deviation - h);
      REQUIRE((left && right));
      CHECK(straight_slope(sensors, deviation) ==
            Approx((*left - *right) / (2.0 * h)).epsilon(6e-3).margin(1e-3));
    }
  }
}

TEST_CASE("the error across the line is the one the drive makes of its floor") {
  for (Scenario scenario : {cart(5.0, 0.0), edge_cart(5.0, 0.0), bar_cart(5.0, 0.0)}) {
    scenario.drive.start_offset_mm = 5.0;
    const Result<Plan> plan = make_plan(scenario);
    REQUIRE(plan.ok());
    Trace trace;
    drive(*plan, &trace);
    const StraightSensors sensors = sensors_of(scenario);
    const double scale = scenario.sensors.scheme == Scheme::bar ? 35.0 : 1.0;
    int compared = 0;
    for (const TraceRow& row : trace.rows) {
      if (std::fabs(row.heading) > 0.02 || row.progress > 3.9) continue;  // the line ends at 4 m
      const auto error = straight_error(sensors, row.deviation);
      REQUIRE(error);
      CHECK(std::fabs(row.error - *error) < 0.003 * scale);
      ++compared;
    }
    CHECK(compared > 100);
  }
}

TEST_CASE("one sensor rests where its reading is the target, on the edge it follows") {
  for (const Edge edge : {Edge::left, Edge::right}) {
    Scenario scenario = edge_cart(5.0, 0.0);
    scenario.sensors.edge = edge;
    const StraightSensors sensors = sensors_of(scenario);
    const Result<SensorPoint> point = sensor_point(sensors, 0.06);
    REQUIRE(point.ok());
    CHECK(*straight_error(sensors, point->deviation) == Approx(0.0).margin(1e-12));
    const double side = edge == Edge::left ? 1.0 : -1.0;
    CHECK(side * (point->deviation + 0.003) == Approx(0.010).margin(0.004));
  }
}

// The centroid of darkness under evenly spaced sensors moves one spacing when the line does.
TEST_CASE("a bar with its edges between two spots gets the mean slope of one millimetre a millimetre") {
  Scenario scenario = bar_cart(5.0, 0.0);
  scenario.sensors.spot_mm = 3.0;
  scenario.course.line_mm = 32.0;  // edges at 16, spots at 12 and 20 from the middle
  const Result<SensorPoint> point = sensor_point(sensors_of(scenario), 0.06);
  REQUIRE(point.ok());
  CHECK(point->averaged);
  CHECK(point->exact == 0.0);
  CHECK(point->slope == Approx(1000.0).epsilon(1e-9));
}

TEST_CASE("sensors that cannot hold the line are refused with the reason") {
  Scenario blind = cart(5.0, 0.0);
  blind.course.line_mm = 40.0;
  CHECK(linearise(blind).error().why.find("no spot is over an edge") != std::string::npos);
  Scenario never = edge_cart(5.0, 0.0);
  never.sensors.target_pct = 95.0;
  CHECK(linearise(never).error().where == "sensors.target_pct");
  Scenario far = edge_cart(5.0, 0.0);
  far.sensors.lateral_mm = {200.0};
  CHECK_FALSE(linearise(far).ok());
  Scenario still = cart(5.0, 0.0);
  still.vehicle.dead_band_pct = 40.0;
  CHECK(linearise(still).error().why.find("stands still") != std::string::npos);
}
