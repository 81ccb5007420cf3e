#include "engine/vehicle/sensors.h"

namespace lw {

FloorView view_of(const Floor& floor) {
  return {floor.tile_start.data(),
          floor.cells.data(),
          floor.x0,
          floor.y0,
          1.0 / floor.pitch,
          static_cast<double>(floor.tiles_x * tile_cells - 1),
          static_cast<double>(floor.tiles_y * tile_cells - 1),
          floor.tiles_x};
}

}  // namespace lw
