// The smallest application behind web/page_app.h: one window that fills the screen.
#include <imgui.h>

#include <string>

#include "web/host.h"
#include "web/page/typeface.h"
#include "web/page_app.h"

namespace lw::app {
namespace {

std::string last = "nothing yet";
std::string field(64, '\0');
int pressed = 0;

}  // namespace

void start() {}

bool frame() {
  ImGui::SetNextWindowPos({0, 0});
  ImGui::SetNextWindowSize(ImGui::GetIO().DisplaySize);
  ImGui::Begin("Linewright", nullptr, ImGuiWindowFlags_NoDecoration | ImGuiWindowFlags_NoSavedSettings);
  ImGui::PushFont(page::typeface().headline);
  ImGui::TextUnformatted("Linewright 0123456789 1111111111");
  ImGui::PopFont();
  ImGui::TextUnformatted(
      "\u2190 \u2192 \u2191 \u2193 \u00b7 \u00b0 \u00b1 \u00d7 \u2264 \u2265 \u2212 \u2026 \u03c4 \u03c9 "
      "\u0394");
  if (ImGui::Button("Press")) ++pressed;
  ImGui::Text("pressed %d", pressed);
  ImGui::InputText("Field", field.data(), field.size());
  if (ImGui::Button("Copy")) host::copy_text("copied text");
  if (ImGui::Button("Save")) host::save_file("note.txt", "saved text", "text/plain");
  if (ImGui::Button("Open")) host::choose_file(".txt");
  if (ImGui::Button("Echo")) host::start_job(1, "echo from the worker");
  ImGui::Text("last: %s", last.c_str());
  ImGui::End();
  return false;
}

void fragment_changed(std::string_view fragment) { last = "fragment " + std::string(fragment); }
void file_opened(std::string_view name, std::string_view bytes) {
  last = "file " + std::string(name) + " " + std::string(bytes);
}
void file_refused(std::string_view name, std::string_view why) {
  last = "refused " + std::string(name) + " " + std::string(why);
}
void text_pasted(std::string_view text) { last = "pasted " + std::string(text); }
void pinch(const Pinch& pinch) { last = "pinch " + std::to_string(pinch.scale); }
void job_message(int, std::string_view bytes) { last = "job " + std::string(bytes); }
void job_ended(int, std::string_view error) { last += " ended " + std::string(error); }

}  // namespace lw::app
