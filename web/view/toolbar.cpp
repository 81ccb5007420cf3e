#include "web/view/toolbar.h"

#include <cmath>

#include "web/page/typeface.h"
#include "web/view/controls.h"
#include "web/view/course_gaps.h"
#include "web/view/course_pieces.h"
#include "web/view/course_points.h"
#include "web/view/course_whole.h"
#include "web/view/overlays.h"

namespace lw::view {
namespace {

using panel::Tool;

struct ToolWord {
  Tool tool;
  const char* word;
};
constexpr ToolWord tools[] = {{Tool::look, "Look"},
                              {Tool::draw, "Draw"},
                              {Tool::points, "Shape"},
                              {Tool::gaps, "Gaps"},
                              {Tool::start, "Start"}};

/// The signs of the tools: a stretch of tape, and what is done to it. `r` is half the sign's height.
void draw_sign(ImDrawList& draw, Tool tool, ImVec2 c, float r, ImU32 colour) {
  const float thick = 0.24f * r;
  const auto bow = [&](float from, float to) {
    draw.PathClear();
    for (int i = 0; i <= 12; ++i) {
      const float t = from + (to - from) * static_cast<float>(i) / 12.0f;
      draw.PathLineTo({c.x + 1.4f * r * (2 * t - 1), c.y - 0.55f * r * std::sin(6.2831853f * t)});
    }
    draw.PathStroke(colour, 0, thick);
  };
  const auto spot = [&](float t, float size) {
    draw.AddCircleFilled({c.x + 1.4f * r * (2 * t - 1), c.y - 0.55f * r * std::sin(6.2831853f * t)}, size * r,
                         colour);
  };
  switch (tool) {
    case Tool::look: {
      const float w = 1.4f * r;
      draw.PathClear();
      draw.PathLineTo({c.x - w, c.y});
      draw.PathBezierQuadraticCurveTo({c.x, c.y - 1.7f * r}, {c.x + w, c.y});
      draw.PathBezierQuadraticCurveTo({c.x, c.y + 1.7f * r}, {c.x - w, c.y});
      draw.PathStroke(colour, 0, thick);
      return draw.AddCircleFilled(c, 0.38f * r, colour);
    }
    case Tool::draw:
      bow(0.0f, 0.82f);
      return spot(0.86f, 0.34f);
    case Tool::points:
      bow(0.0f, 1.0f);
      for (const float t : {0.0f, 0.25f, 0.75f, 1.0f}) spot(t, 0.3f);
      return;
    case Tool::gaps:
      bow(0.0f, 0.36f);
      return bow(0.64f, 1.0f);
    case Tool::start:
      draw.AddRectFilled({c.x - 0.85f * r, c.y - r}, {c.x - 0.5f * r, c.y + r}, colour);
      draw.AddTriangleFilled({c.x - 0.3f * r, c.y - 0.65f * r}, {c.x + 0.9f * r, c.y},
                             {c.x - 0.3f * r, c.y + 0.65f * r}, colour);
  }
}

bool strip_button(const Bench& bench, const char* word, ImVec2 at, ImVec2 size, bool chosen) {
  ImGui::SetCursorScreenPos(at);
  const bool pressed = ImGui::InvisibleButton(word, size);
  const ImVec2 low = at, high{at.x + size.x, at.y + size.y};
  if (chosen) {
    bench.draw.AddRectFilled(low, high, bench.theme.raised);
    bench.draw.AddRectFilled(low, {low.x + 4 * bench.unit, high.y}, bench.theme.accent);
  } else if (ImGui::IsItemHovered()) {
    bench.draw.AddRectFilled(low, high, bench.theme.hover);
  }
  return pressed;
}

void choose(Bench& bench, Tool tool) {
  if (!bench.idle()) let_go(bench);
  bench.desk.tool = tool;
  bench.desk.selection = {};
}

void offer_closing(Flow& flow) {
  Bench& bench = flow.bench;
  const bool closed = bench.course().closed;
  const int taken = word_choice(flow, "ends", {"Closed", "Open"}, closed ? 0 : 1);
  if (taken >= 0) edit_at_once(bench, with_closed(bench.desk.scenario, taken == 0, bench.floor.radius_mm));
}

void offer_width(Flow& flow) {
  Bench& bench = flow.bench;
  const auto width = number_entry(flow, {"Line", "mm", 1.0, 1.0, 1000.0}, bench.course().line_mm);
  if (width) edit_at_once(bench, with_line_width(bench.desk.scenario, *width));
}

void offer_point(Flow& flow) {
  Bench& bench = flow.bench;
  const int chosen = bench.desk.selection.point;
  if (chosen < 0 || static_cast<std::size_t>(chosen) >= bench.course().points_mm.size()) return;
  const auto index = static_cast<std::size_t>(chosen);
  const int taken =
      word_choice(flow, "point", {"Smooth", "Corner"}, is_corner(bench.course(), index) ? 1 : 0);
  if (taken >= 0) edit_at_once(bench, with_corner(bench.desk.scenario, index, taken == 1));
  if (word_button(flow, "Delete point") &&
      edit_at_once(bench, with_point_deleted(bench.desk.scenario, index)))
    bench.desk.selection = {};
}

/// A new piece behind the chosen one, or at the end; it is chosen then.
void add_piece(Bench& bench, Piece piece) {
  const std::size_t count = bench.course().pieces.size();
  int& chosen = bench.desk.selection.piece;
  const std::size_t index =
      chosen >= 0 && static_cast<std::size_t>(chosen) < count ? static_cast<std::size_t>(chosen) + 1 : count;
  if (edit_at_once(bench, with_piece_inserted(bench.desk.scenario, index, piece)))
    chosen = static_cast<int>(index);
}

void offer_new_pieces(Flow& flow) {
  Bench& bench = flow.bench;
  const FloorView& next = bench.floor;
  if (word_button(flow, "+ Straight")) add_piece(bench, straight_of(next.length_mm));
  if (word_button(flow, "+ Left")) add_piece(bench, bend_of(next.radius_mm, next.turn_deg));
  if (word_button(flow, "+ Right")) add_piece(bench, bend_of(next.radius_mm, -next.turn_deg));
  if (word_button(flow, "+ Corner")) {
    // A corner needs something to lead to: it comes with a straight.
    add_piece(bench, bend_of(0.0, next.turn_deg));
    const Result<Scenario> led =
        with_piece_inserted(bench.desk.scenario, static_cast<std::size_t>(bench.desk.selection.piece) + 1,
                            straight_of(next.length_mm));
    if (led.ok() && !bench.desk.history.past.empty()) {
      bench.desk.scenario = *led;  // part of the same step of undo
      panel::touch(bench.desk);
    }
  }
}

/// What the next piece gets.
void offer_measures(Flow& flow) {
  FloorView& next = flow.bench.floor;
  if (const auto length = number_entry(flow, {"Length", "mm", 50, 1, 1e6}, next.length_mm))
    next.length_mm = *length;
  if (const auto radius = number_entry(flow, {"Radius", "mm", 10, 1, 1e6}, next.radius_mm))
    next.radius_mm = *radius;
  if (const auto turn = number_entry(flow, {"Turn", "\u00b0", 15, 1, 179}, next.turn_deg))
    next.turn_deg = *turn;
}

void offer_piece(Flow& flow) {
  Bench& bench = flow.bench;
  FloorView& next = bench.floor;
  int& chosen = bench.desk.selection.piece;
  if (chosen < 0 || static_cast<std::size_t>(chosen) >= bench.course().pieces.size()) return;
  const auto index = static_cast<std::size_t>(chosen);
  const Piece piece = bench.course().pieces[index];
  std::optional<Piece> now;
  if (piece.straight_mm) {
    if (const auto length = number_entry(flow, {"Length", "mm", 10, 1, 1e6}, *piece.straight_mm)) {
      now = straight_of(*length);
      next.length_mm = *length;
    }
  } else if (piece.radius_mm && piece.turn_deg) {
    const bool corner = *piece.radius_mm == 0.0;
    const double side = *piece.turn_deg > 0 ? 1.0 : -1.0;
    if (!corner) {
      if (const auto radius = number_entry(flow, {"Radius", "mm", 10, 1, 1e6}, *piece.radius_mm)) {
        now = bend_of(*radius, *piece.turn_deg);
        next.radius_mm = *radius;
      }
    }
    const double most = corner ? 179.0 : 3600.0;
    if (const auto turn = number_entry(flow, {"Turn", "\u00b0", 5, 1, most}, side * *piece.turn_deg)) {
      now = bend_of(*piece.radius_mm, side * *turn);
      next.turn_deg = *turn;
    }
    const int taken = word_choice(flow, "side", {"Left", "Right"}, side > 0 ? 0 : 1);
    if (taken >= 0) now = bend_of(*piece.radius_mm, -*piece.turn_deg);
  }
  if (now) edit_at_once(bench, with_piece_changed(bench.desk.scenario, index, *now));
  const std::size_t count = bench.course().pieces.size();
  if (word_button(flow, "\u2190", index > 0) &&
      edit_at_once(bench, with_piece_moved(bench.desk.scenario, index, index - 1)))
    --chosen;
  if (word_button(flow, "\u2192", index + 1 < count) &&
      edit_at_once(bench, with_piece_moved(bench.desk.scenario, index, index + 1)))
    ++chosen;
  if (word_button(flow, "Delete") && edit_at_once(bench, with_piece_removed(bench.desk.scenario, index)))
    chosen = -1;
}

void offer_shape(Flow& flow) {
  Bench& bench = flow.bench;
  if (bench.course().pieces.empty()) {
    offer_closing(flow);
    offer_width(flow);
    offer_point(flow);
    flow.space();
    if (word_button(flow, "Begin with exact pieces"))
      edit_at_once(bench, Result<Scenario>(with_pieces_begun(bench.desk.scenario, bench.floor.length_mm)));
    return;
  }
  offer_new_pieces(flow);
  flow.space();
  offer_closing(flow);
  offer_width(flow);
  if (word_button(flow, "As points", bench.in_step())) {
    if (edit_at_once(bench, with_points_from_pieces(bench.desk.scenario, bench.line())))
      bench.desk.selection = {};
    return;
  }
  flow.next_line();
  if (bench.desk.selection.piece >= 0) return offer_piece(flow);
  offer_measures(flow);
}

void offer_gaps(Flow& flow) {
  Bench& bench = flow.bench;
  int& chosen = bench.desk.selection.gap;
  const std::size_t count = bench.course().gaps_mm.size();
  if (chosen >= 0 && static_cast<std::size_t>(chosen) < count && word_button(flow, "Remove gap")) {
    edit_at_once(bench, with_gap_removed(bench.desk.scenario, static_cast<std::size_t>(chosen)));
    chosen = -1;
  }
  if (count > 1 && word_button(flow, "Remove all gaps")) {
    Scenario bare = bench.desk.scenario;
    bare.course.gaps_mm.clear();
    edit_at_once(bench, Result<Scenario>(std::move(bare)));
  }
}

}  // namespace

float strip_width(const Bench& bench) { return std::round(bench.unit * 72.0f); }

void show_strip(Bench& bench, const panel::Box& box) {
  const float unit = bench.unit, width = strip_width(bench);
  const bool touch = bench.desk.layout.touch;
  bench.draw.AddRectFilled({box.x, box.y}, {box.x + width, box.bottom()}, bench.theme.surface);
  float y = box.y;
  const float tall = std::min((touch ? 60.0f : 54.0f) * unit, box.height / 8.0f);
  for (const ToolWord& tool : tools) {
    const bool chosen = bench.desk.tool == tool.tool;
    if (strip_button(bench, tool.word, {box.x, y}, {width, tall}, chosen)) choose(bench, tool.tool);
    const ImU32 colour = chosen ? bench.theme.accent : bench.theme.text;
    draw_sign(bench.draw, tool.tool, {box.x + 0.5f * width, y + 0.34f * tall}, 0.17f * tall, colour);
    write_middle(bench, {box.x, y + 0.52f * tall}, {box.x + width, y + 0.98f * tall}, colour, tool.word);
    y += tall;
  }
  const float low = std::min((touch ? 44.0f : 34.0f) * unit, box.height / 12.0f);
  y = box.bottom() - 3 * low;
  const Frame& f = bench.floor.view.frame;
  const Pixel middle{f.x + 0.5f * f.width, f.y + 0.5f * f.height};
  const auto view_button = [&](const char* word) {
    const bool pressed = strip_button(bench, word, {box.x, y}, {width, low}, false);
    write_middle(bench, {box.x, y}, {box.x + width, y + low}, bench.theme.text, word);
    y += low;
    return pressed;
  };
  const auto zoom = [&](double factor) {
    bench.floor.view = zoomed(bench.floor.view, middle, factor);
    bench.floor.moved_by_hand = true;
  };
  if (view_button("Nearer")) zoom(1.4);
  if (view_button("Farther")) zoom(1.0 / 1.4);
  if (view_button("Fit")) fit_floor(bench.floor, bench.desk);
}

float show_options(Bench& bench) {
  const Frame& f = bench.floor.view.frame;
  const float pad = 10 * bench.unit;
  Flow flow(bench, f.x + pad, f.x + f.width - pad, f.y + pad);
  switch (bench.desk.tool) {
    case Tool::look: {
      if (!panel::has_drive(bench.desk) || close_up_side(f, bench.unit) == 0.0f) return f.y;
      const float width = text_width(bench, "Hide close-up") + 22 * bench.unit;
      flow.x = flow.left = std::max(flow.left, flow.right - width);
      if (word_button(flow, bench.floor.close_up ? "Hide close-up" : "Close-up"))
        bench.floor.close_up ^= true;
      break;
    }
    case Tool::draw:
      offer_closing(flow);
      offer_width(flow);
      break;
    case Tool::points:
      offer_shape(flow);
      break;
    case Tool::gaps:
      offer_gaps(flow);
      break;
    case Tool::start:
      if (word_button(flow, "Turn the course round", bench.in_step()))
        edit_at_once(bench, Result<Scenario>(with_direction_reversed(bench.desk.scenario, bench.line())));
      break;
  }
  return flow.x > flow.left ? flow.lower() : f.y;
}

std::string_view hint_of(const Bench& bench) {
  const Course& course = bench.course();
  switch (bench.desk.tool) {
    case Tool::look:
      return "Drag the floor to move it, the path to move in time";
    case Tool::draw:
      if (course.closed || !course.pieces.empty())
        return "One stroke draws the course; back at its start it closes";
      return "One stroke draws the course, or carries on from its end";
    case Tool::points:
      if (!course.pieces.empty()) return "Press a piece to choose it, then drag its spots";
      return "Drag points; press the line for a new one, twice: corner";
    case Tool::gaps:
      return "Drag along the line to leave a gap; press twice: removed";
    case Tool::start:
      if (course.closed) return "Drag along the line: the drive starts there";
      return "Drag along the line: what lies before is cut off";
  }
  return {};
}

}  // namespace lw::view
