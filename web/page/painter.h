// Draws Dear ImGui's triangles with OpenGL ES 3, anew only where the screen changed (damage.h).
//
// Besides that it saves what costs most in software: large plain rectangles are cleared rather than shaded,
// and no state is ever asked back, since each such question waits for the graphics process. Colours blend as
// source over what lies there. The canvas has to keep its pixels from frame to frame (page.js asks for that).
// A texture whose pixels change has to change its name as well, or call painter_forget().
#pragma once

#include <imgui.h>

namespace lw::page {

/// Compiles the shader; false when the browser cannot. Once, with a current context.
bool painter_start();

/// Puts the typeface's picture into a texture, in place of the one before.
void painter_take_typeface();

/// The screen's pixels are lost or out of date: the next frame is drawn whole.
void painter_forget();

/// Draws what changed since the last call. False when nothing did, and the screen can stay as it is.
bool painter_draw(const ImDrawData& data);

}  // namespace lw::page
