#include "engine/theory/notes.h"

#include <cmath>
#include <cstdio>

namespace lw {
namespace {

using Notes = std::vector<std::string>;

std::string number(double value) {
  char text[32];
  std::snprintf(text, sizeof text, "%.4g", value);
  return text;
}

void add_of_sensors(const Sensors& sensors, const SampledLoop& loop, const SensorPoint& point, Notes& notes) {
  if (std::fabs(loop.rest) > 1e-9)
    notes.push_back("The error is 0 at a deviation of " + number(1e3 * loop.rest) +
                    " mm; the slope of the sensors is taken there.");
  if (point.averaged)
    notes.push_back("At rest the edges lie between two spots and the error hardly moves (" +
                    number(std::fabs(point.exact)) +
                    " mm per m); the figures use the mean over one sensor spacing, " + number(point.slope) +
                    " mm per m.");
  if (1e-3 * sensors.refresh_ms > loop.period)
    notes.push_back("Readings are refreshed every " + number(sensors.refresh_ms) +
                    " ms: their mean extra age counts as delay, " + number(1e3 * loop.delay) +
                    " ms with the command's; the true loop changes from one period to the next.");
  if (sensors.step_pct > 0.0)
    notes.push_back("Rounding of readings to " + number(sensors.step_pct) +
                    " % is left out: deviations smaller than a step are not seen, so the true loop may keep "
                    "a small oscillation.");
}

void add_of_vehicle(const Scenario& scenario, const SampledLoop& loop, Notes& notes) {
  const Vehicle& vehicle = scenario.vehicle;
  if (vehicle.command_step_pct > 0.0)
    notes.push_back("Rounding of commands to " + number(vehicle.command_step_pct) + " % is left out.");
  const double left = vehicle.wheel_left_mm, right = vehicle.wheel_right_mm;
  if (left != right)
    notes.push_back("Unequal wheels need " + number(1e2 * loop.base * (left - right) / (left + right)) +
                    " % of steady steer. P alone holds an error for it, away from where the slope is taken.");
  if (loop.base >= 1.0)
    notes.push_back("At full base the faster wheel has nothing left: steer has half its effect.");
  else
    notes.push_back("Saturation is left out: a wheel command is at its limit when steer exceeds " +
                    number(1e2 * std::fmin(1.0 - loop.base, 1e-2 * scenario.controller.steer_limit_pct)) +
                    " %.");
}

}  // namespace

std::vector<std::string> notes_of(const Scenario& scenario, const SampledLoop& loop,
                                  const SensorPoint& point) {
  Notes notes;
  add_of_sensors(scenario.sensors, loop, point, notes);
  add_of_vehicle(scenario, loop, notes);
  if (scenario.loop.jitter_pct > 0.0)
    notes.push_back("The period is taken as its mean; jitter of " + number(scenario.loop.jitter_pct) +
                    " % is left out.");
  if (scenario.controller.ease > 0.0)
    notes.push_back("Easing the base off is left out: it acts only away from the line.");
  return notes;
}

}  // namespace lw
