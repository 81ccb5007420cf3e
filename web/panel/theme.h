// Colours and measures of the page, one set for dark rooms and one for daylight and projectors.
//
// The look comes from the work: a matt workshop floor, tape laid on it, and a lamp. Surfaces are flat and
// quiet; what can be gripped is a spot on a line; the steps of the work are stops along one line. Text
// reaches a contrast of at least 7:1 on its surface, faint text 4.5:1 (WCAG 2.1, 1.4.6 and 1.4.3); signals
// differ in lightness as well as hue.
#pragma once

#include <imgui.h>

namespace lw::panel {

struct Theme {
  // surfaces and text
  ImU32 ground;   // behind everything
  ImU32 surface;  // panel, headline, charts
  ImU32 raised;   // what can be pressed
  ImU32 hover;    // the same under a finger
  ImU32 rule;     // separating lines
  ImU32 text;
  ImU32 faint;
  // signals
  ImU32 accent;     // what is chosen or being moved
  ImU32 on_accent;  // text on it
  ImU32 good, bad, warn;
  ImU32 kept;  // the choice to compare with
  // curves
  ImU32 error, p, i, d, steer, left, right, deviation, speed;
  // the floor
  ImU32 bare;  // floor without line
  ImU32 tape;  // the line
  ImU32 tape_edge;
  ImU32 grid;
  ImU32 body;  // the vehicle
  ImU32 body_edge;
};

const Theme& theme(bool dark);

/// Colour of a place on the path by how far off the line it is: share = |deviation| over what counts as far,
/// 0 to 1.
ImU32 deviation_colour(bool dark, double share);

/// `colour` with its opacity multiplied.
ImU32 faded(ImU32 colour, float opacity);

/// Puts colours and measures into Dear ImGui's style. `scale` multiplies lengths, `touch` makes targets tall.
void dress(bool dark, float scale, bool touch);

}  // namespace lw::panel
