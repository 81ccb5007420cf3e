#include "engine/tuning/oscillation.h"

#include <cmath>
#include <complex>

#include "engine/numeric/functions.h"

namespace lw {
namespace {

/// The fundamental's phasor over [from, from + window).
std::complex<double> phasor(const std::vector<double>& t, const std::vector<double>& x, double from,
                            double window, double omega) {
  std::complex<double> sum = 0.0;
  double weight = 0.0, mean = 0.0;
  const auto hann = [&](double into) { return 0.5 - 0.5 * std::cos(2.0 * pi * into); };
  std::size_t first = t.size();
  while (first > 0 && t[first - 1] >= from) --first;
  for (std::size_t i = first; i < t.size() && t[i] < from + window; ++i) {
    const double w = hann((t[i] - from) / window);
    weight += w;
    mean += w * x[i];
  }
  mean /= weight;
  for (std::size_t i = first; i < t.size() && t[i] < from + window; ++i)
    sum += hann((t[i] - from) / window) * (x[i] - mean) * std::polar(1.0, -omega * t[i]);
  return 2.0 * sum / weight;
}

}  // namespace

std::vector<double> rises(const std::vector<double>& t, const std::vector<double>& x, double hysteresis) {
  double mean = 0.0;
  for (const double value : x) mean += value / static_cast<double>(x.size());
  std::vector<double> found;
  bool armed = false;
  for (std::size_t i = 1; i < x.size(); ++i) {
    const double before = x[i - 1] - mean, now = x[i] - mean;
    armed = armed || before < -hysteresis;
    if (!armed || before >= 0.0 || now < 0.0) continue;
    found.push_back(t[i - 1] + (t[i] - t[i - 1]) * before / (before - now));
    armed = false;
  }
  return found;
}

std::optional<double> mean_period(const std::vector<double>& rises) {
  if (rises.size() < 2) return {};
  return (rises.back() - rises.front()) / static_cast<double>(rises.size() - 1);
}

std::optional<Oscillation> oscillation_of(const std::vector<double>& t, const std::vector<double>& x,
                                          double guess, int periods) {
  if (t.size() < 6 || !(guess > 0.0)) return {};
  double omega = 2.0 * pi / guess;
  std::complex<double> earlier, later;
  double window = 0.0;
  for (int pass = 0; pass < 3; ++pass) {
    window = periods * 2.0 * pi / omega;
    const double step = (t.back() - t.front()) / static_cast<double>(t.size() - 1);
    const double end = t.back() + step;
    if (end - 2.0 * window < t.front() || 2.0 * pi / omega < 3.0 * step) return {};
    earlier = phasor(t, x, end - 2.0 * window, window, omega);
    later = phasor(t, x, end - window, window, omega);
    if (!(std::abs(earlier) > 0.0) || !(std::abs(later) > 0.0)) return {};
    if (pass < 2) omega += std::arg(later / earlier) / window;
    if (!(omega > 0.0)) return {};
  }
  return Oscillation{2.0 * pi / omega, std::sqrt(std::abs(earlier) * std::abs(later)),
                     std::log(std::abs(later) / std::abs(earlier)) / window};
}

}  // namespace lw
