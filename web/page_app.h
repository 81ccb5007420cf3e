// What the page calls: the application behind the canvas, one function for each thing that can happen to it.
//
// web/page/main.cpp owns the window, the frame loop and Dear ImGui; it calls these. The application draws
// with Dear ImGui inside frame() and asks the browser for things through web/host.h. Nothing in here knows a
// browser, so that the tests call the same functions natively (tests/web/hand.h).
//
// Lengths are CSS pixels, the unit of ImGui::GetIO().DisplaySize; x right, y down, from the canvas's corner.
// Text is UTF-8; a view is valid during the call alone.
#pragma once

#include <string_view>

namespace lw::app {

/// Called once, after Dear ImGui and the typeface are ready and before the first frame(). Called again (tests
/// do, each with a fresh Dear ImGui) it begins anew, with nothing left of before.
void start();

/// Draws one frame, between ImGui::NewFrame() and ImGui::Render(). Returns true when the next frame will look
/// different without any event (playback, an animation): the page then draws again at the screen's next
/// refresh. After an event (mouse, key, touch, file, job, resize) the page draws a few frames by itself.
bool frame();

/// How large text is to be, 1 = the sizes of web/page/typeface.h. Asked before each frame; the page
/// rasterises the typeface anew when it changes.
float text_scale();

/// The text behind # in the address, without #: at the start (when there is one) and when it changes later by
/// a link opened in the same tab. Not called for what host::set_fragment() wrote.
void fragment_changed(std::string_view fragment);

/// A file that was chosen after host::choose_file(), or dropped on the page. `name` has no folder.
void file_opened(std::string_view name, std::string_view bytes);

/// A file that could not be taken (too long, unreadable), and why, as a sentence for the user.
void file_refused(std::string_view name, std::string_view why);

/// Text pasted while no text field has the keyboard, such as a link or a whole scenario.
void text_pasted(std::string_view text);

/// Two fingers on the canvas. From began to ended, the mouse that Dear ImGui sees is released: what the first
/// finger may have begun (a stroke, a drag) before the second came down is to be dropped at began.
struct Pinch {
  enum Phase { began, moved, ended } phase = began;
  float x = 0, y = 0;              // middle of the two fingers
  float moved_x = 0, moved_y = 0;  // how far that middle went since the last call
  float scale = 1;                 // distance of the fingers over their distance at the last call; > 0
};
void pinch(const Pinch& pinch);

/// A message of a job begun by host::start_job(), as web/page/worker_app.h sent it.
void job_message(int job, std::string_view bytes);

/// A job is over: done, or (`error` not empty) broken off by a fault. Not called after host::cancel_job().
void job_ended(int job, std::string_view error);

}  // namespace lw::app
