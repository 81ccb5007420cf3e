#include "engine/course/zone.h"

#include <algorithm>
#include <cmath>

#include "engine/course/spot.h"

namespace lw {
namespace {

constexpr double gauss =
    0.288675134594812882255;  // 1 / (2 sqrt(3)): both points from the middle of a cell of side 1

double held_share(double v) { return std::min(std::max(v, 0.0), 1.0); }

}  // namespace

Zone::Zone(const ZoneSettings& settings, std::vector<Walk>& walks, double x, double y, int columns, int rows)
    : side_(settings.pitch / fine) {
  const double radius = settings.spot_radius / side_;
  border_ = static_cast<int>(std::ceil(radius)) + 1;
  x_ = x - border_ * side_;
  y_ = y - border_ * side_;
  columns_ = columns * fine + 2 * border_;
  rows_ = rows * fine + 2 * border_;
  dark_.assign(static_cast<std::size_t>(rows_) * (columns_ + 1), 0.0);
  for (Walk& walk : walks) paint(walk, settings.half_width);
  for (int j = 0; j < rows_; ++j) {
    double* row = &dark_[static_cast<std::size_t>(j) * (columns_ + 1)];
    double sum = 0.0;
    for (int i = 0; i <= columns_; ++i) {
      const double here = row[i];
      row[i] = sum;
      sum += here;
    }
  }
  for (const int k : {0, 1}) {
    const double height = border_ + fine * (0.5 + (k == 0 ? -gauss : gauss));
    area_[k] = 0.0;
    for (int j = 0; j < 2 * border_ + fine; ++j) {
      const double dy = j + 0.5 - height;
      chords_[k].push_back(std::sqrt(std::max(0.0, radius * radius - dy * dy)));
      area_[k] += 2.0 * chords_[k].back();
    }
  }
}

void Zone::paint(Walk& walk, double half_width) {
  const std::vector<Bare>& bare = walk.branch().bare;
  for (int j = 0; j < rows_; ++j) {
    double* row = &dark_[static_cast<std::size_t>(j) * (columns_ + 1)];
    for (int i = 0; i < columns_; ++i) {
      const BranchFoot foot = walk.to(x_ + (i + 0.5) * side_, y_ + (j + 0.5) * side_);
      const double beyond = (foot.distance - half_width) / side_;
      if (beyond > 1.5) {
        i += static_cast<int>(std::min(beyond - 0.5, static_cast<double>(columns_)));
        continue;
      }
      double dark = held_share(0.5 - beyond);
      for (const Bare& gap : bare)
        dark = std::min(dark, held_share(0.5 + std::max(gap.from - foot.s, foot.s - gap.to) / side_));
      row[i] = std::max(row[i], dark);
    }
  }
}

double Zone::dark_share(double x, int first_row, const std::vector<double>& chords) const {
  const auto sum_to = [](const double* row, double at) {
    const int i = static_cast<int>(at);
    return row[i] + (at - i) * (row[i + 1] - row[i]);
  };
  double sum = 0.0;
  for (std::size_t j = 0; j < chords.size(); ++j) {
    if (chords[j] == 0.0) continue;
    const double* row = &dark_[(first_row + j) * (columns_ + 1)];
    sum += sum_to(row, x + chords[j]) - sum_to(row, x - chords[j]);
  }
  return sum;
}

Cell Zone::cell_at(int i, int j) const {
  double f[2][2];
  for (const int b : {0, 1})
    for (const int a : {0, 1}) {
      const double x = border_ + fine * (i + 0.5 + (a == 0 ? -gauss : gauss));
      f[b][a] = 1.0 - dark_share(x, j * fine, chords_[b]) / area_[b];
    }
  const double per_side = 0.5 / gauss;
  return cell_from(0.25 * (f[0][0] + f[0][1] + f[1][0] + f[1][1]),
                   0.5 * per_side * (f[0][1] + f[1][1] - f[0][0] - f[1][0]),
                   0.5 * per_side * (f[1][0] + f[1][1] - f[0][0] - f[0][1]),
                   per_side * per_side * (f[1][1] - f[1][0] - f[0][1] + f[0][0]));
}

}  // namespace lw
