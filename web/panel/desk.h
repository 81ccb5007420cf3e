// The desk: everything the page holds at one moment, shared by the panel, the charts and the floor.
//
// One plain struct and free functions. Whoever changes the scenario says so:
//
//   begin_edit(desk);             // a finger goes down on a slider, a point is grabbed
//   desk.scenario.line_mm = ...;  // as often as it moves,
//   touch(desk);                  // each time followed by this
//   end_edit(desk);               // the finger is lifted: all of it is one step of undo
//
// or, for what happens at once, edit(desk, [](Scenario& s) { ... }). web/app.cpp calls redrive() once a
// frame: when something was touched, the whole course is driven again before anything is drawn. A scenario
// that cannot be driven leaves the last good drive on screen, with `error` saying where, what and why;
// nothing is ever lost.
//
// Who draws where: web/app.cpp works out `layout`, and calls each part with its box. Boxes are CSS pixels
// from the canvas's corner, y down. Everything on the floor is metres or mm as in the engine, y up.
#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "engine/drive/drive.h"
#include "engine/drive/plan.h"
#include "engine/drive/trace.h"
#include "engine/scenario/scenario.h"

namespace lw::panel {

/// A rectangle on the canvas, CSS pixels.
struct Box {
  float x = 0, y = 0, width = 0, height = 0;
  float right() const { return x + width; }
  float bottom() const { return y + height; }
  bool holds(float px, float py) const { return px >= x && px < right() && py >= y && py < bottom(); }
};

/// Where the parts lie this frame; worked out by arrange() in web/panel/layout.h.
struct Layout {
  bool upright = false;  // panel below the floor (portrait), not beside it
  bool touch = false;    // targets of at least 40 px
  Box top;               // headline and key figures
  Box floor;             // the floor and its tools: the largest
  Box play;              // playback, below the floor
  Box charts;
  Box panel;
};

/// A drive that was computed without error, and all that is drawn from it.
struct GoodDrive {
  Scenario scenario;         // what was driven
  std::uint64_t ground = 0;  // ground_key(scenario)
  Plan plan;                 // plan.ground is null before the first good drive
  Trace trace;
  Summary summary;
  std::string headline;
  std::uint64_t hash = 0;      // trace_hash
  std::uint64_t revision = 0;  // counts good drives; 0 = none yet. For what is cached from a drive
};

/// The choice to compare with.
struct Kept {
  Scenario scenario;
  Trace trace;
  Summary summary;
  std::string headline;
  std::uint64_t revision = 0;  // of the good drive that was kept, for caches
};

/// Steps of undo. A step is the scenario before it.
struct History {
  std::vector<Scenario> past, future;
  std::optional<Scenario> open;  // before the edit that is going on
};
inline constexpr std::size_t most_steps = 200;

/// What a finger on the floor does.
enum class Tool { look, draw, points, gaps, start };

/// What is chosen on the floor or in the panel's lists: indices into the scenario's course, -1 = none.
struct Selection {
  int point = -1, piece = -1, gap = -1;
};

/// Time along the drive, the same for charts, floor and playback.
struct Playback {
  double cursor = 0.0;  // s, 0 to the end of the good drive
  bool playing = false;
  double rate = 1.0;  // seconds of drive a second
};
inline constexpr double play_rates[] = {0.25, 0.5, 1.0, 2.0, 4.0, 8.0};

/// A short line that goes away with the first frame after `until` (a page at rest draws none), or (bad) stays
/// until the next one or until it is closed.
struct Notice {
  std::string text;
  bool bad = false;
  double until = 0.0;  // on the clock of Desk::now
};

inline constexpr float least_scale = 0.85f, most_scale = 1.6f;

struct Desk {
  Scenario scenario;  // on screen; may be one that cannot be driven
  bool touched = true;
  History history;

  GoodDrive good;
  std::optional<Error> error;  // why `scenario` could not be driven; what is drawn is `good`
  std::optional<Kept> kept;
  bool show_kept = true;

  Playback playback;
  Tool tool = Tool::look;
  Selection selection;
  Layout layout;

  bool dark = true;
  float scale = 1.0f;  // of text and targets, by choice: least_scale to most_scale
  Notice notice;
  double now = 0.0;      // s, host::seconds() at the start of the frame
  bool animate = false;  // set during a frame by whoever will look different in the next without an event
};

// ---- edits -----------------------------------------------------------------------------------------------
void begin_edit(Desk& desk);   // does nothing while an edit is going on
void touch(Desk& desk);        // the scenario was changed, within an edit
void end_edit(Desk& desk);     // no step when nothing differs
void cancel_edit(Desk& desk);  // the scenario goes back to what it was at begin_edit

/// One whole step: `change` is called with the scenario.
template <class Change>
void edit(Desk& desk, Change&& change) {
  end_edit(desk);
  begin_edit(desk);
  change(desk.scenario);
  touch(desk);
  end_edit(desk);
}

/// A whole other scenario takes the place of the one on screen, as one step. Selection and cursor start anew.
void replace(Desk& desk, Scenario scenario);

bool can_undo(const Desk& desk);
bool can_redo(const Desk& desk);
void undo(Desk& desk);
void redo(Desk& desk);

// ---- the drive -------------------------------------------------------------------------------------------
/// Drives again when something was touched. The ground is built anew only when its key changed.
void redrive(Desk& desk);

bool has_drive(const Desk& desk);

/// The row of the trace that holds at time t (s): the last one at or before it. 0 when the trace is empty.
std::size_t row_at(const Trace& trace, double t);

/// Pose and figures between two rows at time t, for drawing. The angle is interpolated as it is unwrapped.
TraceRow between_rows(const Trace& trace, double t);

/// Moves the cursor, held to the drive; `t` in s.
void set_cursor(Desk& desk, double t);

/// Lets `elapsed` seconds of playback go by; stops at the end.
void play_on(Desk& desk, double elapsed);

// ---- the kept choice -------------------------------------------------------------------------------------
void keep(Desk& desk);
void drop_kept(Desk& desk);

// ---- notices ---------------------------------------------------------------------------------------------
void say(Desk& desk, std::string text);
void complain(Desk& desk, std::string text);

}  // namespace lw::panel
