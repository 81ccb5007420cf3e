// Which parts of the screen look different from the frame before.
//
// A browser that draws in software takes about a microsecond a triangle and ten nanoseconds a pixel and
// layer, far more than a frame of 16 ms holds for the whole page. Most frames change little: a cursor, a
// vehicle, one number. So the screen is cut into square tiles, and each tile has a signature: a hash, in
// drawing order, of every triangle that may touch it, with its texture and clip rectangle. A tile whose
// signature stays has the same pixels and is left alone.
//
// Lengths are framebuffer pixels; x right, y down, from the upper left corner.
#pragma once

#include <imgui.h>

#include <cstdint>
#include <vector>

namespace lw::page {

inline constexpr int tile_side = 64;

/// A rectangle of pixels, the far edges not included.
struct PixelBox {
  int left = 0, top = 0, right = 0, bottom = 0;
  bool empty() const { return left >= right || top >= bottom; }
};
PixelBox overlap(const PixelBox& a, const PixelBox& b);

/// Calls visit(list, command, clip box) for every draw command that can be seen, in drawing order.
template <class Visit>
void each_command(const ImDrawData& data, Visit&& visit) {
  const ImVec2 scale = data.FramebufferScale;
  const PixelBox whole{0, 0, static_cast<int>(data.DisplaySize.x * scale.x),
                       static_cast<int>(data.DisplaySize.y * scale.y)};
  for (int i = 0; i < data.CmdListsCount; ++i) {
    const ImDrawList& list = *data.CmdLists[i];
    for (const ImDrawCmd& command : list.CmdBuffer) {
      if (command.UserCallback)
        continue;  // the page sets none but state resets, which the painter does not need
      const PixelBox clip = overlap(
          whole,
          {static_cast<int>(command.ClipRect.x * scale.x), static_cast<int>(command.ClipRect.y * scale.y),
           static_cast<int>(command.ClipRect.z * scale.x), static_cast<int>(command.ClipRect.w * scale.y)});
      if (!clip.empty()) visit(list, command, clip);
    }
  }
}

/// Signatures of the tiles of one screen, from one frame to the next.
class Damage {
 public:
  /// Takes in a frame; returns the boxes that have to be drawn anew: none when nothing changed, the whole
  /// screen after forget(), a change of size, or where most of it changed. Boxes do not overlap.
  std::vector<PixelBox> take(const ImDrawData& data);

  /// What is on screen is no longer known, or textures changed behind their names.
  void forget() { before_.clear(); }

 private:
  int across_ = 0, down_ = 0;
  std::vector<std::uint64_t> now_, before_;
};

/// The pixels that a triangle may touch.
PixelBox box_of(const ImDrawVert& a, const ImDrawVert& b, const ImDrawVert& c, ImVec2 scale);

}  // namespace lw::page
