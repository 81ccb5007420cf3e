#include "engine/theory/poles.h"

#include <algorithm>
#include <cmath>

#include "engine/numeric/functions.h"

namespace lw {
namespace {

using Complex = std::complex<double>;
using Polynomial = std::vector<double>;  // in s = z - 1, lowest power first

Polynomial product(const Polynomial& a, const Polynomial& b) {
  Polynomial c(a.size() + b.size() - 1, 0.0);
  for (std::size_t i = 0; i < a.size(); ++i) {
    for (std::size_t k = 0; k < b.size(); ++k) c[i + k] += a[i] * b[k];
  }
  return c;
}

Polynomial sum(Polynomial a, const Polynomial& b) {
  a.resize(std::max(a.size(), b.size()), 0.0);
  for (std::size_t i = 0; i < b.size(); ++i) a[i] += b[i];
  return a;
}

Polynomial scaled(Polynomial a, double by) {
  for (double& value : a) value *= by;
  return a;
}

/// z^waiting a(s) + b(s).
struct Characteristic {
  int waiting = 0;
  Polynomial a, b;
  int degree() const { return waiting + static_cast<int>(a.size()) - 1; }
};

const Polynomial at_z{1.0, 1.0}, at_s{0.0, 1.0};

/// Law over its denominator, which is s (with I) times s + share (with D).
struct LawTerms {
  Polynomial above, below;
};

LawTerms law_of_loop(const SampledLoop& loop) {
  const LoopGains& gains = loop.gains;
  const double share = loop.period / (loop.filter + loop.period);
  const bool has_i = gains.ki != 0.0, has_d = gains.kd != 0.0;
  const Polynomial i_below = has_i ? at_s : Polynomial{1.0};
  const Polynomial d_below = has_d ? Polynomial{share, 1.0} : Polynomial{1.0};
  Polynomial above = scaled(product(i_below, d_below), gains.kp);
  if (has_i) above = sum(above, scaled(product(at_z, d_below), gains.ki));
  if (has_d) above = sum(above, scaled(product(at_s, i_below), gains.kd * share));
  return {above, product(i_below, d_below)};
}

Characteristic characteristic_of(const SampledLoop& loop) {
  const SampledPlant& plant = loop.plant;
  const auto coefficients = [&](const double n[3]) { return Polynomial(n, n + (plant.lags ? 3 : 2)); };
  Characteristic whole;
  whole.waiting = plant.waiting + (plant.split ? 1 : 0);
  Polynomial above = coefficients(plant.n0);
  if (plant.split) above = sum(product(above, at_z), coefficients(plant.n1));
  Polynomial below = product(at_s, at_s);
  if (plant.lags) below = product(below, {plant.settles, 1.0});
  if (loop.sensor_lag > 0.0) {
    const double share = loop.period / (loop.sensor_lag + loop.period);
    above = scaled(product(above, at_z), share);
    below = product(below, {share, 1.0});
  }
  const LawTerms law = law_of_loop(loop);
  whole.a = product(below, law.below);
  whole.b = scaled(product(above, law.above), loop.slope);
  return whole;
}

// The iteration converges with the third power, so that after a step this small nothing is left but rounding.
constexpr double settled_step = 1e-12;
constexpr int most_rounds = 100;

struct Value {
  Complex value, slope;
};

Value value_of(const Polynomial& p, Complex s) {
  Value v{0.0, 0.0};
  for (std::size_t i = p.size(); i-- > 0;) {
    v.slope = v.slope * s + v.value;
    v.value = v.value * s + p[i];
  }
  return v;
}

/// Newton's step p / p' at z.
Complex newton_step(const Characteristic& whole, Complex z) {
  const Complex s = z - 1.0;
  const Value a = value_of(whole.a, s), b = value_of(whole.b, s);
  const Complex below = whole.waiting > 0 ? std::pow(z, whole.waiting - 1) : Complex(0.0);
  const Complex power = whole.waiting > 0 ? below * z : Complex(1.0);
  const Complex value = power * a.value + b.value;
  const Complex slope = power * a.slope + static_cast<double>(whole.waiting) * below * a.value + b.slope;
  return value == 0.0 ? Complex(0.0) : value / slope;
}

std::vector<Complex> all_roots(const Characteristic& whole) {
  const int n = whole.degree();
  std::vector<Complex> roots;
  for (int i = 0; i < n; ++i) roots.push_back(std::polar(0.95, 2.0 * pi * (i + 0.37) / n));
  std::vector<char> settled(static_cast<std::size_t>(n), 0);
  int left = n;
  for (int round = 0; round < most_rounds && left > 0; ++round) {
    for (int i = 0; i < n; ++i) {
      if (settled[i]) continue;
      const Complex newton = newton_step(whole, roots[i]);
      Complex crowd = 0.0;
      for (int k = 0; k < n; ++k) {
        if (k != i) crowd += 1.0 / (roots[i] - roots[k]);
      }
      const Complex step = newton / (1.0 - newton * crowd);
      if (!std::isfinite(step.real()) || !std::isfinite(step.imag())) {
        roots[i] *= Complex(0.99, 0.01);  // two met, or p' is 0 here: step aside
        continue;
      }
      roots[i] -= step;
      if (std::abs(step) < settled_step * std::max(1e-3, std::abs(roots[i] - 1.0))) {
        settled[i] = 1;
        --left;
      }
    }
  }
  return roots;
}

/// Real roots to the last bit real, pairs exactly conjugate.
void tidy(std::vector<Complex>& roots) {
  for (Complex& root : roots) {
    if (std::fabs(root.imag()) < 1e-11) root.imag(0.0);
  }
  std::sort(roots.begin(), roots.end(), [](Complex a, Complex b) {
    const double size_a = std::abs(a), size_b = std::abs(b);
    if (std::fabs(size_a - size_b) > 1e-10) return size_a > size_b;
    if (std::fabs(a.real() - b.real()) > 1e-10) return a.real() > b.real();
    return a.imag() > b.imag();
  });
}

}  // namespace

std::vector<Complex> poles(const SampledLoop& loop) {
  Characteristic whole = characteristic_of(loop);
  if (whole.degree() > most_poles) return {};
  std::vector<Complex> found;
  const bool open = loop.gains.kp == 0.0 && loop.gains.ki == 0.0 && loop.gains.kd == 0.0;
  if (open) {
    found = {1.0, 1.0};
    if (loop.plant.lags) found.push_back(1.0 - loop.plant.settles);
    if (loop.sensor_lag > 0.0) found.push_back(loop.sensor_lag / (loop.sensor_lag + loop.period));
    found.resize(static_cast<std::size_t>(whole.degree()), 0.0);
  } else {
    found = all_roots(whole);
  }
  tidy(found);
  return found;
}

PoleMotion motion_of(Complex pole, double period) {
  if (pole == 0.0) return {HUGE_VAL, 1.0, 0.0};
  const Complex s = std::log(pole) / period;
  const double size = std::abs(s);
  return {size, size > 0.0 ? -s.real() / size : 0.0, -1.0 / s.real()};
}

}  // namespace lw
