// What the tools of the floor work with during one frame, and what they have in common.
#pragma once

#include <imgui.h>

#include <optional>

#include "web/panel/theme.h"
#include "web/view/floor_view.h"

namespace lw::view {

/// The hand this frame. Positions in CSS pixels.
struct Pointer {
  Pixel at;
  bool over = false;      // above the floor, and nothing lies between
  bool pressed = false;   // just put down
  bool held = false;      // down, since it was pressed on the floor
  bool released = false;  // just lifted
  bool twice = false;     // pressed twice in the same place
  bool remove = false;    // the Delete or Backspace key
  float reach = 10;       // px: how near is near enough, larger for fingers
};

struct Bench {
  FloorView& floor;
  panel::Desk& desk;
  ImDrawList& draw;
  const panel::Theme& theme;
  Pointer pointer;
  float unit = 1;  // px of one CSS pixel of the design at this text size

  const Course& course() const { return desk.scenario.course; }
  const Centreline& line() const { return desk.good.plan.ground->line; }
  bool idle() const { return floor.held.grip == Grip::nothing; }
  /// The course on screen is the one that was driven, so that arc lengths of the line are those of the
  /// course.
  bool in_step() const { return panel::has_drive(desk) && !desk.error; }
};

inline ImVec2 vec(Pixel p) { return {p.x, p.y}; }
inline Pixel pixel(ImVec2 p) { return {p.x, p.y}; }
float distance(Pixel a, Pixel b);
Pixel screen_of(const Bench& bench, Point mm);
Pixel screen_of(const Bench& bench, const CoursePoint& m);

/// Takes hold: an edit begins (but for moving the floor and the cursor), from the scenario as it is.
Held& take(Bench& bench, Grip grip, int index = -1);
/// Whether the hand has moved enough since it took hold; from then on always.
bool moving(Bench& bench);
/// The scenario becomes this one; an error becomes the refusal and changes nothing.
void attempt(Bench& bench, const Result<Scenario>& scenario);
/// One whole step of undo; an error is said aloud.
bool edit_at_once(Bench& bench, const Result<Scenario>& scenario);
/// Lets go. A course that cannot be driven springs back to the last one that could.
void let_go(Bench& bench);

/// The nearest place of the line to the pointer, m, when it is within reach of the tape.
std::optional<double> line_under(const Bench& bench, Pixel p);
/// The place of `line` nearest to a point of the floor, looked for around `s` first, so that a crossing does
/// not lead astray; m.
double followed(const Centreline& line, double s, Point mm);

// One frame of each tool: takes what the hand does and draws its handles.
void work_look(Bench& bench);
void work_draw(Bench& bench);
void work_points(Bench& bench);  // drawn points, or pieces where the course is made of them
void work_pieces(Bench& bench);
void work_gaps(Bench& bench);
void work_start(Bench& bench);

/// The part of every tool: an empty place was pressed, and moves the floor with the hand.
void grip_floor(Bench& bench);

// Handles, in the manner of the page: a spot for what can be gripped.
void draw_spot(const Bench& bench, Pixel at, bool chosen, bool near, bool square = false);
void draw_along(const Bench& bench, double from, double to, ImU32 colour, float half);

}  // namespace lw::view
