// The local reach: how far from the curve a place may lie before it could be nearer to another part of it.
//
// The circle through P touching the curve at Q (normal n, tangent there) has the radius |P - Q|^2 / (2 |n .
// (P - Q)|). The smallest such radius over all P bounds the largest disc that touches the curve at Q and
// holds nothing of it (Federer 1959, Curvature measures, theorem 4.18); its limit for P -> Q is the radius of
// curvature.
#include <algorithm>
#include <cmath>
#include <vector>

#include "engine/course/sampling.h"

namespace lw {
namespace {

constexpr double stride_aim = 4e-3;  // m between the samples that are compared
constexpr double reach_most = 1e3;   // m; what a straight course gets
constexpr double prudence = 0.95;    // for what lies between the samples
constexpr std::size_t around = 2;    // strides on either side of which the least counts

/// Samples at the stride, with the neighbours a window reaches repeated beyond both ends.
struct Samples {
  std::size_t stride = 1, count = 0, reach_back = 0, reach_on = 0;
  std::vector<double> x, y;  // reach_back before, count, reach_on after
};

Samples take_samples(const Centreline& line) {
  Samples t;
  const std::size_t n = line.nodes.size();
  t.stride = std::max<std::size_t>(1, static_cast<std::size_t>(std::rint(stride_aim / line.pitch)));
  t.count = (n + t.stride - 1) / t.stride;
  const double strides = std::ceil(line.window / (line.pitch * static_cast<double>(t.stride)));
  const std::size_t window = static_cast<std::size_t>(std::min(strides, static_cast<double>(t.count)));
  t.reach_back = line.closed ? std::min(window, (t.count - 1) / 2) : 0;
  t.reach_on = t.reach_back;
  for (std::size_t i = t.count - t.reach_back; i < 2 * t.count + t.reach_on; ++i) {
    const Node& node = line.nodes[(i % t.count) * t.stride];
    t.x.push_back(node.x);
    t.y.push_back(node.y);
  }
  if (!line.closed) t.reach_back = t.reach_on = window;
  return t;
}

/// The largest 1/radius of circles through the samples [from, to) that touch the curve at `node`.
double tightest(const Node& node, const Samples& t, std::size_t from, std::size_t to) {
  double most = 0.0;
  for (std::size_t j = from; j < to; ++j) {
    const double dx = t.x[j] - node.x, dy = t.y[j] - node.y;
    const double across = std::fabs(dy * node.tangent_x - dx * node.tangent_y);
    const double q = 2.0 * across / (dx * dx + dy * dy + 1e-30);
    most = q > most ? q : most;
  }
  return most;
}

std::vector<double> reach_of_samples(const Centreline& line, const Samples& t) {
  std::vector<double> reach(t.count);
  for (std::size_t i = 0; i < t.count; ++i) {
    const Node& node = line.nodes[i * t.stride];
    const std::size_t from = line.closed ? i : i - std::min(i, t.reach_back);
    const std::size_t to =
        line.closed ? i + t.reach_back + t.reach_on + 1 : std::min(t.count, i + t.reach_on + 1);
    const double most = std::max(tightest(node, t, from, to), std::fabs(node.curvature));
    reach[i] = most * reach_most > 1.0 ? 1.0 / most : reach_most;
  }
  return reach;
}

}  // namespace

void find_reach(Centreline& line) {
  const Samples t = take_samples(line);
  std::vector<double> reach = reach_of_samples(line, t);
  const auto wrapped = [&](std::size_t i) {  // i counted from `count`, so that it may lie before the start
    if (line.closed) return i % t.count;
    return std::min(std::max(i, t.count), 2 * t.count - 1) - t.count;
  };
  for (const double s : line.corners) {
    const auto at = static_cast<std::size_t>(s / (line.pitch * static_cast<double>(t.stride)));
    for (std::size_t i = t.count + at - around; i <= t.count + at + around + 1; ++i) reach[wrapped(i)] = 0.0;
  }
  for (std::size_t i = 0; i < line.nodes.size(); ++i) {
    const std::size_t at = t.count + i / t.stride;
    double least = reach_most;
    for (std::size_t j = at - around; j <= at + around + 1; ++j) least = std::min(least, reach[wrapped(j)]);
    line.nodes[i].reach = prudence * least;
  }
}

}  // namespace lw
