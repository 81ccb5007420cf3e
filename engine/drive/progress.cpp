#include "engine/drive/progress.h"

#include <cmath>

namespace lw {

LineView view_of(const Centreline& line) {
  return {line.nodes.data(), static_cast<int>(line.nodes.size()),
          line.closed,       line.pitch,
          1.0 / line.pitch,  line.length,
          line.window};
}

namespace {

int wrapped(const LineView& line, int number) {
  const int inside = number % line.count;
  return inside < 0 ? inside + line.count : inside;
}

struct Local {
  double u, w;
};
Local local(const Node& node, double x, double y) {
  const double dx = x - node.x, dy = y - node.y;
  return {dx * node.tangent_x + dy * node.tangent_y, dy * node.tangent_x - dx * node.tangent_y};
}

/// Foot on the stretch from node `number` to the next; its start where the point lies behind that.
WindowFoot foot_on_stretch(const LineView& line, int number, double x, double y) {
  const Node& node = line.nodes[line.closed ? wrapped(line, number) : number];
  const Local at = local(node, x, y);
  const double start = number * line.pitch;
  if (at.u < 0.0) return {start, with_sign(square_root(at.u * at.u + at.w * at.w), at.w)};
  const ArcFoot<double> foot = foot_on_arc(at.u, at.w, node.curvature);
  return {start + foot.along, foot.deviation};
}

}  // namespace

WindowFoot search_window(const LineView& line, double around, double x, double y) {
  const int middle = static_cast<int>(whole_below(around * line.nodes_per_m));
  const int span = static_cast<int>(line.window * line.nodes_per_m) + 1;
  int first = middle - span, last = middle + span;
  if (line.closed) {
    last = first + (last - first < line.count ? last - first : line.count - 1);
  } else {
    first = first < 0 ? 0 : first;
    last = last < line.count ? last : line.count - 1;
  }
  int nearest = first;
  double least = HUGE_VAL;
  for (int number = first; number <= last; ++number) {
    const Node& node = line.nodes[line.closed ? wrapped(line, number) : number];
    const double dx = x - node.x, dy = y - node.y, distance = dx * dx + dy * dy;
    if (distance < least) least = distance, nearest = number;
  }
  WindowFoot foot = foot_on_stretch(line, nearest, x, y);
  if (nearest > first) {
    const WindowFoot earlier = foot_on_stretch(line, nearest - 1, x, y);
    const bool within = earlier.place <= nearest * line.pitch;
    if (within && magnitude(earlier.deviation) < magnitude(foot.deviation)) foot = earlier;
  }
  return foot;
}

}  // namespace lw
