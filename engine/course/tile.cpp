#include "engine/course/tile.h"

#include <algorithm>
#include <cmath>

#include "engine/course/zone.h"

namespace lw {
namespace {

constexpr double half_diagonal = 0.7072;  // of a cell, in cells
constexpr Cell dark_cell{0, 0, 0, 0};

/// Distances of a cell's middle from the centreline, m.
struct Bounds {
  double outer;   // beyond, the whole cell is bare
  double inner;   // within, it is dark
  double around;  // from an edge across the line within which the spot meets it somewhere in the cell
};

Bounds bounds_of(const TileWork& work) {
  const double spot = work.spot_radius + half_diagonal * work.pitch;
  return {work.half_width + spot, work.half_width - spot, spot};
}

/// What a cell is, and for how many more cells along the row that will hold.
struct Verdict {
  enum Kind { bare, dark, closed_form, zone } kind;
  double further;  // cells
  SpotPlace place;
};

/// Distance along the branch from s to the nearest edge of a gap, open end or corner; and whether s is bare.
struct EdgeNear {
  double distance;
  bool bare;
};

EdgeNear edge_near(const Branch& branch, double s) {
  EdgeNear near{std::min(std::fabs(s - branch.from), std::fabs(branch.to - s)), false};
  for (const Bare& gap : branch.bare) {
    near.distance = std::min({near.distance, std::fabs(s - gap.from), std::fabs(s - gap.to)});
    near.bare = near.bare || (s > gap.from && s < gap.to);
  }
  return near;
}

Verdict judge(const TileWork& work, std::vector<Walk>& walks, double x, double y) {
  const double pitch = work.pitch;
  const Bounds bounds = bounds_of(work);
  int active = 0;
  bool regular = true;
  double least = 1e9;
  Verdict verdict{Verdict::closed_form, 0.0, {}};
  for (Walk& walk : walks) {
    const BranchFoot foot = walk.to(x, y);
    least = std::min(least, foot.distance);
    if (foot.distance > bounds.outer) continue;
    const EdgeNear edge = edge_near(walk.branch(), foot.s);
    const bool clear = edge.distance > bounds.around;
    if (clear && edge.bare) continue;
    if (foot.distance < bounds.inner && clear && !foot.held)
      return {
          Verdict::dark, std::min(bounds.inner - foot.distance, edge.distance - bounds.around) / pitch, {}};
    ++active;
    regular = clear && !foot.held && std::fabs(foot.curvature) <= work.spot.curvature_most();
    verdict.place = {foot.deviation, foot.tangent_x, foot.tangent_y, foot.curvature};
  }
  if (active == 0) return {Verdict::bare, std::max(0.0, (least - bounds.outer) / pitch), {}};
  if (active > 1 || !regular) verdict.kind = Verdict::zone;
  return verdict;
}

/// Cells left for the fine grid: those of one tile, and the rectangle bounds.around them.
struct Rest {
  std::vector<int> cells;
  int i0 = tile_cells, i1 = -1, j0 = tile_cells, j1 = -1;
  void add(int i, int j) {
    cells.push_back(j * tile_cells + i);
    i0 = std::min(i0, i), i1 = std::max(i1, i), j0 = std::min(j0, j), j1 = std::max(j1, j);
  }
};

/// The cells of a tile in lines across the course, to and fro, so that the foot moves little from cell to
/// cell and what is bare or dark is left in few strides.
struct Order {
  bool along_x;
  int column(int line, int k) const { return along_x ? at(line, k) : line; }
  int row(int line, int k) const { return along_x ? line : at(line, k); }
  int step(int line) const { return (line % 2 == 0 ? 1 : -1) * (along_x ? 1 : tile_cells); }

 private:
  static int at(int line, int k) { return line % 2 == 0 ? k : tile_cells - 1 - k; }
};

Order order_across(const Centreline& line, const Branch& branch) {
  const std::size_t middle = static_cast<std::size_t>(branch.first + branch.last) / 2;
  const Node& node = line.nodes[middle % line.nodes.size()];
  return {std::fabs(node.tangent_y) > std::fabs(node.tangent_x)};
}

/// Any tile: whatever branches, corners, gaps and ends come near.
void draw_mixed(const TileWork& work, std::vector<Walk>& walks, double x, double y, Cell* cells) {
  const Order order = order_across(work.line, walks.front().branch());
  const double pitch = work.pitch;
  Rest rest;
  for (int line = 0; line < tile_cells; ++line)
    for (int k = 0; k < tile_cells; ++k) {
      const int i = order.column(line, k), j = order.row(line, k);
      const Verdict v = judge(work, walks, x + (i + 0.5) * pitch, y + (j + 0.5) * pitch);
      Cell* cell = cells + j * tile_cells + i;
      if (v.kind == Verdict::zone) {
        rest.add(i, j);
      } else if (v.kind == Verdict::closed_form) {
        *cell = work.spot.cell_at(v.place);
      } else {
        const int further = static_cast<int>(std::min(v.further, tile_cells - 1.0 - k));
        for (int f = 0; v.kind == Verdict::dark && f <= further; ++f) cell[f * order.step(line)] = dark_cell;
        k += further;
      }
    }
  if (rest.cells.empty()) return;
  const Zone zone({work.spot_radius, work.half_width, pitch}, walks, x + rest.i0 * pitch, y + rest.j0 * pitch,
                  rest.i1 - rest.i0 + 1, rest.j1 - rest.j0 + 1);
  for (const int c : rest.cells) cells[c] = zone.cell_at(c % tile_cells - rest.i0, c / tile_cells - rest.j0);
}

/// Whether one branch alone comes near, smooth and whole, and nowhere tighter than the closed form bears.
bool is_plain(const TileWork& work, const std::vector<Branch>& branches) {
  if (branches.size() != 1 || !branches.front().bare.empty()) return false;
  const std::size_t n = work.line.nodes.size();
  const double most = work.spot.curvature_most();
  for (int i = branches.front().first; i <= branches.front().last; ++i)
    if (std::fabs(work.line.nodes[static_cast<std::size_t>(i) % n].curvature) > most) return false;
  return true;
}

/// The foot on a plain branch, found from a guess. Within a sample it is taken to second order
/// (u^4 curvature^3 / 8 is left out, under 1e-8 m).
class PlainFoot {
 public:
  PlainFoot(const Centreline& line, const Branch& branch)
      : nodes_(line.nodes.data()),
        count_(static_cast<int>(line.nodes.size())),
        first_(branch.first),
        last_(branch.last),
        per_step_(1.0 / line.pitch),
        s_((branch.first + branch.last) / 2) {}

  /// The place of the line nearest to (x, y), m; the walk is expected to have gone `ahead` samples since the
  /// last call.
  SpotPlace to(double x, double y, double ahead) {
    int at = held(s_ + ahead);
    for (int tries = 0;; ++tries) {
      const Node& node = nodes_[at < count_ ? at : at - count_];
      const double dx = x - node.x, dy = y - node.y, k = node.curvature;
      const double u = dx * node.tangent_x + dy * node.tangent_y;
      const double w = dy * node.tangent_x - dx * node.tangent_y;
      const double per_c = k == 0.0 ? 1.0 : 1.0 / std::max(1.0 - k * w, 0.05);
      s_ = at + u * per_c * per_step_;
      const int next = held(s_);
      if (next != at && tries < 32) {
        at = next;
        continue;
      }
      const double lean = k * u * per_c, along = 1.0 - 0.5 * lean * lean;
      return {w - 0.5 * lean * u, along * node.tangent_x - lean * node.tangent_y,
              along * node.tangent_y + lean * node.tangent_x, k};
    }
  }
  double s() const { return s_; }  // samples

 private:
  int held(double s) const { return static_cast<int>(std::min(std::max(s, first_ + 0.0), last_ + 0.0)); }

  const Node* nodes_;
  int count_, first_, last_;
  double per_step_, s_;
};

/// The same as draw_mixed for a plain branch, which most tiles have: no ends and no choice.
void draw_plain(const TileWork& work, const Branch& branch, double x, double y, Cell* cells) {
  const Order order = order_across(work.line, branch);
  const Bounds bounds = bounds_of(work);
  const double pitch = work.pitch;
  PlainFoot foot(work.line, branch);
  for (int line = 0; line < tile_cells; ++line) {
    double drift = 0.0;  // samples a cell
    for (int k = 0, moved = 0; k < tile_cells; k += moved) {
      const int i = order.column(line, k), j = order.row(line, k);
      const double s_before = foot.s();
      const SpotPlace place = foot.to(x + (i + 0.5) * pitch, y + (j + 0.5) * pitch, drift * moved);
      if (moved > 0) drift = (foot.s() - s_before) / moved;
      const double distance = std::fabs(place.deviation), left = tile_cells - 1.0 - k;
      Cell* cell = cells + j * tile_cells + i;
      moved = 1;
      if (distance > bounds.outer) {
        moved += static_cast<int>(std::min((distance - bounds.outer) / pitch, left));
      } else if (distance < bounds.inner) {
        moved += static_cast<int>(std::min((bounds.inner - distance) / pitch, left));
        for (int f = 0; f < moved; ++f) cell[f * order.step(line)] = dark_cell;
      } else {
        *cell = work.spot.cell_at(place);
      }
    }
  }
}

}  // namespace

void draw_tile(const TileWork& work, const std::vector<Branch>& branches, double x, double y, Cell* cells) {
  if (is_plain(work, branches)) {
    draw_plain(work, branches.front(), x, y, cells);
    return;
  }
  std::vector<Walk> walks;
  for (const Branch& branch : branches) walks.emplace_back(work.line, branch);
  draw_mixed(work, walks, x, y, cells);
}

}  // namespace lw
