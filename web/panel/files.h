// Scenarios in and out: files, links, the collection that comes with the page, and what this browser keeps.
//
// Whatever comes in goes through the engine's readers; what they refuse is told with where, what and why, and
// nothing on screen changes. What comes in is one step of undo.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "web/panel/desk.h"
#include "web/panel/panel_state.h"

namespace lw::panel {

/// Takes a scenario text or a link. `name` is for messages ("aisle.toml", "pasted text").
bool take_text(Desk& desk, std::string_view text, std::string_view name);

/// The whole address of this page with the scenario in it. Errors: those of encode_link.
Result<std::string> link_of(const Scenario& scenario);

void copy_link(Desk& desk);
void save_scenario(Desk& desk);
void save_trace(Desk& desk);

/// "Seedling cart, aisle loop" -> "seedling-cart-aisle-loop"; "scenario" when nothing is left.
std::string file_stem(std::string_view title);

/// A scenario that comes with the page.
struct LibraryEntry {
  std::string name;  // of its file
  Scenario scenario;
};
/// Read from what was put into the page when it was built; in order of the file names.
std::vector<LibraryEntry> read_library();

/// Keeps the scenario in this browser and in the address. Called when an edit is over.
void keep_in_browser(Desk& desk);
/// The scenario of the last visit; nothing when there is none, or it cannot be read any more.
std::optional<Scenario> kept_in_browser();

/// How the page looks, kept apart from scenarios. Stores only what differs from what was stored last.
void keep_look(const Desk& desk, PanelState& state);
void restore_look(Desk& desk, PanelState& state);

}  // namespace lw::panel
