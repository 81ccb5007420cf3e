#include "engine/course/spot.h"

#include <algorithm>
#include <cmath>

#include "engine/course/angles.h"

namespace lw {
namespace {

constexpr int steps_per_pitch = 64;

/// Share of a disc of radius 1 on the low side of a line at x.
double segment_share(double x) {
  if (x <= -1.0) return 0.0;
  if (x >= 1.0) return 1.0;
  return (pi - arccosine(x) + x * std::sqrt(1.0 - x * x)) / pi;
}

/// Half the chord at x, over the radius; 0 outside the disc.
double half_chord(double x) { return std::sqrt(std::max(0.0, 1.0 - x * x)); }

std::int16_t fixed_from(double value) {
  const double scaled = std::min(std::max(value / cell_unit, -32767.0), 32767.0);
  return static_cast<std::int16_t>(static_cast<int>(scaled + 32768.5) - 32768);
}

}  // namespace

double strip_share_of_disc(double distance, double half_width, double radius) {
  return segment_share((half_width - distance) / radius) - segment_share((-half_width - distance) / radius);
}

Cell cell_from(double c0, double c1, double c2, double c3) {
  return {fixed_from(c0), fixed_from(c1), fixed_from(c2), fixed_from(c3)};
}

SpotTable::SpotTable(double spot_radius, double half_width, double pitch)
    : radius_(spot_radius),
      half_width_(half_width),
      pitch_(pitch),
      low_(-spot_radius - pitch),
      per_step_(steps_per_pitch / pitch) {
  const double r = spot_radius, area = pi * r * r;
  // Gauss-Legendre with four points over the cell: exact for polynomials of degree 7.
  constexpr double at[4] = {-0.430568155797026287612, -0.169990521792428132401, 0.169990521792428132401,
                            0.430568155797026287612};
  constexpr double weight[4] = {0.173927422568726928687, 0.326072577431273071313, 0.326072577431273071313,
                                0.173927422568726928687};
  const auto steps = static_cast<int>(std::ceil(-2.0 * low_ * per_step_));
  for (int i = 0; i <= steps + 1; ++i) {
    const double x = low_ + i / per_step_;
    Entry entry{};
    for (int g = 0; g < 4; ++g) {
      const double xg = (x + at[g] * pitch) / r, share = segment_share(xg), c = r * half_chord(xg);
      const double lens = c * c * c / (3.0 * area);
      entry.share += weight[g] * share;
      entry.slope += weight[g] * 12.0 * at[g] / pitch * share;
      entry.lens += weight[g] * lens;
      entry.lens_slope += weight[g] * 12.0 * at[g] / pitch * lens;
    }
    const double rise = half_chord((x + 0.5 * pitch) / r) - half_chord((x - 0.5 * pitch) / r);
    entry.second = 2.0 * r * rise / (area * pitch);
    table_.push_back(entry);
  }
  last_ = steps;
}

inline SpotTable::Edge SpotTable::edge_at(double x, double curvature) const {
  const double place = (x - low_) * per_step_;
  if (place <= 0.0) return {0.0, 0.0, 0.0};
  if (place >= last_) return {1.0, 0.0, 0.0};
  const int i = static_cast<int>(place);
  const double b = place - i, a = 1.0 - b;
  const Entry& e = table_[i];
  const Entry& f = table_[i + 1];
  Edge edge{a * e.share + b * f.share, a * e.slope + b * f.slope, a * e.second + b * f.second};
  if (curvature != 0.0) {
    edge.share += curvature * (a * e.lens + b * f.lens);
    edge.slope += curvature * (a * e.lens_slope + b * f.lens_slope);
  }
  return edge;
}

Cell SpotTable::cell_at(const SpotPlace& place) const {
  const double k = place.curvature, d = place.deviation, p = pitch_;
  double left_curvature = 0.0, right_curvature = 0.0, bow = 0.0;
  if (k != 0.0) {
    left_curvature = k / (1.0 - k * half_width_);
    right_curvature = k / (1.0 + k * half_width_);
    bow = k / (1.0 - k * d);
  }
  const Edge left = edge_at(half_width_ - d, left_curvature);
  const Edge right = edge_at(-half_width_ - d, right_curvature);
  // Brightness as a function of deviation: value, slope, second derivative.
  const double value = 1.0 - (left.share - right.share);
  const double slope = left.slope - right.slope;
  const double second = right.second - left.second;
  // Deviation over the plane: gradient the normal, second derivatives -bow along the tangent.
  const double tx = place.tangent_x, ty = place.tangent_y;
  return cell_from(value - slope * bow * p * p / 24.0, -slope * ty * p, slope * tx * p,
                   (-second * tx * ty - slope * bow * tx * ty) * p * p);
}

}  // namespace lw
