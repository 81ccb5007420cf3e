#include "engine/course/branch.h"

#include <algorithm>
#include <cmath>

#include "engine/course/angles.h"
#include "engine/course/sampling.h"

namespace lw {
namespace {

constexpr double far_away = 1e9;  // m, beyond any course

/// Gaps of the course, and what lies beyond its open ends, as far as they touch [from, to].
std::vector<Bare> bare_stretches(const Centreline& line, double from, double to) {
  std::vector<Bare> bare;
  const auto add = [&](double a, double b) {
    if (b > from && a < to) bare.push_back({a, b});
  };
  for (const Stretch& gap : line.gaps_mm) {
    add(gap.from_mm * 1e-3, gap.to_mm * 1e-3);
    if (line.closed) add(gap.from_mm * 1e-3 + line.length, gap.to_mm * 1e-3 + line.length);
  }
  if (!line.closed) {
    add(-far_away, 0.0);
    add(line.length, far_away);
  }
  return bare;
}

/// The corner between samples `i` and `i + 1`, in arc length that goes on past the seam; negative if there is
/// none.
double corner_after(const Centreline& line, std::size_t i) {
  const std::size_t n = line.nodes.size();
  const double lap = static_cast<double>(i / n) * line.length;
  for (const double s : line.corners) {
    // A corner on a sample belongs before it; one at the start of a closed course belongs to its end.
    const double before = std::ceil(s / line.pitch - on_sample) - 1.0;
    const double index = static_cast<double>(i % n);
    if (before == index) return lap + s;
    if (before < 0.0 && i % n == n - 1) return lap + line.length;
  }
  return -1.0;
}

}  // namespace

void add_branches(const Centreline& line, std::size_t first, std::size_t last,
                  std::vector<Branch>& branches) {
  const std::size_t n = line.nodes.size();
  const auto s_of = [&](std::size_t i) { return static_cast<double>(i) * line.pitch; };
  Branch branch;
  const auto open_at = [&](std::size_t i, double from) {
    branch = {};
    branch.first = static_cast<int>(i);
    branch.from = from;
  };
  const auto close_at = [&](std::size_t i, double to) {
    branch.last = static_cast<int>(i);
    branch.to = to;
    branch.bare = bare_stretches(line, branch.from, branch.to);
    branches.push_back(branch);
  };
  open_at(first, !line.closed && first == 0 ? -far_away : s_of(first));
  double turn = 0.0;
  for (std::size_t i = first; i < last; ++i) {
    const double corner = line.corners.empty() ? -1.0 : corner_after(line, i);
    turn += line.nodes[i % n].curvature * line.pitch;
    if (corner >= 0.0) {
      close_at(i, corner);
      open_at(i + 1, corner);
      turn = 0.0;
    } else if (std::fabs(turn) > half_pi) {
      close_at(i + 1, s_of(i + 1));
      open_at(i + 1, s_of(i + 1));
      turn = 0.0;
    }
  }
  close_at(last, !line.closed && last + 1 == n ? far_away : s_of(last));
}

Walk::Walk(const Centreline& line, const Branch& branch)
    : nodes_(line.nodes.data()),
      count_(static_cast<int>(line.nodes.size())),
      branch_(&branch),
      pitch_(line.pitch),
      per_pitch_(1.0 / line.pitch),
      at_((branch.first + branch.last) / 2) {}

BranchFoot Walk::held_at(const Node& node, double s_node, double s, double x, double y) const {
  const double along = s - s_node;
  const double dx = x - node.x - along * node.tangent_x, dy = y - node.y - along * node.tangent_y;
  BranchFoot foot;
  foot.s = s;
  foot.distance = std::sqrt(dx * dx + dy * dy);
  foot.held = true;
  return foot;
}

/// The sample `ahead` metres on, rounded down, held to the branch.
int Walk::stepped(double ahead) const {
  const double low = branch_->first - at_, high = branch_->last - at_;
  const double steps = std::min(std::max(ahead * per_pitch_, low), high);
  const int whole = static_cast<int>(steps);
  return at_ + (steps < whole ? whole - 1 : whole);
}

BranchFoot Walk::to(double x, double y) {
  constexpr int steps_most =
      64;  // a bound for places near a centre of curvature, where the foot is not unique
  for (int step = 0;; ++step) {
    const Node& here = node(at_);
    const double dx = x - here.x, dy = y - here.y;
    const double u = dx * here.tangent_x + dy * here.tangent_y;
    const double w = dy * here.tangent_x - dx * here.tangent_y;
    const bool beyond = (u < 0.0 && at_ == branch_->first) || (u > 0.0 && at_ == branch_->last);
    const double s_here = at_ * pitch_;
    const double k = beyond ? 0.0 : here.curvature;
    const double c = 1.0 - k * w;
    if (!beyond && step < steps_most && !(u >= 0.0 && u < pitch_ * c)) {
      // Towards the foot, but no further than a radian at a time; beyond the centre of curvature just
      // onwards.
      double ahead = u;
      if (k != 0.0) {
        const double most = 1.0 / std::fabs(k);
        ahead = c > 0.05 ? std::min(std::max(u / c, -most), most) : (u < 0.0 ? -most : most);
      }
      const int next = stepped(ahead);
      if (next != at_) {
        at_ = next;
        continue;
      }
    }
    const double s = s_here + (c > 0.05 ? u / c : u);
    if (s < branch_->from) return held_at(here, s_here, branch_->from, x, y);
    if (s > branch_->to) return held_at(here, s_here, branch_->to, x, y);
    BranchFoot foot;
    foot.s = s;
    if (k == 0.0) {
      foot.deviation = w;
      foot.distance = std::fabs(w);
      foot.tangent_x = here.tangent_x;
      foot.tangent_y = here.tangent_y;
      return foot;
    }
    const double root = std::sqrt(c * c + k * k * u * u);
    foot.curvature = k;
    foot.deviation = (2.0 * w - k * (u * u + w * w)) / (1.0 + root);
    foot.distance = std::fabs(foot.deviation);
    const double along = c / root, across = k * u / root;
    foot.tangent_x = along * here.tangent_x - across * here.tangent_y;
    foot.tangent_y = along * here.tangent_y + across * here.tangent_x;
    return foot;
  }
}

}  // namespace lw
