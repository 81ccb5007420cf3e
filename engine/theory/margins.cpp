#include "engine/theory/margins.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/functions.h"
#include "engine/theory/roots.h"

namespace lw {
namespace {

using Complex = std::complex<double>;

constexpr double grid_ratio = 1.04;     // between neighbouring frequencies
constexpr double grid_turn = 0.6;       // rad, the most that delay turns the phase between neighbours
constexpr double below_corners = 1e-3;  // lowest frequency over the lowest corner
constexpr double lowest_share = 1e-9;   // lowest frequency over pi / T, whatever the corners
// With thousands of periods of delay the grid would be as long. It is then cut: what follows are swings of
// gains far beyond the first hundreds, all of which leave the unit circle.
constexpr std::size_t most_frequencies = 6000;
constexpr double refined = 1e-13;  // of a frequency, relative

// ---- where to look ------------------------------------------------------------------------------------

double lowest_corner(const SampledLoop& loop, const LoopGains& gains) {
  const double t = loop.period, kp = std::fabs(gains.kp), ki = std::fabs(gains.ki) / t;
  const double kd = std::fabs(gains.kd) * t;
  double corner = 1.0 / (t + loop.delay + loop.turn_time + loop.sensor_lag + loop.filter);
  const auto count = [&](double omega) {
    if (omega > 0.0 && std::isfinite(omega)) corner = std::min(corner, omega);
  };
  const double path = loop.slope * loop.speed * loop.yaw_gain;  // |path| -> this / omega^2
  count(loop.speed / loop.forward);
  count(ki / kp);
  count(kp / kd);
  count(std::sqrt(path * kp));  // where |L| would be 1 with one term of the law alone
  count(std::cbrt(path * ki));
  count(path * kd);
  return corner;
}

Sweep swept(const SampledLoop& loop, std::vector<double> omega) {
  Sweep over;
  over.omega = std::move(omega);
  for (const double at : over.omega) {
    over.path.push_back(path_response(loop, at));
    over.integral.push_back(integral_response(loop, at));
    over.derivative.push_back(derivative_response(loop, at));
  }
  return over;
}

std::vector<double> grid_of(const SampledLoop& loop, double corner) {
  const double last = pi / loop.period;
  const double turn_step = grid_turn / (loop.delay + 2.0 * loop.period);
  std::vector<double> grid;
  double omega = std::max(below_corners * corner, lowest_share * last);
  while (omega < last && grid.size() < most_frequencies) {
    grid.push_back(omega);
    omega = std::min(omega * grid_ratio, omega + turn_step);
  }
  grid.push_back(last);
  return grid;
}

std::vector<Complex> open_loop(const SampledLoop& loop, const Sweep& over) {
  const LoopGains& gains = loop.gains;
  std::vector<Complex> open;
  open.reserve(over.omega.size());
  for (std::size_t i = 0; i < over.omega.size(); ++i)
    open.push_back((gains.kp + gains.ki * over.integral[i] + gains.kd * over.derivative[i]) * over.path[i]);
  open.back().imag(0.0);  // at z = -1 everything is real
  return open;
}

// ---- ranges of gain -----------------------------------------------------------------------------------

/// A place where L is real and negative. Only those that end a range are refined.
struct Crossing {
  double gain, omega;
  int poles;         // how many leave the unit circle as the gain grows past; negative = enter it
  double low, high;  // rad/s, around it; equal = exact as it is
};

Crossing refined_from(const SampledLoop& loop, Crossing crossing) {
  if (crossing.low == crossing.high) return crossing;
  const auto imag = [&](double omega) { return response(loop, omega).imag(); };
  crossing.omega = bracketed_root(imag, crossing.low, crossing.high, refined * crossing.low);
  crossing.gain = -1.0 / response(loop, crossing.omega).real();
  return crossing;
}

/// Unstable poles for small factors: those that leave z = 1. With m poles there and L ~ c / (j omega)^m they
/// start along the m-th roots of -c.
int unstable_at_small_gain(const SampledLoop& loop, Complex lowest) {
  const LoopGains& gains = loop.gains;
  if (gains.ki != 0.0) return gains.ki > 0.0 ? 2 : 1;
  if (gains.kp != 0.0) return gains.kp < 0.0 ? 1 : lowest.imag() < 0.0 ? 0 : 2;
  return gains.kd > 0.0 ? 0 : 1;
}

std::vector<Crossing> crossings_of(const SampledLoop& loop, const Sweep& over,
                                   const std::vector<Complex>& open) {
  std::vector<Crossing> found;
  const std::size_t last = open.size() - 1;
  for (std::size_t i = 0; i + 1 < last; ++i) {
    const double here = open[i].imag(), next = open[i + 1].imag();
    if ((here < 0.0) == (next < 0.0) || (open[i].real() > 0.0 && open[i + 1].real() > 0.0)) continue;
    const double low = over.omega[i], high = over.omega[i + 1];
    const double omega = low + (high - low) * here / (here - next);
    const double real = response(loop, omega).real();
    if (real < 0.0) found.push_back({-1.0 / real, omega, here < 0.0 ? 2 : -2, low, high});
  }
  if (open[last].real() < 0.0) {
    const double omega = over.omega[last];
    found.push_back({-1.0 / open[last].real(), omega, open[last - 1].imag() < 0.0 ? 1 : -1, omega, omega});
  }
  std::sort(found.begin(), found.end(), [](const Crossing& a, const Crossing& b) { return a.gain < b.gain; });
  return found;
}

std::vector<GainRange> ranges_of(const SampledLoop& loop, const Sweep& over,
                                 const std::vector<Complex>& open) {
  if (loop.gains.kp == 0.0 && loop.gains.ki == 0.0 && loop.gains.kd == 0.0) return {};
  std::vector<GainRange> ranges;
  int unstable = unstable_at_small_gain(loop, open.front());
  GainRange range{0.0, HUGE_VAL, 0.0, 0.0};
  for (const Crossing& near : crossings_of(loop, over, open)) {
    const int after = unstable + near.poles;
    if (unstable == 0 || after == 0) {
      const Crossing crossing = refined_from(loop, near);
      if (unstable == 0) {
        range.high = crossing.gain;
        range.high_omega = crossing.omega;
        ranges.push_back(range);
      }
      range = {crossing.gain, HUGE_VAL, crossing.omega, 0.0};
    }
    unstable = after;
  }
  if (unstable == 0) ranges.push_back(range);
  return ranges;
}

double distance_from_one(const GainRange& range) {
  if (range.low < 1.0 && range.high > 1.0) return 0.0;
  return range.high <= 1.0 ? -std::log(range.high) : std::log(range.low);
}

void set_gain_margins(const std::vector<GainRange>& ranges, Margins& margins) {
  const GainRange* nearest = nullptr;
  for (const GainRange& range : ranges) {
    if (!nearest || distance_from_one(range) < distance_from_one(*nearest)) nearest = &range;
  }
  if (!nearest) return;
  margins.stable = nearest->low < 1.0 && nearest->high > 1.0;
  if (std::isfinite(nearest->high)) margins.gain_high = nearest->high;
  if (nearest->low > 0.0) margins.gain_low = nearest->low;
  margins.gain_high_omega = nearest->high_omega;
  margins.gain_low_omega = nearest->low_omega;
}

// ---- phase, delay, sensitivity ------------------------------------------------------------------------

void set_phase_margins(const SampledLoop& loop, const Sweep& over, const std::vector<Complex>& open,
                       Margins& margins) {
  const auto excess = [&](double omega) { return std::log(std::norm(response(loop, omega))); };
  for (std::size_t i = 0; i + 1 < open.size(); ++i) {
    if ((std::norm(open[i]) > 1.0) == (std::norm(open[i + 1]) > 1.0)) continue;
    const double omega = bracketed_root(excess, over.omega[i], over.omega[i + 1], refined * over.omega[i]);
    const double phase = std::arg(-response(loop, omega));
    if (!margins.phase || std::fabs(phase) < std::fabs(*margins.phase)) {
      margins.phase = phase;
      margins.phase_omega = omega;
    }
    const double delay = (phase >= 0.0 ? phase : phase + 2.0 * pi) / omega;
    if (margins.stable && (!margins.delay || delay < *margins.delay)) margins.delay = delay;
  }
}

void set_sensitivity(const SampledLoop& loop, const Sweep& over, const std::vector<Complex>& open,
                     Margins& margins) {
  double least = 1.0;  // of |1 + L|, which tends to infinity at low frequency
  const auto distance = [&](double omega) { return std::abs(1.0 + response(loop, omega)); };
  const auto count = [&](double omega, double value) {
    if (value >= least) return;
    least = value;
    margins.sensitivity_omega = omega;
  };
  const std::size_t last = open.size() - 1;
  for (std::size_t i = 1; i < last; ++i) {
    const double here = std::abs(1.0 + open[i]);
    if (here > std::abs(1.0 + open[i - 1]) || here > std::abs(1.0 + open[i + 1])) continue;
    if (here > 1.1 * least) continue;
    const Minimum minimum =
        bracketed_minimum(distance, over.omega[i - 1], over.omega[i + 1], 1e-6 * over.omega[i]);
    count(minimum.x, minimum.value);
  }
  count(over.omega[last], std::abs(1.0 + open[last]));
  margins.sensitivity_peak = 1.0 / least;
}

}  // namespace

Sweep sweep(const SampledLoop& loop) { return swept(loop, grid_of(loop, lowest_corner(loop, loop.gains))); }

Sweep sweep(const SampledLoop& loop, const LoopGains& one, const LoopGains& other) {
  return swept(loop, grid_of(loop, std::min(lowest_corner(loop, one), lowest_corner(loop, other))));
}

std::vector<GainRange> stable_ranges(const SampledLoop& loop, const Sweep& over) {
  return ranges_of(loop, over, open_loop(loop, over));
}

Margins margins(const SampledLoop& loop) { return margins(loop, sweep(loop)); }

Margins margins(const SampledLoop& loop, const Sweep& over, bool peak) {
  Margins margins;
  const std::vector<Complex> open = open_loop(loop, over);
  set_gain_margins(ranges_of(loop, over, open), margins);
  set_phase_margins(loop, over, open, margins);
  if (peak && margins.stable) set_sensitivity(loop, over, open, margins);
  return margins;
}

double decibels(double factor) { return 20.0 * std::log10(factor); }

Critical critical(const SampledLoop& loop) {
  const SampledLoop alone = with_gains(loop, {1.0, 0.0, 0.0});
  const std::vector<GainRange> ranges = stable_ranges(alone, sweep(alone));
  Critical critical;
  if (ranges.empty()) {
    critical.reason = in_words(speed_limit(loop), loop);
    return critical;
  }
  const GainRange& range = ranges.front();
  if (range.low > 0.0) critical.low_gain = range.low;
  if (std::isfinite(range.high)) {
    critical.gain = range.high;
    critical.period = 2.0 * pi / range.high_omega;
  } else {
    critical.reason = "P alone is stable at any gain.";
  }
  return critical;
}

ResponseCurve response_curve(const SampledLoop& loop) {
  Sweep over = sweep(loop);
  const Margins at = margins(loop, over);
  over.omega.insert(over.omega.end(),
                    {at.gain_high_omega, at.gain_low_omega, at.phase_omega, at.sensitivity_omega});
  std::sort(over.omega.begin(), over.omega.end());
  over.omega.erase(std::unique(over.omega.begin(), over.omega.end()), over.omega.end());
  over.omega.erase(over.omega.begin(), std::upper_bound(over.omega.begin(), over.omega.end(), 0.0));
  over = swept(loop, std::move(over.omega));
  const std::vector<Complex> open = open_loop(loop, over);
  const int integrators = loop.gains.ki != 0.0 ? 3 : loop.gains.kp != 0.0 ? 2 : 1;
  ResponseCurve curve;
  curve.omega = over.omega;
  double before = -0.5 * pi * integrators;
  for (const Complex& value : open) {
    double phase = std::arg(value);
    phase += 2.0 * pi * std::round((before - phase) / (2.0 * pi));
    before = phase;
    curve.real.push_back(value.real());
    curve.imag.push_back(value.imag());
    curve.gain_db.push_back(decibels(std::abs(value)));
    curve.phase.push_back(phase);
    curve.sensitivity.push_back(1.0 / std::abs(1.0 + value));
  }
  return curve;
}

}  // namespace lw
