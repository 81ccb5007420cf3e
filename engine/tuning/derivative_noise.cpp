#include "engine/tuning/derivative_noise.h"

#include <cmath>
#include <vector>

#include "engine/course/floor.h"
#include "engine/drive/plan.h"
#include "engine/numeric/functions.h"
#include "engine/theory/margins.h"

namespace lw {
namespace {

using Complex = std::complex<double>;

constexpr double unseen_share = (pi - 1.0) / (2.0 * pi);  // variance of max(0, normal)
constexpr double panel_error = 1e-8;                      // of the whole integral
constexpr int most_halvings = 24;

/// Sum over the sensors of (d error / d reading)^2.
double squared_weights(const Scenario& scenario, const SampledLoop& loop) {
  const Wiring wiring = wiring_of(scenario);
  const Optics<double> optics = optics_of(scenario.sensors, scenario.floor);
  if (wiring.sensors.scheme == Scheme::edge) return 1.0;
  if (wiring.sensors.scheme == Scheme::pair) return 2.0;
  double darkness[max_sensors], sum = 0.0, moment = 0.0;
  for (int i = 0; i < wiring.sensors.count; ++i) {
    const double bright =
        1.0 - strip_share_of_disc(loop.rest + optics.lateral[i], 0.5e-3 * scenario.course.line_mm,
                                  0.5e-3 * scenario.sensors.spot_mm);
    const double reading = optics.dark[i] + optics.contrast[i] * bright;
    darkness[i] = std::fmax(0.0, (optics.white - reading) * optics.per_contrast);
    sum += darkness[i];
    moment += darkness[i] * optics.lateral[i];
  }
  double squares = 0.0;
  for (int i = 0; i < wiring.sensors.count; ++i) {
    const double weight = 1e3 * optics.per_contrast * (optics.lateral[i] - moment / sum) / sum;
    squares += weight * weight * (darkness[i] > 0.0 ? 1.0 : unseen_share);
  }
  return squares;
}

/// Phi over the variance, for readings that stay for `stays` periods in the mean.
double held_spectrum(double angle, double stays) {
  const double whole = std::floor(stays + 1e-9), more = std::fmax(0.0, stays - whole);
  const auto square = [&](double length) {
    const double ratio = std::sin(0.5 * length * angle) / std::sin(0.5 * angle);
    return ratio * ratio;
  };
  return ((1.0 - more) * square(whole) + more * square(whole + 1.0)) / stays;
}

Complex low_pass(const SampledLoop& loop, double omega) {
  if (loop.sensor_lag <= 0.0) return 1.0;
  const double share = loop.period / (loop.sensor_lag + loop.period);
  const Complex z = std::polar(1.0, omega * loop.period);
  return share * z / (z - 1.0 + share);
}

struct Density {
  double from_readings, from_rounding, deviation;
};

Density density_at(const SampledLoop& loop, const ErrorNoise& noise, double omega) {
  const Complex law = law_response(loop, omega), path = path_response(loop, omega);
  const double spectrum = held_spectrum(omega * loop.period, noise.stays);
  const double steer = std::norm(law / (1.0 + law * path)) * spectrum;
  const double passed = std::norm(low_pass(loop, omega));
  const Density density{steer * passed * noise.readings, steer * noise.rounding, 0.0};
  const double moved = std::norm(path) / (passed * loop.slope * loop.slope);
  return {density.from_readings, density.from_rounding,
          moved * (density.from_readings + density.from_rounding)};
}

Density sum(const Density& a, const Density& b, double by) {
  return {a.from_readings + by * b.from_readings, a.from_rounding + by * b.from_rounding,
          a.deviation + by * b.deviation};
}

/// Simpson's rule, halved until both halves agree with the whole (Kuncir 1962).
class Integral {
 public:
  Integral(const SampledLoop& loop, const ErrorNoise& noise) : loop_(loop), noise_(noise) {}

  Density total() const { return total_; }
  void add(double low, double high) {
    panel(low, high, at(low), at(0.5 * (low + high)), at(high), most_halvings);
  }

 private:
  Density at(double omega) const { return density_at(loop_, noise_, omega); }
  static Density simpson(double width, const Density& a, const Density& m, const Density& b) {
    return sum({}, sum(sum(a, m, 4.0), b, 1.0), width / 6.0);
  }
  bool agree(const Density& coarse, const Density& fine) const {
    const auto close = [](double a, double b, double whole) {
      return std::fabs(a - b) <= panel_error * (whole + std::fabs(b));
    };
    return close(coarse.from_readings, fine.from_readings, total_.from_readings) &&
           close(coarse.from_rounding, fine.from_rounding, total_.from_rounding) &&
           close(coarse.deviation, fine.deviation, total_.deviation);
  }
  void panel(double low, double high, const Density& a, const Density& m, const Density& b, int halvings) {
    const double middle = 0.5 * (low + high), half = middle - low;
    const Density left = at(low + 0.5 * half), right = at(middle + 0.5 * half);
    const Density coarse = simpson(high - low, a, m, b);
    const Density fine = sum(simpson(half, a, left, m), simpson(half, m, right, b), 1.0);
    if (halvings == 0 || agree(coarse, fine)) {
      total_ = sum(total_, sum(fine, sum(fine, coarse, -1.0), 1.0 / 15.0), 1.0);
      return;
    }
    panel(low, middle, a, left, m, halvings - 1);
    panel(middle, high, m, right, b, halvings - 1);
  }

  const SampledLoop& loop_;
  const ErrorNoise& noise_;
  Density total_{0.0, 0.0, 0.0};
};

}  // namespace

ErrorNoise error_noise(const Scenario& scenario, const SampledLoop& loop) {
  const double squares = squared_weights(scenario, loop);
  const double noise = 1e-2 * scenario.sensors.noise_pct, step = 1e-2 * scenario.sensors.step_pct;
  return {squares * noise * noise, squares * step * step / 12.0,
          std::fmax(1.0, 1e-3 * scenario.sensors.refresh_ms / loop.period)};
}

std::optional<LoopNoise> loop_noise(const SampledLoop& loop, const ErrorNoise& noise) {
  const Sweep over = sweep(loop);
  if (!margins(loop, over, false).stable) return {};
  // From the high end, where most of it lies: the agreement asked for is a share of what is there already.
  Integral integral(loop, noise);
  for (std::size_t i = over.omega.size() - 1; i > 0; --i) integral.add(over.omega[i - 1], over.omega[i]);
  integral.add(1e-6 * over.omega.front(), over.omega.front());
  const double scale = loop.period / pi;
  const Density total = integral.total();
  return LoopNoise{std::sqrt(scale * (total.from_readings + total.from_rounding)),
                   std::sqrt(scale * total.from_readings), std::sqrt(scale * total.from_rounding),
                   std::sqrt(scale * total.deviation)};
}

}  // namespace lw
