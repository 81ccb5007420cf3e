#include "engine/course/floor.h"

#include <algorithm>
#include <cmath>

#include "engine/course/sampling.h"
#include "engine/course/spot.h"
#include "engine/course/texture.h"
#include "engine/course/tile.h"

namespace lw {
namespace {

constexpr double cells_most = 60e6;  // 480 MB
constexpr double tiles_most = 16e6;  // 64 MB of tile_start
constexpr std::size_t tile_area = static_cast<std::size_t>(tile_cells) * tile_cells;
constexpr Cell bare_cell{16384, 0, 0, 0};
constexpr std::int32_t none = -1;

/// Samples [first, last] of the centreline that come near a tile; `before` is the run of the same tile found
/// before.
struct Run {
  std::size_t first, last;
  std::int32_t before;
};

/// What is known while the floor is made.
struct Work {
  const Centreline& line;
  double radius, half_width;           // m, of spot and line
  double margin;                       // m
  double tile;                         // m, side
  std::vector<std::int32_t> last_run;  // a tile
  std::vector<Run> runs;
  std::vector<std::int32_t> drawn;  // tiles with the line on them, in the order found
};

Error too_large(const char* what, double count, double most, double spot_radius) {
  const double spot_mm = 2e3 * spot_radius * std::sqrt(count / most);
  return {"sensors.spot_mm", rounded_text(2e3 * spot_radius),
          "so fine a spot needs a floor of " + rounded_text(count * 1e-6) + " million " + what +
              ", more than the " + rounded_text(most * 1e-6) + " million that can be held; a spot of " +
              rounded_text(std::ceil(1.1 * spot_mm * 10.0) / 10.0) + " mm would do"};
}

Result<Floor> blank_floor(const Work& work, double pitch) {
  double low_x = 1e300, low_y = 1e300, high_x = -1e300, high_y = -1e300;
  for (const Node& node : work.line.nodes) {
    low_x = std::min(low_x, node.x), high_x = std::max(high_x, node.x);
    low_y = std::min(low_y, node.y), high_y = std::max(high_y, node.y);
  }
  // Tiles lie on a lattice through the origin, so that moving one end of a course leaves the cells of the
  // other alone. One cell more than the margin on every side keeps rounding inside.
  const double w = work.tile, border = work.margin + pitch;
  const double i0 = std::floor((low_x - border) / w), i1 = std::floor((high_x + border) / w) + 1.0;
  const double j0 = std::floor((low_y - border) / w), j1 = std::floor((high_y + border) / w) + 1.0;
  const double tiles = (i1 - i0) * (j1 - j0);
  if (!(tiles <= tiles_most)) return too_large("tiles", tiles, tiles_most, work.radius);
  Floor floor;
  floor.x0 = i0 * w;
  floor.y0 = j0 * w;
  floor.pitch = pitch;
  floor.tiles_x = static_cast<int>(i1 - i0);
  floor.tiles_y = static_cast<int>(j1 - j0);
  floor.tile_start.assign(static_cast<std::size_t>(tiles), 0);
  return floor;
}

/// Calls visit(tile) for every tile within `distance` of (x, y).
template <class Visit>
void each_tile_near(const Floor& floor, double tile, double x, double y, double distance, Visit&& visit) {
  const auto index = [tile](double at, int most) {
    return static_cast<int>(std::min(std::max(std::floor(at / tile), 0.0), most - 1.0));
  };
  const double fx = x - floor.x0, fy = y - floor.y0;
  const int i0 = index(fx - distance, floor.tiles_x), i1 = index(fx + distance, floor.tiles_x);
  const int j0 = index(fy - distance, floor.tiles_y), j1 = index(fy + distance, floor.tiles_y);
  const auto off = [tile](double at, int i) { return std::max({0.0, i * tile - at, at - (i + 1) * tile}); };
  for (int j = j0; j <= j1; ++j) {
    const double dy = off(fy, j);
    for (int i = i0; i <= i1; ++i) {
      const double dx = off(fx, i);
      if (dx * dx + dy * dy <= distance * distance) visit(j * floor.tiles_x + i);
    }
  }
}

std::size_t samples_within(const Centreline& line, double length) {
  return std::max<std::size_t>(1, static_cast<std::size_t>(length / line.pitch));
}

/// Notes, for every tile the line may darken, which samples come near it.
void find_runs(const Floor& floor, Work& work) {
  const std::size_t n = work.line.nodes.size();
  const std::size_t stride = samples_within(work.line, work.tile / 8.0);
  const double step = static_cast<double>(stride) * work.line.pitch;
  const double near = work.radius + work.half_width + 2.0 * floor.pitch + step;
  work.last_run.assign(floor.tile_start.size(), none);
  const auto visit_node = [&](std::size_t i) {
    const Node& node = work.line.nodes[i];
    each_tile_near(floor, work.tile, node.x, node.y, near, [&](int tile) {
      std::int32_t& last = work.last_run[static_cast<std::size_t>(tile)];
      if (last == none) work.drawn.push_back(tile);
      if (last != none && work.runs[last].last + stride >= i) {
        work.runs[last].last = i;
        return;
      }
      work.runs.push_back({i, i, last});
      last = static_cast<std::int32_t>(work.runs.size()) - 1;
    });
  };
  for (std::size_t i = 0; i < n; i += stride) visit_node(i);
  if ((n - 1) % stride != 0) visit_node(n - 1);
}

/// The branches that come near a tile. Runs that meet at the seam of a closed course are joined.
std::vector<Branch> branches_of(const Work& work, std::int32_t run) {
  const std::size_t n = work.line.nodes.size();
  std::vector<Run> runs;
  for (; run != none; run = work.runs[run].before)
    runs.push_back(work.runs[run]);  // the last one comes first
  if (work.line.closed && runs.front().last == n - 1 && runs.back().first == 0) {
    runs.front().last += runs.size() > 1 ? 1 + runs.back().last : 1;
    if (runs.size() > 1) runs.pop_back();
  }
  std::vector<Branch> branches;
  for (const Run& r : runs) add_branches(work.line, r.first, r.last, branches);
  return branches;
}

/// With texture every tile a sensor may come to has cells of its own.
std::vector<std::int32_t> tiles_within_margin(const Floor& floor, const Work& work) {
  std::vector<std::int32_t> tiles = work.drawn;
  std::vector<char> known(floor.tile_start.size(), 0);
  for (const std::int32_t tile : tiles) known[tile] = 1;
  const std::size_t stride = samples_within(work.line, work.tile / 4.0);
  const double step = static_cast<double>(stride) * work.line.pitch;
  for (std::size_t i = 0; i < work.line.nodes.size(); i += stride) {
    const Node& node = work.line.nodes[i];
    each_tile_near(floor, work.tile, node.x, node.y, work.margin + step, [&](int tile) {
      if (!known[tile]) tiles.push_back(tile);
      known[tile] = 1;
    });
  }
  return tiles;
}

}  // namespace

Result<Floor> make_floor(const Centreline& line, const Course& course, const FloorLook& look,
                         FloorNeed need) {
  const double pitch = need.spot_radius / 4.0;
  Work work{line, need.spot_radius, 0.5e-3 * course.line_mm, need.margin, tile_cells * pitch, {}, {}, {}};
  Result<Floor> floor = blank_floor(work, pitch);
  if (!floor) return floor;
  find_runs(*floor, work);
  const Texture texture = texture_of(look, need.spot_radius);
  const std::vector<std::int32_t> tiles =
      texture.amount > 0.0 ? tiles_within_margin(*floor, work) : work.drawn;
  const double count = static_cast<double>(tiles.size() + 1) * tile_area;
  if (count > cells_most) return too_large("cells", count, cells_most, work.radius);
  floor->cells.assign((tiles.size() + 1) * tile_area, bare_cell);
  const SpotTable spot(work.radius, work.half_width, pitch);
  for (std::size_t t = 0; t < tiles.size(); ++t) {
    const std::size_t start = (t + 1) * tile_area;
    floor->tile_start[tiles[t]] = static_cast<std::int32_t>(start);
    const double x = floor->x0 + (tiles[t] % floor->tiles_x) * work.tile;
    const double y = floor->y0 + (tiles[t] / floor->tiles_x) * work.tile;
    if (t < work.drawn.size()) {
      const std::vector<Branch> branches = branches_of(work, work.last_run[tiles[t]]);
      draw_tile({line, spot, work.radius, work.half_width, pitch}, branches, x, y, &floor->cells[start]);
    }
    if (texture.amount > 0.0) add_texture(texture, x, y, pitch, &floor->cells[start]);
  }
  return floor;
}

double brightness(const Floor& floor, double x, double y) {
  const double cx = (x - floor.x0) / floor.pitch, cy = (y - floor.y0) / floor.pitch;
  const double wide = static_cast<double>(floor.tiles_x) * tile_cells;
  const double high = static_cast<double>(floor.tiles_y) * tile_cells;
  if (!(cx >= 0.0 && cx < wide && cy >= 0.0 && cy < high)) return 1.0;
  const int i = static_cast<int>(cx), j = static_cast<int>(cy);
  const int start = floor.tile_start[(j / tile_cells) * floor.tiles_x + i / tile_cells];
  const Cell& cell = floor.cells[start + (j % tile_cells) * tile_cells + i % tile_cells];
  const double u = cx - i - 0.5, v = cy - j - 0.5;
  return (cell.c0 + cell.c1 * u + cell.c2 * v + cell.c3 * u * v) * cell_unit;
}

}  // namespace lw
