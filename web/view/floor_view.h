// The floor: line, drive and vehicle seen from above, and the tools that work on them.
//
// show_floor() draws everything inside Desk::layout.floor and takes what the hand does there. It keeps no
// result of its own: whatever is changed is changed in the desk's scenario, one step of undo for each
// movement of the hand. While something is held, a course that cannot be driven leaves the last good one
// lying there, with the reason by the pointer; let go, it springs back to the last that could.
//
// The view follows the course (fits it) until it is moved by hand, and again after "Fit".
#pragma once

#include <cstdint>
#include <memory>
#include <string>
#include <vector>

#include "web/page_app.h"
#include "web/panel/desk.h"
#include "web/view/line_shape.h"
#include "web/view/mesh.h"
#include "web/view/path_shape.h"
#include "web/view/transform.h"

namespace lw::view {

/// What a hand holds on the floor.
enum class Grip { nothing, floor, time, stroke, point, piece_end, piece_middle, new_gap, gap_end, start };

struct Held {
  Grip grip = Grip::nothing;
  int index = -1;            // of the point, piece or gap
  bool far_end = false;      // of the gap
  bool moved = false;        // further than a trembling hand
  bool carrying_on = false;  // the stroke begins at the end of the course
  Pixel begun, last;
  double s = 0, travel = 0;              // m of arc length: where it began, how far along since
  std::vector<Point> stroke;             // mm
  Scenario base;                         // what the edit starts from
  std::shared_ptr<const Ground> ground;  // of `base`
  std::uint64_t revision = 0;            // of the good drive when it began
};

/// Drawn once and kept while nothing of it changed.
struct Layer {
  Mesh mesh;
  View view;
  std::uint64_t revision = 0, kept_revision = 0;
  bool dark = true, filled = false;
};

struct FloorView {
  View view;
  bool placed = false;  // the view has been fitted once
  bool moved_by_hand = false;
  bool own_edit = false;  // the course on its way to the screen was changed on the floor itself
  bool close_up = true;
  float band = 0;    // px: how much of the frame's upper edge the tool's settings cover
  float beside = 0;  // px: how much of its right edge is kept free for the close-up
  Held held;
  std::string refusal;                                     // why the last movement changed nothing
  double length_mm = 400, radius_mm = 250, turn_deg = 90;  // of the next piece

  // Worked out from the drives on screen.
  std::uint64_t path_revision = 0, kept_revision = 0, ground = 0;
  Path path, kept_path;
  Box line_box;               // mm
  std::vector<double> marks;  // marks_of() the course driven, mm
  Layer tape_layer, path_layer;
  LineShape near_shape;  // of the close-up
  double draw_ms = 0;    // what the last show_floor() took, by host::seconds()
};

/// One frame of the floor, within the current Dear ImGui window.
void show_floor(FloorView& floor, panel::Desk& desk);

/// Two fingers: move and zoom. What one finger had begun is dropped.
void pinch_floor(FloorView& floor, panel::Desk& desk, const app::Pinch& pinch);

/// The whole course in view.
void fit_floor(FloorView& floor, const panel::Desk& desk);

}  // namespace lw::view
