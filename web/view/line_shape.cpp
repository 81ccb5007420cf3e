#include "web/view/line_shape.h"

#include <algorithm>
#include <cmath>
#include <cstdio>

namespace lw::view {
namespace {

CoursePoint point_of(const Node& node) {
  return {node.x, node.y, node.tangent_x, node.tangent_y, node.curvature};
}

/// The course just behind a corner at `s`: the place is the same, the direction that of the next sample.
CoursePoint behind_corner(const Centreline& line, double s) {
  CoursePoint p = point_at(line, s);
  const auto next = static_cast<std::size_t>(std::floor(s / line.pitch)) + 1;
  const Node& node = line.nodes[next < line.nodes.size() ? next : line.closed ? 0 : line.nodes.size() - 1];
  p.tangent_x = node.tangent_x, p.tangent_y = node.tangent_y, p.curvature = node.curvature;
  return p;
}

bool corner_at(const Centreline& line, double s) {
  return std::any_of(line.corners.begin(), line.corners.end(),
                     [&](double corner) { return std::fabs(corner - s) < 0.5 * line.pitch; });
}

/// From `from` to `to` with no corner strictly in between.
void add_smooth(const Centreline& line, double from, double to, double tolerance, Strip& strip) {
  strip.push_back(corner_at(line, from) ? behind_corner(line, from) : point_at(line, from));
  const auto first = static_cast<std::size_t>(std::floor(from / line.pitch)) + 1;
  const double end = std::min(std::floor(to / line.pitch - 1e-6), static_cast<double>(line.nodes.size()) - 1);
  double turn = 0, chord = 0;
  for (std::size_t i = first; static_cast<double>(i) <= end; ++i) {
    const double next_turn = turn + std::fabs(line.nodes[i].curvature) * line.pitch;
    const double next_chord = chord + line.pitch;
    if (next_turn * next_chord > 8.0 * tolerance) {
      strip.push_back(point_of(line.nodes[i]));
      turn = chord = 0;
    } else {
      turn = next_turn, chord = next_chord;
    }
  }
  strip.push_back(point_at(line, std::min(to, line.length) - 1e-9));
}

/// Where [from, to] is cut: its ends and the corners inside.
std::vector<double> cuts_of(const Centreline& line, double from, double to) {
  std::vector<double> cuts{from};
  for (const double corner : line.corners)
    if (corner > from + line.pitch && corner < to - line.pitch) cuts.push_back(corner);
  cuts.push_back(to);
  return cuts;
}

}  // namespace

LineShape shape_of(const Centreline& line, double tolerance) {
  LineShape shape;
  if (line.nodes.empty()) return shape;
  const auto lay = [&](double from, double to) {
    if (to - from < 1e-6) return;
    const std::vector<double> cuts = cuts_of(line, from, to);
    for (std::size_t i = 0; i + 1 < cuts.size(); ++i) {
      shape.strips.emplace_back();
      add_smooth(line, cuts[i], cuts[i + 1], tolerance, shape.strips.back());
    }
  };
  double from = 0.0;
  for (const Stretch& gap : line.gaps_mm) {
    lay(from, 1e-3 * gap.from_mm);
    from = 1e-3 * gap.to_mm;
  }
  lay(from, line.length);
  for (const double corner : line.corners) {
    const bool bare = std::any_of(line.gaps_mm.begin(), line.gaps_mm.end(), [&](const Stretch& gap) {
      return 1e3 * corner > gap.from_mm && 1e3 * corner < gap.to_mm;
    });
    if (bare) continue;
    shape.corners.push_back(point_at(line, corner));
  }
  return shape;
}

Strip strip_between(const Centreline& line, double from, double to, double tolerance) {
  Strip strip;
  if (line.nodes.empty() || to <= from) return strip;
  const std::vector<double> cuts = cuts_of(line, from, to);
  for (std::size_t i = 0; i + 1 < cuts.size(); ++i) add_smooth(line, cuts[i], cuts[i + 1], tolerance, strip);
  return strip;
}

double round_step(double at_least) {
  double step = std::pow(10.0, std::floor(std::log10(at_least)));
  for (const double factor : {2.0, 2.5, 2.0}) {
    if (step >= at_least * (1.0 - 1e-9)) break;
    step *= factor;
  }
  return step;
}

std::string length_text(double mm) {
  char text[32];
  const bool far = mm >= 1e6, metres = mm >= 1e3, centimetres = mm >= 100.0;
  const double unit = far ? 1e6 : metres ? 1e3 : centimetres ? 10.0 : 1.0;
  std::snprintf(text, sizeof text, "%.4g %s", mm / unit,
                far           ? "km"
                : metres      ? "m"
                : centimetres ? "cm"
                              : "mm");
  return text;
}

}  // namespace lw::view
