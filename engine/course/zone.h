// Where the closed form of the spot does not hold (crossings, corners, ends, edges of gaps, tight bends): the
// line painted on a fine grid, and the spot summed over it.
//
// A fine square is dark by the share a straight edge at the line's distance cuts off its width; the union of
// branches is the darkest of them. Corners are rounded on the outside (all that lies within half the line's
// width of the centreline), gaps and open ends are cut square. The spot is summed row by row: chords of the
// disc between running sums.
#pragma once

#include <vector>

#include "engine/course/branch.h"
#include "engine/course/floor.h"

namespace lw {

struct ZoneSettings {
  double spot_radius, half_width, pitch;  // m; pitch of the raster
};

class Zone {
 public:
  /// Paints the cells [0, columns) x [0, rows) whose low corner is (x, y), with a border for the spot.
  Zone(const ZoneSettings& settings, std::vector<Walk>& walks, double x, double y, int columns, int rows);
  /// The cell in column i, row j: least squares from two by two Gauss points.
  Cell cell_at(int i, int j) const;

 private:
  void paint(Walk& walk, double half_width);
  double dark_share(double x, int first_row, const std::vector<double>& chords) const;

  static constexpr int fine = 4;  // fine squares along a cell
  double side_;                   // m, of a fine square
  double x_, y_;                  // m, low corner of the fine grid
  int columns_, rows_, border_;
  std::vector<double> dark_;  // rows_ x (columns_ + 1), row by row: first painted, then running sums along x
  std::vector<double>
      chords_[2];  // half chords of the disc in fine squares, for the two heights of Gauss points
  double area_[2];
};

}  // namespace lw
