#include "engine/theory/notes.h"

#include <cmath>

#include "engine/numeric/words.h"

namespace lw {
namespace {

using Notes = std::vector<std::string>;

void add_of_sensors(const Sensors& sensors, const SampledLoop& loop, const SensorPoint& point, Notes& notes) {
  if (std::fabs(loop.rest) > 1e-9)
    notes.push_back("The error is 0 at a deviation of " + significant(1e3 * loop.rest, 4) +
                    " mm; the slope of the sensors is taken there.");
  if (point.averaged)
    notes.push_back("At rest the edges lie between two spots and the error hardly moves (" +
                    significant(std::fabs(point.exact), 4) +
                    " mm per m); the figures use the mean over one sensor spacing, " +
                    significant(point.slope, 4) + " mm per m.");
  if (1e-3 * sensors.refresh_ms > loop.period)
    notes.push_back("Readings are refreshed every " + significant(sensors.refresh_ms, 4) +
                    " ms: their mean extra age counts as delay, " + significant(1e3 * loop.delay, 4) +
                    " ms with the command's; the true loop changes from one period to the next.");
  if (sensors.step_pct > 0.0)
    notes.push_back("Rounding of readings to " + significant(sensors.step_pct, 4) +
                    " % is left out: deviations smaller than a step are not seen, so the true loop may keep "
                    "a small oscillation.");
}

void add_of_vehicle(const Scenario& scenario, const SampledLoop& loop, Notes& notes) {
  const Vehicle& vehicle = scenario.vehicle;
  if (vehicle.command_step_pct > 0.0)
    notes.push_back("Rounding of commands to " + significant(vehicle.command_step_pct, 4) +
                    " % is left out.");
  const double left = vehicle.wheel_left_mm, right = vehicle.wheel_right_mm;
  if (left != right)
    notes.push_back("Unequal wheels need " +
                    significant(1e2 * loop.base * (left - right) / (left + right), 4) +
                    " % of steady steer. P alone holds an error for it, away from where the slope is taken.");
  if (loop.base >= 1.0)
    notes.push_back("At full base the faster wheel has nothing left: steer has half its effect.");
  else
    notes.push_back(
        "Saturation is left out: a wheel command is at its limit when steer exceeds " +
        significant(1e2 * std::fmin(1.0 - loop.base, 1e-2 * scenario.controller.steer_limit_pct), 4) + " %.");
}

}  // namespace

std::vector<std::string> notes_of(const Scenario& scenario, const SampledLoop& loop,
                                  const SensorPoint& point) {
  Notes notes;
  add_of_sensors(scenario.sensors, loop, point, notes);
  add_of_vehicle(scenario, loop, notes);
  if (scenario.loop.jitter_pct > 0.0)
    notes.push_back("The period is taken as its mean; jitter of " + significant(scenario.loop.jitter_pct, 4) +
                    " % is left out.");
  if (scenario.controller.ease > 0.0)
    notes.push_back("Easing the base off is left out: it acts only away from the line.");
  return notes;
}

}  // namespace lw
