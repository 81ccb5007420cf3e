#include "engine/course/spline.h"

#include <cmath>

namespace lw {
namespace {

/// Solves sub[i] v[i-1] + main[i] v[i] + sub[i+1] v[i+1] = right[i], a symmetric tridiagonal system that is
/// diagonally dominant, by elimination without pivoting.
std::vector<Vector> solve(const std::vector<double>& sub, std::vector<double> main,
                          std::vector<Vector> right) {
  const std::size_t n = main.size();
  for (std::size_t i = 1; i < n; ++i) {
    const double f = sub[i] / main[i - 1];
    main[i] -= f * sub[i];
    right[i] = right[i] - f * right[i - 1];
  }
  for (std::size_t i = n; i-- > 0;) {
    if (i + 1 < n) right[i] = right[i] - sub[i + 1] * right[i + 1];
    right[i] = (1.0 / main[i]) * right[i];
  }
  return right;
}

/// The same with `corner` in the two far corners of the matrix: a correction of rank one (Sherman and
/// Morrison 1950).
std::vector<Vector> solve_cyclic(const std::vector<double>& sub, std::vector<double> main,
                                 const std::vector<Vector>& right, double corner) {
  const std::size_t n = main.size();
  const double g = -main[0];
  main[0] -= g;
  main[n - 1] -= corner * corner / g;
  std::vector<Vector> u(n);
  u[0].x = g;
  u[n - 1].x = corner;
  const std::vector<Vector> y = solve(sub, main, right), z = solve(sub, main, u);
  const double below = 1.0 + z[0].x + z[n - 1].x * corner / g;
  const Vector f = (1.0 / below) * (y[0] + (corner / g) * y[n - 1]);
  std::vector<Vector> v(n);
  for (std::size_t i = 0; i < n; ++i) v[i] = y[i] - z[i].x * f;
  return v;
}

/// Second derivatives at the points.
std::vector<Vector> second_derivatives(const std::vector<Vector>& slope, const std::vector<double>& span,
                                       std::size_t points, bool periodic) {
  std::vector<double> sub(points, 0.0), main(points, 1.0);
  std::vector<Vector> right(points);
  const std::size_t spans = span.size();
  for (std::size_t i = periodic ? 0 : 1; i < (periodic ? points : points - 1); ++i) {
    const std::size_t before = (i + spans - 1) % spans;
    sub[i] = span[before];
    main[i] = 2.0 * (span[before] + span[i]);
    right[i] = 6.0 * (slope[i] - slope[before]);
  }
  if (periodic) return solve_cyclic(sub, main, right, span[spans - 1]);
  // Free ends: the second derivative is 0 there and its neighbours need not know it.
  sub[1] = 0.0;
  return solve(sub, main, right);
}

}  // namespace

std::vector<Cubic> spline_through(const std::vector<Vector>& points, bool periodic) {
  const std::size_t n = points.size(), spans = periodic ? n : n - 1;
  std::vector<double> span(spans);
  std::vector<Vector> slope(spans);
  for (std::size_t i = 0; i < spans; ++i) {
    const Vector chord = points[(i + 1) % n] - points[i];
    span[i] = length_of(chord);
    slope[i] = (1.0 / span[i]) * chord;
  }
  const std::vector<Vector> second = second_derivatives(slope, span, n, periodic);
  std::vector<Cubic> cubics(spans);
  for (std::size_t i = 0; i < spans; ++i) {
    const Vector a = second[i], b = second[(i + 1) % n];
    const double h = span[i];
    cubics[i] = {{points[i], slope[i] - (h / 6.0) * (2.0 * a + b), 0.5 * a, (1.0 / (6.0 * h)) * (b - a)}, h};
  }
  return cubics;
}

double length_of(const Cubic& cubic) {
  // Gauss-Legendre with five points over each of sixteen parts.
  constexpr double at[3] = {0.0, 0.538469310105683091036, 0.906179845938663992798};
  constexpr double weight[3] = {0.568888888888888888889, 0.478628670499366468042, 0.236926885056189087514};
  constexpr int parts = 16;
  const double half = 0.5 * cubic.span / parts;
  double sum = 0.0;
  for (int p = 0; p < parts; ++p) {
    const double middle = (2 * p + 1) * half;
    sum += weight[0] * length_of(cubic.first(middle));
    for (const int k : {1, 2})
      sum += weight[k] *
             (length_of(cubic.first(middle - at[k] * half)) + length_of(cubic.first(middle + at[k] * half)));
  }
  return half * sum;
}

}  // namespace lw
