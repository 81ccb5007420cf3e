// The scale of deviation colours as eyes with other cones see it.
//
// Simulated with the matrices for full protanopia and deuteranopia of Machado, Oliveira and Fernandes (2009,
// A physiologically-based model for simulation of color vision deficiency; values from memory), on linear
// sRGB. Distances are those of CIE 1976 L*a*b* (white D65), in which about 2.3 can just be told apart (Mahy
// and others 1994, from memory).
#include <array>
#include <cmath>

#include "tests/catch.h"
#include "web/panel/theme.h"

namespace {

using Triple = std::array<double, 3>;
using Matrix = std::array<Triple, 3>;

constexpr Matrix usual = {{{1, 0, 0}, {0, 1, 0}, {0, 0, 1}}};
constexpr Matrix protan = {
    {{0.152286, 1.052583, -0.204868}, {0.114503, 0.786281, 0.099216}, {-0.003882, -0.048116, 1.051998}}};
constexpr Matrix deutan = {
    {{0.367322, 0.860646, -0.227968}, {0.280085, 0.672501, 0.047413}, {-0.011820, 0.042940, 0.968881}}};

Triple times(const Matrix& m, const Triple& v) {
  Triple out{};
  for (std::size_t i = 0; i < 3; ++i) out[i] = m[i][0] * v[0] + m[i][1] * v[1] + m[i][2] * v[2];
  return out;
}

/// IEC 61966-2-1.
Triple linear(ImU32 colour) {
  Triple out{};
  for (std::size_t i = 0; i < 3; ++i) {
    const double c = ((colour >> (8 * i)) & 255u) / 255.0;
    out[i] = c <= 0.04045 ? c / 12.92 : std::pow((c + 0.055) / 1.055, 2.4);
  }
  return out;
}

Triple lab(Triple rgb) {
  for (double& c : rgb) c = std::min(std::max(c, 0.0), 1.0);
  const Matrix to_xyz = {{{0.4124, 0.3576, 0.1805}, {0.2126, 0.7152, 0.0722}, {0.0193, 0.1192, 0.9505}}};
  const Triple xyz = times(to_xyz, rgb), white{0.9505, 1.0, 1.089};
  Triple f{};
  for (std::size_t i = 0; i < 3; ++i) {
    const double t = xyz[i] / white[i];
    f[i] = t > 0.008856 ? std::cbrt(t) : 7.787 * t + 16.0 / 116.0;
  }
  return {116 * f[1] - 16, 500 * (f[0] - f[1]), 200 * (f[1] - f[2])};
}

double apart(const Triple& a, const Triple& b) {
  return std::sqrt(std::pow(a[0] - b[0], 2) + std::pow(a[1] - b[1], 2) + std::pow(a[2] - b[2], 2));
}

/// Relative luminance contrast, WCAG 2.1.
double contrast(ImU32 a, ImU32 b) {
  const auto luminance = [](ImU32 c) {
    const Triple l = linear(c);
    return 0.2126 * l[0] + 0.7152 * l[1] + 0.0722 * l[2] + 0.05;
  };
  return std::max(luminance(a), luminance(b)) / std::min(luminance(a), luminance(b));
}

}  // namespace

TEST_CASE("the colours of deviation can be told apart with and without red or green cones") {
  for (const bool dark : {true, false}) {
    for (const Matrix& eye : {usual, protan, deutan}) {
      for (int i = 0; i < 5; ++i) {
        for (int j = i + 1; j < 5; ++j) {
          const Triple a = lab(times(eye, linear(lw::panel::deviation_colour(dark, i / 4.0))));
          const Triple b = lab(times(eye, linear(lw::panel::deviation_colour(dark, j / 4.0))));
          CHECK(apart(a, b) > (j - i > 1 ? 30.0 : 19.0));
        }
      }
    }
  }
}

TEST_CASE("the path stands out from the floor, most where the drive is worst") {
  for (const bool dark : {true, false}) {
    const ImU32 bare = lw::panel::theme(dark).bare;
    for (int i = 0; i < 5; ++i) CHECK(contrast(lw::panel::deviation_colour(dark, i / 4.0), bare) > 2.0);
    CHECK(contrast(lw::panel::deviation_colour(dark, 1.0), bare) > 3.0);
  }
}
