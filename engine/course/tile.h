// One tile of the floor: which cells are bare, dark, of closed form, or left to the fine grid.
#pragma once

#include <vector>

#include "engine/course/branch.h"
#include "engine/course/floor.h"
#include "engine/course/spot.h"

namespace lw {

struct TileWork {
  const Centreline& line;
  const SpotTable& spot;
  double spot_radius, half_width, pitch;  // m; pitch of the raster
};

/// Draws the line on a tile of bare cells whose low corner is (x, y), m. `branches`: at least one, all that
/// come within half-width + spot radius + two cells of the tile.
void draw_tile(const TileWork& work, const std::vector<Branch>& branches, double x, double y, Cell* cells);

}  // namespace lw
