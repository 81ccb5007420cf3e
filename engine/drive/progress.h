// Progress along the centreline and deviation from it, carried along from one loop period to the next.
//
// The foot of the guide point is followed by steps along the arc held in each node, so the cost is two nodes
// a period. Where a course turns so sharply, or runs so close to itself, that another foot within the
// tracking window could be nearer, the node's reach is smaller than the deviation; only then is the whole
// window searched. A crossing further along is never in the window and does not confuse it.
//
// Behind the start of an open course the deviation is the distance to the start, with the sign of its side;
// beyond its end, where a drive finishes, the last sample runs on. Frame: deviation left positive, m.
#pragma once

#include "engine/course/centreline.h"
#include "engine/numeric/lanes.h"

namespace lw {

/// The centreline as the loop reads it.
struct LineView {
  const Node* nodes;
  int count;
  bool closed;
  double pitch, nodes_per_m, length, window;  // m, 1/m, m, m
};
LineView view_of(const Centreline& line);

/// Where the guide point is along the course.
template <class L>
struct Track {
  L place;      // m of arc length; in [0, length) on a closed course, beyond the ends of an open one
  L laps_done;  // m, whole laps behind it
  L deviation;  // m
};

/// The foot on one node's arc: along from the node, and the deviation, both in m.
template <class L>
struct ArcFoot {
  L along, deviation;
};

/// Foot of a point that lies u along the node's tangent and w to its left, on an arc of curvature k. The
/// deviation is exact, the place along to (k u)^2 / 3 of itself.
template <class L>
inline ArcFoot<L> foot_on_arc(L u, L w, L k) {
  const L toward_centre = 1.0 - k * w;
  const L swept = k * u;
  const L root = square_root(toward_centre * toward_centre + swept * swept);
  return {u / greater(toward_centre, all_lanes<L>(0.05)), (2.0 * w - k * (u * u + w * w)) / (1.0 + root)};
}

namespace detail {
template <class L>
struct NodeLanes {
  L x, y, tangent_x, tangent_y, curvature, reach;
};

template <class L>
inline NodeLanes<L> nodes_at(const LineView& line, L number) {
  const Bits<L> index = index_of(number);
  NodeLanes<L> found;
  for (int i = 0; i < lane_count<L>; ++i) {
    const Node& node = line.nodes[lane(index, i)];
    set_lane(found.x, i, node.x);
    set_lane(found.y, i, node.y);
    set_lane(found.tangent_x, i, node.tangent_x);
    set_lane(found.tangent_y, i, node.tangent_y);
    set_lane(found.curvature, i, node.curvature);
    set_lane(found.reach, i, node.reach);
  }
  return found;
}

/// Brings a place back into [0, length) of a closed course, counting laps.
template <class L>
inline void wrap(const LineView& line, L& place, L& laps_done) {
  const L zero = all_lanes<L>(0.0), lap = all_lanes<L>(line.length);
  const L over = select(place >= line.length, lap, select(place < 0.0, -lap, zero));
  place = place - over;
  laps_done = laps_done + over;
}
}  // namespace detail

/// The nearest foot in the whole window, for one drive.
struct WindowFoot {
  double place;  // m, not wrapped
  double deviation;
};
WindowFoot search_window(const LineView& line, double around, double x, double y);

/// Follows the guide point (m) to its new foot.
template <class L>
inline void follow(const LineView& line, L x, L y, Track<L>& track) {
  const L before = track.place, laps_before = track.laps_done;
  const L last = all_lanes<L>(static_cast<double>(line.count - 1));
  const L zero = all_lanes<L>(0.0);
  L offset = zero, reach = zero, place = before, laps = laps_before;
  for (int pass = 0; pass < 2; ++pass) {
    const L number = held(whole_below(place * line.nodes_per_m), zero, last);
    const detail::NodeLanes<L> node = detail::nodes_at(line, number);
    const L dx = x - node.x, dy = y - node.y;
    const L u = dx * node.tangent_x + dy * node.tangent_y;
    const L w = dy * node.tangent_x - dx * node.tangent_y;
    const ArcFoot<L> foot = foot_on_arc(u, w, node.curvature);
    place = number * line.pitch + foot.along;
    offset = u;
    track.deviation = foot.deviation;
    reach = node.reach;
    if (line.closed) detail::wrap(line, place, laps);
  }
  Mask<L> unsure = (magnitude(track.deviation) >= reach) | (magnitude(offset) > 2.0 * line.pitch);
  if (!line.closed) unsure = unsure | (place < 0.0);
  track.place = place;
  track.laps_done = laps;
  if (any(unsure)) {
    for (int i = 0; i < lane_count<L>; ++i) {
      if (!lane(unsure, i)) continue;
      const WindowFoot found = search_window(line, lane(before, i), lane(x, i), lane(y, i));
      double at = found.place, done = lane(laps_before, i);
      if (line.closed) detail::wrap(line, at, done);
      set_lane(track.place, i, at);
      set_lane(track.laps_done, i, done);
      set_lane(track.deviation, i, found.deviation);
    }
  }
}

}  // namespace lw
