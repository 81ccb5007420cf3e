#include "engine/theory/sensor_slope.h"

#include <algorithm>
#include <cmath>

#include "engine/theory/roots.h"

namespace lw {
namespace {

// A bar whose slope at rest is below this share of its mean slope has an edge in the blind space between two
// spots: it swings across that space, and the mean is what the swing meets.
constexpr double blind_share = 0.05;
constexpr double no_error = 1e-12;  // of full scale, or mm

double chord(double z) { return std::sqrt(std::max(0.0, 1.0 - z * z)); }

double brightness_slope(const StraightSensors& sensors, double x) {
  const double h = sensors.half_width, r = sensors.spot_radius;
  return 2.0 / (pi * r) * (chord((h - x) / r) - chord((h + x) / r));
}

struct Reading {
  double value, slope;  // of full scale, 1/m
};

Reading reading_at(const StraightSensors& sensors, int i, double deviation) {
  const Optics<double>& optics = sensors.optics;
  const double x = deviation + optics.lateral[i];
  const double bright = 1.0 - strip_share_of_disc(x, sensors.half_width, sensors.spot_radius);
  const double value = optics.dark[i] + optics.contrast[i] * bright;
  const bool limited = value < 0.0 || value > 1.0;
  return {held(value, 0.0, 1.0), limited ? 0.0 : optics.contrast[i] * brightness_slope(sensors, x)};
}

/// The quotient rule on the centroid of darkness.
double bar_slope(const StraightSensors& sensors, double deviation) {
  const Optics<double>& optics = sensors.optics;
  double sum = 0.0, moment = 0.0, sum_slope = 0.0, moment_slope = 0.0;
  for (int i = 0; i < sensors.wiring.count; ++i) {
    const Reading reading = reading_at(sensors, i, deviation);
    const double darkness = (optics.white - reading.value) * optics.per_contrast;
    if (darkness <= 0.0) continue;
    const double slope = -reading.slope * optics.per_contrast;
    sum += darkness;
    moment += darkness * optics.lateral[i];
    sum_slope += slope;
    moment_slope += slope * optics.lateral[i];
  }
  return 1e3 * (moment_slope * sum - moment * sum_slope) / (sum * sum);
}

double least_spacing(const StraightSensors& sensors) {
  double least = HUGE_VAL;
  for (int i = 0; i < sensors.wiring.count; ++i) {
    for (int k = 0; k < i; ++k)
      least = std::min(least, std::fabs(sensors.optics.lateral[i] - sensors.optics.lateral[k]));
  }
  return least;
}

/// Steps outwards for the nearest place where the error falls through 0 as the deviation grows.
std::optional<double> find_rest(const StraightSensors& sensors, double reach) {
  const auto at_zero = straight_error(sensors, 0.0);
  if (at_zero && std::fabs(*at_zero) < no_error && straight_slope(sensors, 0.0) <= 0.0) return 0.0;
  const double step = std::max(sensors.spot_radius / 8.0, reach / 1e4);
  const auto falls_between = [&](double low, double high) -> std::optional<double> {
    const auto at_low = straight_error(sensors, low), at_high = straight_error(sensors, high);
    if (!at_low || !at_high || !(*at_low > 0.0) || *at_high > 0.0) return {};
    const auto error = [&](double x) { return straight_error(sensors, x).value_or(0.0); };
    return bracketed_root(error, low, high, 1e-15);
  };
  for (double near = 0.0; near < reach; near += step) {
    const auto left = falls_between(near, near + step), right = falls_between(-near - step, -near);
    if (left) return left;
    if (right) return right;
  }
  return {};
}

Error no_rest(const StraightSensors& sensors) {
  if (sensors.wiring.scheme == Scheme::edge)
    return {"sensors.target_pct", "", "the sensor meets this reading nowhere near the edge it follows"};
  return {"sensors", "", "no deviation near the line gives an error of 0 with a sign that steers back"};
}

Error no_slope() {
  return {"sensors", "",
          "no spot is over an edge of the line when the vehicle follows it, so a small deviation changes no "
          "reading and there is no linear loop; move the sensors over the edges (lateral_mm, line_mm)"};
}

}  // namespace

std::optional<double> straight_error(const StraightSensors& sensors, double deviation) {
  SensorState<double> state{};
  double darkest = 0.0;
  for (int i = 0; i < sensors.wiring.count; ++i) {
    state.reading[i] = reading_at(sensors, i, deviation).value;
    darkest = std::max(darkest, (sensors.optics.white - state.reading[i]) * sensors.optics.per_contrast);
  }
  if (sensors.wiring.scheme == Scheme::bar && darkest < sees_line) return {};
  return error_from(sensors.optics, sensors.wiring, state);
}

double straight_slope(const StraightSensors& sensors, double deviation) {
  const SensorWiring& wiring = sensors.wiring;
  switch (wiring.scheme) {
    case Scheme::edge:
      return -sensors.optics.edge_sign * reading_at(sensors, 0, deviation).slope;
    case Scheme::pair:
      return reading_at(sensors, wiring.right, deviation).slope -
             reading_at(sensors, wiring.left, deviation).slope;
    case Scheme::bar:
      return straight_error(sensors, deviation) ? bar_slope(sensors, deviation) : 0.0;
  }
  return 0.0;
}

Result<SensorPoint> sensor_point(const StraightSensors& sensors, double reach) {
  const auto rest = find_rest(sensors, reach);
  if (!rest) return no_rest(sensors);
  SensorPoint point;
  point.deviation = *rest;
  point.slope = point.exact = -straight_slope(sensors, *rest);
  if (sensors.wiring.scheme == Scheme::bar) {
    const double half = 0.5 * least_spacing(sensors);
    const auto left = straight_error(sensors, *rest + half), right = straight_error(sensors, *rest - half);
    const double mean = left && right ? (*right - *left) / (2.0 * half) : 0.0;
    if (point.exact < blind_share * mean) {
      point.slope = mean;
      point.averaged = true;
    }
  }
  if (!(point.slope > 0.0)) return no_slope();
  return point;
}

}  // namespace lw
