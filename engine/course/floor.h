// The floor: what a reflectance sensor with a round spot sees at every point of the plane.
//
// Brightness is 1 on bare floor and 0 on the line, averaged over the spot disc, plus texture. Where lines
// cross the dark is the union of both; a gap is cut square across the line; beyond the drawn floor it is
// bare.
//
// The raster is prefiltered with the disc, in square tiles, so that memory follows the length of the line and
// not the area of the room. Tiles far from the line share one bare tile. One cell holds the bilinear surface
// over its square,
//   F(u, v) = (c0 + c1 u + c2 v + c3 u v) / 2^14,   u, v in [-1/2, 1/2] from the middle of the cell,
// fitted by least squares over the cell, which takes away the bias of interpolating between corner values (up
// to pitch^2 / (6 radius^2) of the slope). One cell is 8 bytes: one load a sensor.
//
// Frame: metres. Tile (i, j) covers x in [x0 + i w, x0 + (i + 1) w), w = tile_cells * pitch, and y likewise.
// Cells of a tile are stored row by row from low y, cells of a row from low x.
#pragma once

#include <cstdint>
#include <vector>

#include "engine/course/centreline.h"
#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw {

struct Cell {
  std::int16_t c0, c1, c2, c3;
};

inline constexpr int tile_cells = 32;  // along one side of a tile
inline constexpr double cell_unit = 1.0 / 16384.0;

struct Floor {
  double x0 = 0.0, y0 = 0.0;  // m, the low corner of tile (0, 0)
  double pitch = 0.0;         // m, side of a cell; at most a quarter of the spot radius
  int tiles_x = 0, tiles_y = 0;
  std::vector<std::int32_t> tile_start;  // index of the first cell of tile (i, j), at j * tiles_x + i
  std::vector<Cell> cells;               // the first tile_cells^2 are the bare tile
};

/// How the sensor and the drive bound the floor that is needed.
struct FloorNeed {
  double spot_radius = 0.0;  // m, > 0
  double margin = 0.0;       // m from the centreline within which sensors may come while the drive goes on
};

/// Rasters the floor around the centreline. Error: more cells than can be held (says the size that would do).
Result<Floor> make_floor(const Centreline& line, const Course& course, const FloorLook& look, FloorNeed need);

/// Brightness at a point (m), anywhere: outside the tiles it is bare. For views and tests; the drive has its
/// own lookup.
double brightness(const Floor& floor, double x, double y);

/// Share of a disc of radius r that lies within a strip of half-width h whose middle is at distance d from
/// the disc's centre. Closed form (area of circular segments).
double strip_share_of_disc(double distance, double half_width, double radius);

}  // namespace lw
