// A picture whose pixels are worked out here rather than drawn as triangles, put on the graphics side as a
// texture. picture.cpp does so in the browser, picture_null.cpp plays it in the native tests.
//
// The painter draws anew only what changed in the triangles of a frame (damage.h), and the triangles of a
// picture know of it by its texture's number alone. So two textures take turns: new pixels, another number.
#pragma once

#include <imgui.h>

#include <cstdint>

namespace lw::page {

struct Picture {
  struct Side {
    unsigned texture = 0;  // 0: none yet
    int width = 0, height = 0;
  } sides[2];
  int front = 0;  // the side that is shown
};

/// Shows width x height pixels (1 to 4096 each; rows from the top, bytes red, green, blue, opacity, colours
/// not multiplied by opacity) and returns what ImDrawList::AddImage takes, good until the next call. Sampled
/// without smoothing: it is meant to lie pixel by pixel on the screen.
ImTextureID show(Picture& picture, int width, int height, const std::uint32_t* pixels);

/// What show() returned last; null when there is nothing yet.
inline ImTextureID texture_of(const Picture& picture) {
  return reinterpret_cast<ImTextureID>(static_cast<std::uintptr_t>(picture.sides[picture.front].texture));
}

}  // namespace lw::page
