#include "web/view/path_shape.h"

#include <algorithm>
#include <cmath>

namespace lw::view {
namespace {

float distance(Pixel a, Pixel b) { return std::hypot(a.x - b.x, a.y - b.y); }

Pixel place(const Path& path, const View& view, std::size_t row) {
  return to_screen(view, path.x[row], path.y[row]);
}

constexpr std::size_t longest_stretch = 24;  // places; the search stays quick, and bends stay round

/// How far p lies from the stretch a to b, and at which share of it.
struct Foot {
  float distance, share;
};
Foot foot_on(Pixel a, Pixel b, Pixel p) {
  const float dx = b.x - a.x, dy = b.y - a.y, square = dx * dx + dy * dy;
  const float along = square > 0.0f ? ((p.x - a.x) * dx + (p.y - a.y) * dy) / square : 0.0f;
  const float share = std::clamp(along, 0.0f, 1.0f);
  return {distance(p, {a.x + share * dx, a.y + share * dy}), share};
}

bool is_between(ImU32 a, ImU32 b, float share, ImU32 colour, int off_shade) {
  for (int shift = 0; shift < 32; shift += 8) {
    const auto part = [&](ImU32 c) { return static_cast<float>((c >> shift) & 255u); };
    const float mixed = part(a) + share * (part(b) - part(a));
    if (std::abs(mixed - part(colour)) > static_cast<float>(off_shade)) return false;
  }
  return true;
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

std::vector<std::size_t> sufficing(std::span<const Pixel> points, std::span<const ImU32> colours,
                                   float off_px, int off_shade) {
  std::vector<std::size_t> chosen;
  if (points.empty()) return chosen;
  chosen.push_back(0);
  const auto stands_for = [&](std::size_t a, std::size_t b) {
    for (std::size_t i = a + 1; i < b; ++i) {
      const Foot foot = foot_on(points[a], points[b], points[i]);
      if (foot.distance > off_px) return false;
      if (!is_between(colours[a], colours[b], foot.share, colours[i], off_shade)) return false;
    }
    return true;
  };
  for (std::size_t i = 2; i < points.size(); ++i) {
    const std::size_t from = chosen.back();
    if (i - from > longest_stretch || !stands_for(from, i)) chosen.push_back(i - 1);
  }
  if (points.size() > 1) chosen.push_back(points.size() - 1);
  return chosen;
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
