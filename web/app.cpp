// The application: one desk, one frame after another. The functions are those of web/page_app.h.
#include <imgui.h>

#include <algorithm>
#include <memory>

#include "engine/scenario/validate.h"
#include "web/host.h"
#include "web/page_app.h"
#include "web/panel/charts.h"
#include "web/panel/files.h"
#include "web/panel/headline.h"
#include "web/panel/layout.h"
#include "web/panel/panel.h"
#include "web/panel/play.h"
#include "web/view/floor_view.h"

namespace lw::app {
namespace {

using panel::Box;

struct App {
  panel::Desk desk;
  panel::PanelState state;
  view::FloorView floor;
  std::vector<panel::LibraryEntry> library;
  double last_frame = 0.0;  // host::seconds()
  bool touched = false;     // a finger was seen
  bool was_playing = false;
  bool unsaved = false;
  panel::Box pinched;  // where the two fingers came down
};

App& the_app() {
  static std::unique_ptr<App> app = std::make_unique<App>();
  return *app;
}

constexpr std::string_view first_file = "long_mixed.toml";

/// What is on screen at the very first visit.
Scenario first_scenario(const std::vector<panel::LibraryEntry>& library) {
  for (const panel::LibraryEntry& entry : library) {
    if (entry.name == first_file) return entry.scenario;
  }
  Scenario oval;
  oval.title = "Oval";
  const Piece straight{800.0, {}, {}}, bend{{}, 350.0, 180.0};
  oval.course.pieces = {straight, bend, straight, bend};
  return oval;
}

/// The whole canvas is one window without frame; every part draws within its box of it.
void begin_canvas(const panel::Desk& desk) {
  const ImVec2 size = ImGui::GetIO().DisplaySize;
  ImGui::SetNextWindowPos({0, 0});
  ImGui::SetNextWindowSize(size);
  ImGui::Begin("page", nullptr,
               ImGuiWindowFlags_NoDecoration | ImGuiWindowFlags_NoMove | ImGuiWindowFlags_NoSavedSettings |
                   ImGuiWindowFlags_NoBringToFrontOnFocus | ImGuiWindowFlags_NoScrollWithMouse);
  const panel::Theme& t = panel::theme(desk.dark);
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const panel::Layout& layout = desk.layout;
  for (const Box& box : {layout.top, layout.play, layout.charts, layout.panel}) {
    draw.AddRectFilled({box.x, box.y}, {box.right(), box.bottom()}, t.surface);
  }
}

/// Fine lines between the parts.
void draw_joints(const panel::Desk& desk) {
  const panel::Theme& t = panel::theme(desk.dark);
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const panel::Layout& layout = desk.layout;
  const auto across = [&](const Box& box) { draw.AddLine({box.x, box.y}, {box.right(), box.y}, t.rule); };
  across(layout.floor);
  across(layout.play);
  across(layout.charts);
  if (layout.upright) {
    across(layout.panel);
  } else {
    draw.AddLine({layout.panel.x, 0}, {layout.panel.x, layout.panel.bottom()}, t.rule);
  }
}

void pass_time(App& app) {
  panel::Desk& desk = app.desk;
  desk.now = host::seconds();
  // Before the first frame of playback the page was at rest, for however long.
  const double elapsed = app.was_playing ? std::clamp(desk.now - app.last_frame, 0.0, 1.0) : 0.0;
  app.last_frame = desk.now;
  app.was_playing = desk.playback.playing;
  desk.animate = false;
  panel::play_on(desk, elapsed);
}

void drive_again(App& app) {
  panel::Desk& desk = app.desk;
  if (!desk.touched) return;
  panel::redrive(desk);
  app.unsaved = true;
  app.state.fault = desk.error ? find_fault(desk.scenario) : std::nullopt;
}

void draw_parts(App& app) {
  panel::Desk& desk = app.desk;
  panel::Ui ui{desk, app.state};
  panel::take_keys(ui);
  panel::draw_panel(ui, desk.layout.panel, app.library);
  drive_again(app);  // what the panel changed is driven before anything of it is drawn
  view::show_floor(app.floor, desk);
  drive_again(app);
  panel::draw_headline(ui, desk.layout.top);
  panel::draw_play(ui, desk.layout.play);
  panel::draw_charts(ui, desk.layout.charts);
  panel::draw_notice(ui, desk.layout.floor);
}

}  // namespace

void start() {
  the_app() = App();
  App& app = the_app();
  app.library = panel::read_library();
  panel::restore_look(app.desk, app.state);
  app.desk.scenario = panel::kept_in_browser().value_or(first_scenario(app.library));
}

bool frame() {
  App& app = the_app();
  panel::Desk& desk = app.desk;
  const ImGuiIO& io = ImGui::GetIO();
  app.touched = app.touched || io.MouseSource == ImGuiMouseSource_TouchScreen;
  pass_time(app);
  desk.scale = std::min(app.state.wanted_scale, panel::largest_scale(io.DisplaySize.x, io.DisplaySize.y));
  desk.layout =
      panel::arrange(io.DisplaySize.x, io.DisplaySize.y, desk.scale, app.touched, app.state.charts.open);
  panel::dress(desk.dark, desk.scale, desk.layout.touch);
  drive_again(app);
  begin_canvas(desk);
  draw_parts(app);
  draw_joints(desk);
  ImGui::End();
  if (app.unsaved && !desk.history.open) {
    panel::keep_in_browser(desk);
    app.unsaved = false;
  }
  panel::keep_look(desk, app.state);
  return desk.animate || desk.touched;
}

float text_scale() { return the_app().desk.scale; }

void fragment_changed(std::string_view fragment) { panel::take_text(the_app().desk, fragment, "link"); }

void file_opened(std::string_view name, std::string_view bytes) {
  panel::take_text(the_app().desk, bytes, name);
}

void file_refused(std::string_view name, std::string_view why) {
  panel::complain(the_app().desk, "Not opened. " + std::string(name) + ": " + std::string(why));
}

void text_pasted(std::string_view text) { panel::take_text(the_app().desk, text, "pasted text"); }

void pinch(const Pinch& pinch) {
  App& app = the_app();
  panel::Desk& desk = app.desk;
  if (pinch.phase == Pinch::began) {
    app.pinched = desk.layout.charts.holds(pinch.x, pinch.y) ? desk.layout.charts : Box{};
  }
  app.touched = true;
  if (app.pinched.width > 0) {
    panel::Ui ui{desk, app.state};
    panel::pinch_charts(ui, app.pinched, pinch);
  } else {
    view::pinch_floor(app.floor, desk, pinch);
  }
}

void job_message(int, std::string_view) {}

void job_ended(int, std::string_view) {}

}  // namespace lw::app
