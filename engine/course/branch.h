// A branch: a smooth stretch of the centreline near one tile of the floor, and a walk along it.
//
// From one cell to the next the foot moves by about a cell, so the walk carries it along and looks at one or
// two samples of the centreline a cell, however long the course is.
#pragma once

#include <vector>

#include "engine/course/centreline.h"

namespace lw {

/// Stretches of arc length where a branch is not painted, m.
struct Bare {
  double from, to;
};

/// A stretch without a corner that turns by a right angle at most. Arc length and sample numbers of a closed
/// course go on past the seam.
struct Branch {
  int first = 0, last = 0;      // samples
  double from = 0.0, to = 0.0;  // m; the foot is held to this
  std::vector<Bare> bare;       // gaps, and what lies beyond open ends
};

/// The foot of a place on a branch.
struct BranchFoot {
  double s = 0.0;                           // m
  double distance = 0.0;                    // m, to the foot
  double deviation = 0.0;                   // m, left positive
  double tangent_x = 1.0, tangent_y = 0.0;  // unit, at the foot
  double curvature = 0.0;                   // 1/m
  bool held = false;                        // the foot is an end of the branch, not a perpendicular
};

class Walk {
 public:
  Walk(const Centreline& line, const Branch& branch);
  /// The foot of (x, y), m, starting from where the last call ended.
  BranchFoot to(double x, double y);
  const Branch& branch() const { return *branch_; }

 private:
  const Node& node(int i) const { return nodes_[i < count_ ? i : i - count_]; }
  int stepped(double ahead) const;
  BranchFoot held_at(const Node& node, double s_node, double s, double x, double y) const;

  const Node* nodes_;
  int count_;
  const Branch* branch_;
  double pitch_, per_pitch_;
  int at_;
};

/// Cuts the samples [first, last] into branches: at corners, and where more than a right angle has been
/// turned.
void add_branches(const Centreline& line, std::size_t first, std::size_t last, std::vector<Branch>& branches);

}  // namespace lw
