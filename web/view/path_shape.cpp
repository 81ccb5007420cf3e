#include "web/view/path_shape.h"

#include <algorithm>
#include <cmath>

namespace lw::view {
namespace {

float distance(Pixel a, Pixel b) { return std::hypot(a.x - b.x, a.y - b.y); }

Pixel place(const Path& path, const View& view, std::size_t row) {
  return to_screen(view, path.x[row], path.y[row]);
}

}  // namespace

Path path_of(const Trace& trace, double forward_mm) {
  Path path;
  for (auto* column : {&path.x, &path.y, &path.deviation}) column->reserve(trace.rows.size());
  for (const TraceRow& row : trace.rows) {
    path.x.push_back(static_cast<float>(1e3 * row.x + forward_mm * std::cos(row.heading)));
    path.y.push_back(static_cast<float>(1e3 * row.y + forward_mm * std::sin(row.heading)));
    path.deviation.push_back(static_cast<float>(1e3 * std::fabs(row.deviation)));
  }
  return path;
}

std::vector<std::size_t> thinned(const Path& path, const View& view, float apart_px, std::size_t most) {
  std::vector<std::size_t> rows;
  if (path.x.empty()) return rows;
  double length = 0;
  for (std::size_t i = 1; i < path.x.size(); ++i)
    length += view.scale * std::hypot(path.x[i] - path.x[i - 1], path.y[i] - path.y[i - 1]);
  const float apart = std::max(apart_px, static_cast<float>(length / static_cast<double>(most)));
  Pixel last = place(path, view, 0);
  rows.push_back(0);
  for (std::size_t i = 1; i + 1 < path.x.size(); ++i) {
    const Pixel now = place(path, view, i);
    if (distance(now, last) < apart) continue;
    rows.push_back(i);
    last = now;
  }
  if (path.x.size() > 1) rows.push_back(path.x.size() - 1);
  return rows;
}

NearRow nearest_row(const Path& path, const View& view, Pixel p, std::size_t favoured, float slack_px) {
  NearRow nearest;
  for (std::size_t i = 0; i < path.x.size(); ++i) {
    const float d = distance(place(path, view, i), p);
    if (d < nearest.distance) nearest = {i, d};
  }
  const auto steps = [&](std::size_t row) { return row > favoured ? row - favoured : favoured - row; };
  NearRow chosen = nearest, pass;  // the best of the pass by the pointer that is being walked
  for (std::size_t i = 0; i <= path.x.size(); ++i) {
    const float d = i < path.x.size() ? distance(place(path, view, i), p) : 1e30f;
    if (d <= nearest.distance + slack_px) {
      if (d < pass.distance) pass = {i, d};
    } else if (pass.distance < 1e30f) {
      if (steps(pass.row) < steps(chosen.row)) chosen = pass;
      pass = {};
    }
  }
  return chosen;
}

double share_of_scale(double deviation_mm, double far_mm) {
  if (!(far_mm > 0.0)) return 0.0;
  return std::sqrt(std::clamp(deviation_mm / far_mm, 0.0, 1.0));
}

}  // namespace lw::view
