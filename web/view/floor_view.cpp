#include "web/view/floor_view.h"

#include <algorithm>
#include <cmath>

#include "web/host.h"
#include "web/view/bench.h"
#include "web/view/course_gaps.h"
#include "web/view/layers.h"
#include "web/view/overlays.h"
#include "web/view/toolbar.h"
#include "web/view/vehicle_drawing.h"

namespace lw::view {
namespace {

constexpr double close_up_tolerance = 2e-4;  // m

bool same_view(const View& a, const View& b) {
  return a.scale == b.scale && a.centre_x == b.centre_x && a.centre_y == b.centre_y &&
         a.frame.x == b.frame.x && a.frame.y == b.frame.y && a.frame.width == b.frame.width &&
         a.frame.height == b.frame.height;
}

/// Brings what is worked out from the drives up to date.
void follow_drives(FloorView& floor, const panel::Desk& desk) {
  if (desk.kept && floor.kept_revision != desk.kept->revision) {
    floor.kept_path = path_of(desk.kept->trace, desk.kept->scenario.sensors.forward_mm);
    floor.kept_revision = desk.kept->revision;
  }
  if (!panel::has_drive(desk) || floor.path_revision == desk.good.revision) return;
  floor.path_revision = desk.good.revision;
  floor.path = path_of(desk.good.trace, desk.good.scenario.sensors.forward_mm);
  if (floor.placed && floor.ground == desk.good.ground) return;
  floor.ground = desk.good.ground;
  const Centreline& line = desk.good.plan.ground->line;
  floor.line_box = {};
  for (const Node& node : line.nodes) floor.line_box.add(1e3 * node.x, 1e3 * node.y);
  floor.marks = marks_of(desk.good.scenario.course, line);
  floor.near_shape = shape_of(line, close_up_tolerance);
  const bool leave = floor.placed && (floor.own_edit || floor.moved_by_hand);
  floor.own_edit = false;
  if (!leave) fit_floor(floor, desk);
}

/// The hand this frame; `over` is whether nothing lies between it and the floor.
Pointer pointer_of(const FloorView& floor, const panel::Desk& desk) {
  const ImGuiIO& io = ImGui::GetIO();
  Pointer hand;
  hand.at = pixel(io.MousePos);
  hand.over = ImGui::IsItemHovered() && floor.view.frame.holds(hand.at);
  hand.pressed = ImGui::IsItemActivated();
  hand.held = ImGui::IsItemActive();
  hand.released = ImGui::IsItemDeactivated();
  hand.twice = hand.pressed && ImGui::GetMouseClickedCount(ImGuiMouseButton_Left) % 2 == 0;
  const bool finger = io.MouseSource == ImGuiMouseSource_TouchScreen || desk.layout.touch;
  hand.reach = desk.scale * (finger ? 22.0f : 10.0f);
  if (!io.WantTextInput)
    hand.remove =
        ImGui::IsKeyPressed(ImGuiKey_Delete, false) || ImGui::IsKeyPressed(ImGuiKey_Backspace, false);
  return hand;
}

/// What moves the view whatever the tool: the wheel, and the other buttons of the mouse.
void move_view(Bench& bench) {
  FloorView& floor = bench.floor;
  const ImGuiIO& io = ImGui::GetIO();
  if (floor.held.grip == Grip::floor && bench.pointer.held && moving(bench)) {
    floor.view =
        panned(floor.view, bench.pointer.at.x - floor.held.last.x, bench.pointer.at.y - floor.held.last.y);
    floor.held.last = bench.pointer.at;
    floor.moved_by_hand = true;
    ImGui::SetMouseCursor(ImGuiMouseCursor_ResizeAll);
  }
  if (!bench.pointer.over) return;
  if (io.MouseWheel != 0.0f) {
    floor.view = zoomed(floor.view, bench.pointer.at, std::pow(1.2, static_cast<double>(io.MouseWheel)));
    floor.moved_by_hand = true;
  }
  for (const ImGuiMouseButton button : {ImGuiMouseButton_Right, ImGuiMouseButton_Middle}) {
    if (!ImGui::IsMouseDown(button)) continue;
    floor.view = panned(floor.view, io.MouseDelta.x, io.MouseDelta.y);
    floor.moved_by_hand = floor.moved_by_hand || io.MouseDelta.x != 0 || io.MouseDelta.y != 0;
  }
}

bool up_to_date(const Layer& layer, const Bench& bench) {
  const bool kept = bench.desk.kept && bench.desk.show_kept;
  return layer.filled && layer.revision == bench.desk.good.revision && layer.dark == bench.desk.dark &&
         layer.kept_revision == (kept ? bench.desk.kept->revision : 0) &&
         same_view(layer.view, bench.floor.view);
}

void begin_layer(Layer& layer, const Bench& bench) {
  layer.mesh.clear();
  layer.mesh.clip = bench.floor.view.frame;
  layer.view = bench.floor.view;
  layer.revision = bench.desk.good.revision;
  layer.kept_revision = bench.desk.kept && bench.desk.show_kept ? bench.desk.kept->revision : 0;
  layer.dark = bench.desk.dark;
  layer.filled = true;
}

void draw_course(Bench& bench) {
  FloorView& floor = bench.floor;
  const panel::GoodDrive& good = bench.desk.good;
  const double width = good.scenario.course.line_mm;
  if (!up_to_date(floor.tape_layer, bench)) {
    begin_layer(floor.tape_layer, bench);
    const LineShape shape = shape_of(bench.line(), 2e-4 / floor.view.scale);
    add_tape(floor.tape_layer.mesh, shape, floor.view, width, bench.theme);
    add_arrows(floor.tape_layer.mesh, bench.line(), floor.view, width, panel::faded(bench.theme.faint, 0.8f),
               110.0f * bench.unit);
  }
  put(floor.tape_layer.mesh, bench.draw);
  draw_start(bench.draw, bench.line(), floor.view, width, bench.theme, bench.unit);
}

void draw_paths(Bench& bench) {
  FloorView& floor = bench.floor;
  if (!up_to_date(floor.path_layer, bench)) {
    begin_layer(floor.path_layer, bench);
    Mesh& mesh = floor.path_layer.mesh;
    if (bench.desk.kept && bench.desk.show_kept)
      add_ghost(mesh, floor.kept_path, floor.view, panel::faded(bench.theme.kept, 0.85f), 1.1f * bench.unit);
    const auto tape = static_cast<float>(0.5 * bench.desk.good.scenario.course.line_mm * floor.view.scale);
    const float half = std::clamp(0.4f * tape, 1.1f, 1.7f) * bench.unit;
    add_path(mesh, floor.path, floor.view, bench.desk.good.scenario, bench.desk.dark, half);
  }
  put(floor.path_layer.mesh, bench.draw);
}

void draw_vehicle_now(Bench& bench) {
  const panel::GoodDrive& good = bench.desk.good;
  const TraceRow row = panel::between_rows(good.trace, bench.desk.playback.cursor);
  const std::size_t at = panel::row_at(good.trace, bench.desk.playback.cursor);
  const auto sensors = static_cast<std::size_t>(good.trace.sensors);
  draw_vehicle(bench.draw, bench.floor.view, good.scenario, row,
               std::span(good.trace.readings).subspan(at * sensors, sensors), bench.theme,
               bench.floor.view.scale * good.scenario.vehicle.track_width_mm > 120);
}

void work(Bench& bench) {
  switch (bench.desk.tool) {
    case panel::Tool::look:
      return work_look(bench);
    case panel::Tool::draw:
      return work_draw(bench);
    case panel::Tool::points:
      return work_points(bench);
    case panel::Tool::gaps:
      return work_gaps(bench);
    case panel::Tool::start:
      return work_start(bench);
  }
}

/// Everything that lies on the floor, from below upwards.
double draw_floor(Bench& bench) {
  const Frame& f = bench.floor.view.frame;
  bench.draw.AddRectFilled({f.x, f.y}, {f.x + f.width, f.y + f.height}, bench.theme.bare);
  const double grid = draw_grid(bench.draw, bench.floor.view, bench.theme, 56.0f * bench.unit);
  if (!panel::has_drive(bench.desk)) return grid;
  draw_course(bench);
  draw_paths(bench);
  const bool looking = bench.desk.tool == panel::Tool::look;
  if (looking)
    draw_marks(bench.draw, bench.desk.good, bench.floor.path, bench.floor.view, bench.theme, bench.unit);
  if (looking || bench.desk.tool == panel::Tool::start) draw_vehicle_now(bench);
  return grid;
}

/// What was begun is as if it had not been.
void drop(FloorView& floor, panel::Desk& desk) {
  const Grip grip = floor.held.grip;
  if (grip != Grip::nothing && grip != Grip::floor && grip != Grip::time) panel::cancel_edit(desk);
  floor.held = {};
  floor.refusal.clear();
}

void draw_refusal(const Bench& bench) {
  if (bench.idle() || !bench.pointer.held) return;
  std::string text = bench.floor.refusal;
  const Grip grip = bench.floor.held.grip;
  const bool editing = grip != Grip::floor && grip != Grip::time;
  if (text.empty() && editing && bench.desk.error) text = bench.desk.error->why;
  if (!text.empty()) draw_bubble(bench, bench.pointer.at, text, bench.theme.bad);
}

}  // namespace

void fit_floor(FloorView& floor, const panel::Desk& desk) {
  const Frame whole = floor.view.frame;
  const float unit = desk.scale, top = floor.band, bottom = footer_height * unit;
  Frame free = whole;
  free.y += top;
  free.height = std::max(40.0f, whole.height - top - bottom);
  Box box = floor.line_box;
  // Room for the vehicle too, wherever along the line it is.
  const Scenario& driven = desk.good.scenario;
  const double half = std::max(0.5 * driven.course.line_mm, 0.7 * driven.vehicle.track_width_mm);
  if (!box.empty())
    box.add(box.low_x - half, box.low_y - half), box.add(box.high_x + half, box.high_y + half);
  View view = fitted(free, box, 26 * unit);
  // Beside the close-up, unless that would make the course much smaller than below it.
  if (floor.beside > 0.0f) {
    Frame left = free;
    left.width -= floor.beside;
    const View smaller = fitted(left, box, 26 * unit);
    if (smaller.scale > 0.65 * view.scale) view = smaller, free = left;
  }
  view.centre_x += (whole.x + 0.5 * whole.width - free.x - 0.5 * free.width) / view.scale;
  view.centre_y -= (whole.y + 0.5 * whole.height - free.y - 0.5 * free.height) / view.scale;
  floor.view = in_frame(view, whole);
  floor.moved_by_hand = false;
  floor.placed = floor.placed || !floor.line_box.empty();
}

void pinch_floor(FloorView& floor, panel::Desk& desk, const app::Pinch& pinch) {
  if (!floor.view.frame.holds({pinch.x, pinch.y})) return;
  if (pinch.phase == app::Pinch::began) drop(floor, desk);
  if (pinch.phase != app::Pinch::moved) return;
  floor.view = zoomed(panned(floor.view, pinch.moved_x, pinch.moved_y), {pinch.x, pinch.y}, pinch.scale);
  floor.moved_by_hand = true;
}

void show_floor(FloorView& floor, panel::Desk& desk) {
  const double begun = host::seconds();
  const panel::Box& box = desk.layout.floor;
  if (box.width < 100 || box.height < 60) return;
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  Bench bench{floor, desk, draw, panel::theme(desk.dark), {}, desk.scale};
  const float strip = strip_width(bench);
  const Frame frame{box.x + strip, box.y, box.width - strip, box.height};
  const bool resized = frame.width != floor.view.frame.width || frame.height != floor.view.frame.height;
  floor.view = in_frame(floor.view, frame);

  // Controls come first, so that what is pressed on them is not pressed on the floor as well; yet they are
  // drawn above it.
  ImGui::PushID("floor");
  ImGui::PushClipRect({box.x, box.y}, {box.right(), box.bottom()}, true);
  draw.ChannelsSplit(2);
  draw.ChannelsSetCurrent(1);
  show_strip(bench, box);
  const float options = show_options(bench);
  const bool banded = options > frame.y && desk.tool != panel::Tool::look;
  const float band = banded ? options + 8 * bench.unit : frame.y;
  const bool wants_close_up = floor.close_up && desk.tool == panel::Tool::look;
  const float beside = wants_close_up ? close_up_side(frame, bench.unit) : 0.0f;
  const bool covered = floor.band != band - frame.y || floor.beside != beside;
  floor.band = band - frame.y;
  floor.beside = beside;
  if ((resized || covered) && !floor.moved_by_hand) fit_floor(floor, desk);
  follow_drives(floor, desk);
  ImGui::SetCursorScreenPos({frame.x, band});
  ImGui::InvisibleButton("surface", {frame.width, std::max(frame.y + frame.height - band, 1.0f)});
  bench.pointer = pointer_of(floor, desk);
  draw.ChannelsSetCurrent(0);
  ImGui::PushClipRect({frame.x, frame.y}, {frame.x + frame.width, frame.y + frame.height}, true);
  move_view(bench);
  const double grid = draw_floor(bench);
  work(bench);
  if (wants_close_up && panel::has_drive(desk)) draw_close_up(bench, options + 8 * bench.unit);
  draw.AddRectFilled({frame.x, frame.y}, {frame.x + frame.width, band},
                     panel::faded(bench.theme.surface, 0.92f));
  draw_footer(bench, grid, hint_of(bench));
  draw_refusal(bench);
  if (!bench.idle() && ImGui::IsKeyPressed(ImGuiKey_Escape, false)) drop(bench.floor, desk);
  if (bench.pointer.released || (!bench.idle() && !bench.pointer.held)) let_go(bench);
  ImGui::PopClipRect();
  draw.ChannelsMerge();
  ImGui::PopClipRect();
  ImGui::PopID();
  floor.draw_ms = 1e3 * (host::seconds() - begun);
}

}  // namespace lw::view
