#include "web/view/course_gaps.h"

#include <algorithm>
#include <cmath>

#include "engine/scenario/fields.h"
#include "web/view/course_pieces.h"
#include "web/view/tidy.h"

namespace lw::view {
namespace {

constexpr double tracking_window = 0.1;  // m; of no account for lengths

Error no_gap(std::size_t index) {
  return {"course.gaps_mm[" + std::to_string(index) + "]", "", "there is no such gap"};
}

/// In order, touching ones joined, slivers dropped.
std::vector<Stretch> put_in_order(std::vector<Stretch> gaps) {
  std::sort(gaps.begin(), gaps.end(), [](Stretch a, Stretch b) { return a.from_mm < b.from_mm; });
  std::vector<Stretch> out;
  for (const Stretch& gap : gaps) {
    if (gap.to_mm - gap.from_mm < shortest_gap_mm) continue;
    if (!out.empty() && gap.from_mm <= out.back().to_mm) {
      out.back().to_mm = std::max(out.back().to_mm, gap.to_mm);
    } else {
      out.push_back(gap);
    }
  }
  return out;
}

/// Adds from..to, in two when it runs through the start of a closed line.
void add_wrapped(std::vector<Stretch>& gaps, double from, double to, double length) {
  if (from <= to) {
    gaps.push_back({from, to});
  } else {
    gaps.push_back({from, length});
    gaps.push_back({0.0, to});
  }
}

double moved_to(const std::vector<Moved>& moved, double s) {
  std::size_t i = 1;
  while (i + 1 < moved.size() && moved[i].before < s) ++i;
  const Moved a = moved[i - 1], b = moved[i];
  const double span = b.before - a.before;
  const double share = span > 0 ? std::clamp((s - a.before) / span, 0.0, 1.0) : 0.0;
  return a.after + share * (b.after - a.after);
}

/// Walks the line once: each drawn point lies on it, in order, within half a pitch of some node.
std::vector<double> marks_of_points(const Course& course, const Centreline& line) {
  std::vector<double> marks;
  const double near = 0.6 * line.pitch;
  std::size_t at = 0;
  const auto distance = [&](std::size_t node, Point p) {
    return std::hypot(line.nodes[node].x - 1e-3 * p.x_mm, line.nodes[node].y - 1e-3 * p.y_mm);
  };
  for (const Point& p : course.points_mm) {
    while (at < line.nodes.size() && distance(at, p) > near) ++at;
    if (at == line.nodes.size()) return {};
    while (at + 1 < line.nodes.size() && distance(at + 1, p) < distance(at, p)) ++at;
    marks.push_back(1e3 * line.pitch * static_cast<double>(at));
  }
  return marks;
}

}  // namespace

Result<Scenario> with_gap(const Scenario& scenario, double from_mm, double to_mm, double length_mm) {
  if (!scenario.course.closed && from_mm > to_mm) std::swap(from_mm, to_mm);
  const double from = tidy(std::clamp(from_mm, 0.0, length_mm), 1.0);
  const double to = std::min(tidy(std::clamp(to_mm, 0.0, length_mm), 1.0), length_mm);
  Scenario out = scenario;
  add_wrapped(out.course.gaps_mm, std::min(from, length_mm), to, length_mm);
  out.course.gaps_mm = put_in_order(std::move(out.course.gaps_mm));
  const auto& gaps = out.course.gaps_mm;
  if (gaps.size() > most_gaps) return Error{"course.gaps_mm", "", "the course has too many gaps already"};
  double bare = 0;
  for (const Stretch& gap : gaps) bare += gap.to_mm - gap.from_mm;
  if (bare > length_mm - shortest_gap_mm)
    return Error{"course.gaps_mm", "", "a gap as long as the course leaves no line"};
  const double drawn = from <= to ? to - from : length_mm - from + to;
  if (drawn < shortest_gap_mm) return Error{"course.gaps_mm", "", "drag along the line to make a gap"};
  return out;
}

Result<Scenario> with_gap_removed(const Scenario& scenario, std::size_t index) {
  if (index >= scenario.course.gaps_mm.size()) return no_gap(index);
  Scenario out = scenario;
  out.course.gaps_mm.erase(out.course.gaps_mm.begin() + static_cast<std::ptrdiff_t>(index));
  return out;
}

Result<Scenario> with_gap_end(const Scenario& scenario, std::size_t index, bool far_end, double to_mm,
                              double length_mm) {
  if (index >= scenario.course.gaps_mm.size()) return no_gap(index);
  Scenario out = scenario;
  Stretch& gap = out.course.gaps_mm[index];
  double low = far_end ? gap.from_mm + shortest_gap_mm : 0.0;
  double high = far_end ? length_mm : gap.to_mm - shortest_gap_mm;
  for (const Stretch& other : scenario.course.gaps_mm) {
    if (far_end && other.from_mm >= gap.to_mm) high = std::min(high, other.from_mm);
    if (!far_end && other.to_mm <= gap.from_mm) low = std::max(low, other.to_mm);
  }
  (far_end ? gap.to_mm : gap.from_mm) = std::max(low, std::min(tidy(to_mm, 1.0), high));
  return out;
}

int gap_at(const Course& course, double s_mm, double slack_mm) {
  for (std::size_t i = 0; i < course.gaps_mm.size(); ++i) {
    const Stretch& gap = course.gaps_mm[i];
    if (s_mm >= gap.from_mm - slack_mm && s_mm <= gap.to_mm + slack_mm) return static_cast<int>(i);
  }
  return -1;
}

std::vector<double> marks_of(const Course& course, const Centreline& line) {
  if (line.nodes.empty()) return {};
  if (course.pieces.empty()) return marks_of_points(course, line);
  std::vector<double> marks;
  for (const Joint& joint : joints_of(course)) marks.push_back(joint.s_mm);
  marks.pop_back();
  return marks;
}

std::vector<Stretch> carry_gaps(const std::vector<Stretch>& gaps, const std::vector<Moved>& moved) {
  if (moved.size() < 2) return gaps;
  std::vector<Stretch> out;
  for (const Stretch& gap : gaps) {
    const Stretch now{tidy(moved_to(moved, gap.from_mm), 0.1), tidy(moved_to(moved, gap.to_mm), 0.1)};
    const double end = moved.back().after;
    out.push_back({std::max(now.from_mm, 0.0), std::min(now.to_mm, end)});
  }
  return put_in_order(std::move(out));
}

void carry_point_gaps(Course& after, const Course& before, const std::vector<int>& index_after) {
  if (before.gaps_mm.empty()) return;
  const auto bare = [](Course course) {
    course.gaps_mm.clear();
    return make_centreline(course, tracking_window);
  };
  const Result<Centreline> then = bare(before), now = bare(after);
  if (!then || !now) return;
  const std::vector<double> marks_then = marks_of(before, *then), marks_now = marks_of(after, *now);
  std::vector<Moved> moved;
  for (std::size_t i = 0; i < marks_then.size(); ++i) {
    const int to = index_after.empty() ? static_cast<int>(i) : index_after[i];
    if (to >= 0 && static_cast<std::size_t>(to) < marks_now.size())
      moved.push_back({marks_then[i], marks_now[static_cast<std::size_t>(to)]});
  }
  // The first or last point may be new or gone; the ends of the line still correspond.
  if (moved.empty() || moved.front().before > 0.0) moved.insert(moved.begin(), {0.0, 0.0});
  const double length_then = 1e3 * then->length, length_now = 1e3 * now->length;
  if (before.closed == after.closed && moved.back().before < length_then)
    moved.push_back({length_then, std::max(length_now, moved.back().after)});
  after.gaps_mm = carry_gaps(before.gaps_mm, moved);
}

std::vector<Stretch> turn_gaps(const std::vector<Stretch>& gaps, double by_mm, double length_mm) {
  std::vector<Stretch> out;
  for (const Stretch& gap : gaps) {
    const auto wrapped = [&](double s) {
      s -= by_mm;
      s -= length_mm * std::floor(s / length_mm);
      return std::min(tidy(s, 0.1), length_mm);
    };
    const double from = wrapped(gap.from_mm), to = wrapped(gap.to_mm);
    add_wrapped(out, from, to, length_mm);
  }
  return put_in_order(std::move(out));
}

}  // namespace lw::view
