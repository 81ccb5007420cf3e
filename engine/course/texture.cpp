#include "engine/course/texture.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "engine/course/spot.h"
#include "engine/numeric/random.h"

namespace lw {
namespace {

/// Where the autocorrelation of cubic B-splines, the B-spline of order seven, has fallen to 1/e of its peak,
/// in spacings.
constexpr double spacings_per_length = 1.1847;

/// The four cubic B-splines over a place, scaled to a sum of squares of 1; `first` is the lattice index of
/// the first.
struct Weights {
  std::int64_t first;
  double w[4];
};

Weights weights_at(double place) {
  const double whole = std::floor(place), t = place - whole, r = 1.0 - t;
  Weights at{static_cast<std::int64_t>(whole) - 1,
             {r * r * r, 4.0 - 3.0 * t * t * (2.0 - t), 4.0 - 3.0 * r * r * (2.0 - r), t * t * t}};
  double squares = 0.0;
  for (const double w : at.w) squares += w * w;
  const double scale = 1.0 / std::sqrt(squares);
  for (double& w : at.w) w *= scale;
  return at;
}

double lattice_number(std::uint64_t seed, std::int64_t i, std::int64_t j) {
  const auto words =
      draw<double>(seed, static_cast<std::uint64_t>(i), static_cast<std::uint64_t>(j) & 0xffffffffu,
                   static_cast<std::uint32_t>(Purpose::texture));
  return normal_from<double>(words.word[0], words.word[1]).first;
}

constexpr int corners = tile_cells + 1;
using Row = std::array<double, corners>;

/// One lattice row, blended along x to the corners of a tile's cells.
Row blended_row(const Texture& texture, const std::array<Weights, corners>& across, std::int64_t j) {
  const std::int64_t first = across.front().first, last = across.back().first + 3;
  std::vector<double> numbers;
  for (std::int64_t i = first; i <= last; ++i) numbers.push_back(lattice_number(texture.seed, i, j));
  Row row{};
  for (int c = 0; c < corners; ++c)
    for (int k = 0; k < 4; ++k) row[c] += across[c].w[k] * numbers[across[c].first - first + k];
  return row;
}

std::int16_t plus(std::int16_t a, double b) {
  const double sum = std::min(std::max(a + b / cell_unit, -32767.0), 32767.0);
  return static_cast<std::int16_t>(static_cast<int>(sum + 32768.5) - 32768);
}

}  // namespace

Texture texture_of(const FloorLook& look, double spot_radius) {
  const double length = std::max(look.texture_mm * 1e-3, 0.5 * spot_radius);
  return {look.texture_pct * 0.01, length / spacings_per_length, static_cast<std::uint64_t>(look.seed)};
}

void add_texture(const Texture& texture, double x, double y, double pitch, Cell* tile) {
  std::array<Weights, corners> across, up;
  for (int c = 0; c < corners; ++c) {
    across[c] = weights_at((x + c * pitch) / texture.spacing);
    up[c] = weights_at((y + c * pitch) / texture.spacing);
  }
  const std::int64_t first = up.front().first;
  std::vector<Row> rows;
  for (std::int64_t j = first; j <= up.back().first + 3; ++j) rows.push_back(blended_row(texture, across, j));
  Row below{};
  for (int c = 0; c < corners; ++c) {
    Row here{};
    for (int k = 0; k < 4; ++k)
      for (int i = 0; i < corners; ++i)
        here[i] += texture.amount * up[c].w[k] * rows[up[c].first - first + k][i];
    for (int i = 0; c > 0 && i < tile_cells; ++i) {
      const double p = below[i], q = below[i + 1], r = here[i], s = here[i + 1];
      Cell& cell = tile[(c - 1) * tile_cells + i];
      cell = {plus(cell.c0, 0.25 * (p + q + r + s)), plus(cell.c1, 0.5 * (q + s - p - r)),
              plus(cell.c2, 0.5 * (r + s - p - q)), plus(cell.c3, p - q - r + s)};
    }
    below = here;
  }
}

}  // namespace lw
