#include "engine/tuning/relay.h"

#include <algorithm>
#include <cmath>
#include <complex>

#include "engine/tuning/oscillation.h"

namespace lw {
namespace {

constexpr std::size_t settling_periods = 12, measured_periods = 16;
constexpr std::size_t most_rows = 400000;
constexpr double noise_widths = 2.5;  // of the error's noise, that the hysteresis keeps above

/// Standard deviation of the error's noise and size of its smallest step, in the error's unit.
double error_grain(const Straight& straight) {
  const Optics<double>& optics = straight.plan.rig.optics;
  const SensorWiring& wiring = straight.plan.wiring.sensors;
  const double step = wiring.rounding ? optics.step : 0.0;
  const double reading = std::max(noise_widths * optics.noise, step);
  if (wiring.scheme == Scheme::edge) return reading;
  if (wiring.scheme == Scheme::pair) return std::sqrt(2.0) * reading;
  return reading * optics.per_contrast * optics.outermost;  // a bar, in mm: roughly
}

std::size_t count_rises(const std::vector<SwingRow>& rows) {
  const std::size_t n = rows.size();
  return n > 1 && rows[n - 2].steer < 0.0 && rows[n - 1].steer > 0.0 ? 1 : 0;
}

struct Run {
  std::vector<double> t, error, deviation, output;  // settled
  double limited = 0.0;
  bool left = false;  // the line, so that nothing oscillates
};

Run run_of(const Straight& straight, Relay relay, double amplitude, std::uint64_t draw) {
  SwingSetting drive;
  drive.offset = amplitude;
  drive.draw = draw;
  drive.steer = [&relay](double error) { return switched(relay, error); };
  std::size_t switches = 0;
  const double far = straight.half_width + straight.outermost + straight.spot_radius;
  Run run;
  const auto rows = swing(straight, drive, most_rows, [&](const std::vector<SwingRow>& so_far) {
    switches += count_rises(so_far);
    run.left = std::fabs(so_far.back().deviation) > far;
    return !run.left && switches < settling_periods + measured_periods + 1;
  });
  std::size_t first = 0, seen = 0;
  for (std::size_t i = 1; i < rows.size() && seen < settling_periods; ++i) {
    if (rows[i - 1].steer < 0.0 && rows[i].steer > 0.0) ++seen, first = i;
  }
  for (std::size_t i = first; i < rows.size(); ++i) {
    run.t.push_back(rows[i].t);
    run.error.push_back(rows[i].error);
    run.deviation.push_back(rows[i].deviation);
    run.output.push_back(rows[i].steer);
    run.limited += rows[i].limited ? 1.0 / static_cast<double>(rows.size() - first) : 0.0;
  }
  return run;
}

std::complex<double> first_harmonic(const std::vector<double>& t, const std::vector<double>& x, double from,
                                    double to, double period) {
  std::complex<double> sum = 0.0;
  double weight = 0.0;
  for (std::size_t i = 0; i < t.size(); ++i) {
    if (t[i] < from || t[i] >= to) continue;
    const double w = 0.5 - 0.5 * std::cos(2.0 * pi * (t[i] - from) / (to - from));
    sum += w * x[i] * std::polar(1.0, -2.0 * pi * t[i] / period);
    weight += w;
  }
  return 2.0 * sum / weight;
}

/// Half of peak to peak, mean over whole periods.
double swing_of(const std::vector<double>& t, const std::vector<double>& x, double from, double period,
                int periods) {
  std::vector<double> low(static_cast<std::size_t>(periods), HUGE_VAL), high(low.size(), -HUGE_VAL);
  for (std::size_t i = 0; i < t.size(); ++i) {
    const double into = (t[i] - from) / period;
    if (into < 0.0 || into >= periods) continue;
    const std::size_t k = static_cast<std::size_t>(into);
    low[k] = std::min(low[k], x[i]);
    high[k] = std::max(high[k], x[i]);
  }
  double sum = 0.0;
  for (std::size_t k = 0; k < low.size(); ++k) sum += 0.5 * (high[k] - low[k]);
  return sum / periods;
}

}  // namespace

double switched(Relay& relay, double error) {
  if (error > relay.hysteresis) relay.output = relay.size;
  if (error < -relay.hysteresis) relay.output = -relay.size;
  if (relay.output == 0.0) relay.output = error < 0.0 ? -relay.size : relay.size;
  return relay.output;
}

std::optional<RelayReading> relay_reading(const std::vector<double>& t, const std::vector<double>& error,
                                          const std::vector<double>& output, double size, double hysteresis) {
  const std::vector<double> up = rises(t, output, 0.0);
  const auto period = mean_period(up);
  if (!period || up.size() < 5) return {};
  const int periods = static_cast<int>(up.size()) - 1;
  RelayReading reading;
  reading.period = *period;
  reading.amplitude = swing_of(t, error, up.front(), *period, periods);
  if (!(reading.amplitude > hysteresis)) return {};
  reading.gain =
      4.0 * size / (pi * std::sqrt(reading.amplitude * reading.amplitude - hysteresis * hysteresis));
  const auto of_error = first_harmonic(t, error, up.front(), up.back(), *period);
  const auto of_output = first_harmonic(t, output, up.front(), up.back(), *period);
  reading.first_harmonic_gain = std::abs(of_output) / std::abs(of_error);
  reading.late = std::arg(of_error / of_output);
  return reading;
}

RelayFound relay_experiment(const Straight& straight, const RelaySetting& setting) {
  RelayFound found;
  const double grain = error_grain(straight);
  double wanted = setting.amplitude > 0.0 ? setting.amplitude : small_amplitude(straight);
  found.hysteresis = setting.hysteresis > 0.0 ? setting.hysteresis
                                              : std::max(0.1 * wanted * swing_slope(straight, wanted), grain);
  if (setting.amplitude <= 0.0)  // high enough above the hysteresis for the formula to hold
    wanted = std::max(wanted, 3.0 * found.hysteresis / straight.loop.slope);
  const double room = std::max(0.02, 1.0 - straight.loop.base - std::fabs(straight.trim));
  found.size = 0.1 * room;
  for (int pass = 0; pass < 4; ++pass) {
    const Run run = run_of(straight, {found.size, found.hysteresis, 0.0}, wanted, setting.draw);
    found.limited = run.limited;
    found.reading =
        run.left ? std::nullopt : relay_reading(run.t, run.error, run.output, found.size, found.hysteresis);
    if (found.reading) {
      const auto up = rises(run.t, run.output, 0.0);
      found.amplitude =
          swing_of(run.t, run.deviation, up.front(), found.reading->period, static_cast<int>(up.size()) - 1);
    }
    // d sets the amplitude; with the hysteresis not quite in proportion, hence more than one step
    const double factor = found.reading ? wanted / found.amplitude : (run.left ? 0.3 : 3.0);
    if (found.reading && std::fabs(factor - 1.0) < 0.1) break;
    if (pass < 3) found.size = std::min(found.size * factor, 0.95 * room);
  }
  if (!found.reading)
    found.reason =
        "the relay leaves no steady oscillation on the straight: the vehicle goes off the line, or the "
        "relay does not move it beyond the hysteresis";
  return found;
}

RelayParts relay_parts(const Straight& straight, const RelayFound& found, double critical) {
  RelayParts parts;
  if (!found.reading) return parts;
  const double real = path_response(straight.loop, 2.0 * pi / found.reading->period).real();
  if (real < 0.0) parts.frequency = -1.0 / (real * critical);
  parts.slope = straight.loop.slope / swing_slope(straight, found.amplitude);
  parts.formula = found.reading->gain / (critical * parts.frequency * parts.slope);
  return parts;
}

}  // namespace lw
