// What only the panel and the charts remember from frame to frame: nothing in here changes a result.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "engine/scenario/validate.h"
#include "web/page/picture.h"
#include "web/panel/desk.h"
#include "web/panel/strip_picture.h"

namespace lw::panel {

/// The order of the work; each is a stop on the line across the panel.
enum class Step { vehicle, sensors, course, controller, stress, hand_over };
inline constexpr const char* step_names[] = {"Vehicle",    "Sensors", "Course",
                                             "Controller", "Stress",  "Hand over"};

/// Why what was typed into a field was not taken. It stays by the field until the next entry.
struct Refusal {
  std::string path;  // "controller.kp"
  std::string why;   // "between 0 and 100 %"
};

/// The line of a number while its spot is held: it must not change under the finger.
struct HeldSpot {
  unsigned id = 0;  // Dear ImGui's
  double low = 0.0, high = 1.0;
  double exact = 0.0;  // before snapping, for slow movements
};

/// All that the picture of the curves depends on; while it stays, so does the picture.
struct ChartKey {
  std::uint64_t revision = 0, kept_revision = 0;  // 0: none
  double from = 0.0, to = 0.0;                    // s
  int left = 0, top = 0, columns = 0, rows = 0;   // device pixels on the canvas
  float pixels = 1.0f;                            // device pixels in a measure of 1 px
  unsigned shown = 0;
  bool dark = true;
  friend bool operator==(const ChartKey&, const ChartKey&) = default;
};

struct ChartState {
  double from = 0.0, to = 0.0;  // s, what is shown; from == to: the whole drive
  bool open = true;
  unsigned shown = 0x0F;  // bit i: strip i of strips() in charts.h

  std::uint64_t measured = 0;          // the drive that the next two belong to
  std::vector<float> lowest, highest;  // by curve number, over the whole drive, 0 included
  ChartKey drawn;                      // what the picture shows
  Pixels pixels;
  page::Picture picture;
};

struct PanelState {
  Step step = Step::vehicle;
  Refusal refusal;
  std::optional<Fault> fault;  // the first field that keeps the scenario from being driven
  HeldSpot held;
  std::string help;  // path of the field whose meaning is shown below it
  ChartState charts;
  bool pushing = false;  // a finger scrolls the panel
  bool library_open = false;
  float wanted_scale = 1.0f;  // Desk::scale is this, or less where the window is too small for it
  std::string look_kept;      // what was stored last of the page's look
  std::string link_entry;     // a link being typed or pasted
};

}  // namespace lw::panel
