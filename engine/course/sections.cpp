// A course of gradual curvature told in sections.
//
// A bend is a run of one side in which the curvature stays above a fifth of that run's greatest; its radius
// is that of the curvature averaged with itself as weight, so that long easy ends do not hide the tight
// middle. All else is straight.
#include <algorithm>
#include <cmath>
#include <limits>

#include "engine/course/sampling.h"

namespace lw {
namespace {

constexpr double straight_curvature = 0.2;        // 1/m; a radius of 5 m passes for straight
constexpr double bend_share = 0.2;                // of the greatest curvature of the run
constexpr double turn_least = 5.0 * rad_per_deg;  // a bend of less is a waver of a straight
constexpr double straight_least = 0.03;           // m; less between bends of one side is part of them

int side_of(double curvature) { return curvature > 0.0 ? 1 : curvature < 0.0 ? -1 : 0; }

struct Stint {
  int side;
  std::size_t from, to;  // samples [from, to)
};

double turn_of(const Centreline& line, const Stint& stint) {
  double sum = 0.0;
  for (std::size_t i = stint.from; i < stint.to; ++i) sum += line.nodes[i].curvature * line.pitch;
  return sum;
}

std::vector<Stint> joined(const std::vector<Stint>& stints) {
  std::vector<Stint> result;
  for (const Stint& stint : stints) {
    if (!result.empty() && result.back().side == stint.side)
      result.back().to = stint.to;
    else
      result.push_back(stint);
  }
  return result;
}

/// Samples [from, to), free of corners, by side.
std::vector<Stint> stints_between(const Centreline& line, std::size_t from, std::size_t to) {
  std::vector<Stint> stints;
  for (std::size_t i = from; i < to;) {
    const int side = side_of(line.nodes[i].curvature);
    std::size_t end = i;
    double most = 0.0;
    for (; end < to && side_of(line.nodes[end].curvature) == side; ++end)
      most = std::max(most, std::fabs(line.nodes[end].curvature));
    const double least = std::max(straight_curvature, bend_share * most);
    for (; i < end; ++i) stints.push_back({std::fabs(line.nodes[i].curvature) >= least ? side : 0, i, i + 1});
  }
  stints = joined(stints);
  for (Stint& stint : stints)
    if (std::fabs(turn_of(line, stint)) < turn_least) stint.side = 0;
  stints = joined(stints);
  for (std::size_t i = 1; i + 1 < stints.size(); ++i) {
    const bool brief = static_cast<double>(stints[i].to - stints[i].from) * line.pitch < straight_least;
    if (stints[i].side == 0 && brief && stints[i - 1].side == stints[i + 1].side)
      stints[i].side = stints[i - 1].side;
  }
  return joined(stints);
}

CourseSection section_of(const Centreline& line, const Stint& stint) {
  CourseSection section;
  section.from = static_cast<double>(stint.from) * line.pitch;
  section.to = std::min(static_cast<double>(stint.to) * line.pitch, line.length);
  section.turn = turn_of(line, stint);
  section.radius = std::numeric_limits<double>::infinity();
  if (stint.side == 0) return section;
  double sum = 0.0, squares = 0.0;
  for (std::size_t i = stint.from; i < stint.to; ++i) {
    sum += std::fabs(line.nodes[i].curvature);
    squares += line.nodes[i].curvature * line.nodes[i].curvature;
  }
  section.radius = sum / squares;
  return section;
}

}  // namespace

std::vector<CourseSection> sections_of(const Centreline& line) {
  const std::size_t n = line.nodes.size();
  std::vector<CourseSection> sections;
  std::size_t from = 0;
  const auto add_until = [&](std::size_t to, double s) {
    const std::size_t before = sections.size();
    for (const Stint& stint : stints_between(line, from, to)) sections.push_back(section_of(line, stint));
    if (sections.size() > before) sections.back().to = s;
    from = to;
  };
  const std::size_t end = line.closed ? n : n - 1;  // the last sample of an open course begins nothing
  for (const double corner : line.corners) {
    const std::size_t after = std::min(static_cast<std::size_t>(std::ceil(corner / line.pitch)), end);
    add_until(after, corner);
    const Node& a = line.nodes[(after + n - 1) % n];
    const Node& b = line.nodes[after % n];
    const double turn = angle_between({a.tangent_x, a.tangent_y}, {b.tangent_x, b.tangent_y});
    sections.push_back({corner, corner, 0.0, turn});
  }
  add_until(end, line.length);
  for (std::size_t i = 1; i < sections.size(); ++i) sections[i].from = sections[i - 1].to;
  return sections;
}

}  // namespace lw
