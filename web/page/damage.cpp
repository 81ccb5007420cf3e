#include "web/page/damage.h"

#include <algorithm>
#include <cmath>
#include <cstring>

namespace lw::page {

namespace {

constexpr std::uint64_t odd = 0x9e3779b97f4a7c15u;  // 2^64 over the golden ratio: spreads neighbouring values

std::uint64_t mixed(std::uint64_t hash, std::uint64_t word) {
  hash = (hash ^ word) * odd;
  return hash ^ (hash >> 29);
}

std::uint64_t signature_of(const ImDrawVert& vertex) {
  std::uint64_t words[2];
  std::memcpy(words, &vertex, sizeof words);  // position and texture coordinates
  return mixed(mixed(vertex.col, words[0]), words[1]);
}

std::uint64_t signature_of(const ImDrawCmd& command) {
  std::uint64_t words[2];
  std::memcpy(words, &command.ClipRect, sizeof words);
  const auto texture = reinterpret_cast<std::uintptr_t>(command.TextureId);
  return mixed(mixed(texture, words[0]), words[1]);
}

/// Changed tiles as boxes: runs within a row of tiles, joined with an equal run in the row above.
std::vector<PixelBox> boxes_of(const std::vector<bool>& changed, int across, int down) {
  std::vector<PixelBox> boxes;
  for (int row = 0; row < down; ++row) {
    for (int column = 0; column < across;) {
      if (!changed[static_cast<std::size_t>(row * across + column)]) {
        ++column;
        continue;
      }
      const int first = column;
      while (column < across && changed[static_cast<std::size_t>(row * across + column)]) ++column;
      const PixelBox run{first * tile_side, row * tile_side, column * tile_side, (row + 1) * tile_side};
      const auto above = std::find_if(boxes.begin(), boxes.end(), [&](const PixelBox& box) {
        return box.bottom == run.top && box.left == run.left && box.right == run.right;
      });
      if (above != boxes.end())
        above->bottom = run.bottom;
      else
        boxes.push_back(run);
    }
  }
  return boxes;
}

}  // namespace

PixelBox overlap(const PixelBox& a, const PixelBox& b) {
  return {std::max(a.left, b.left), std::max(a.top, b.top), std::min(a.right, b.right),
          std::min(a.bottom, b.bottom)};
}

PixelBox box_of(const ImDrawVert& a, const ImDrawVert& b, const ImDrawVert& c, ImVec2 scale) {
  const auto pixel = [](float at) { return static_cast<int>(std::floor(at)); };
  return {pixel(std::min({a.pos.x, b.pos.x, c.pos.x}) * scale.x),
          pixel(std::min({a.pos.y, b.pos.y, c.pos.y}) * scale.y),
          pixel(std::max({a.pos.x, b.pos.x, c.pos.x}) * scale.x) + 1,
          pixel(std::max({a.pos.y, b.pos.y, c.pos.y}) * scale.y) + 1};
}

std::vector<PixelBox> Damage::take(const ImDrawData& data) {
  const ImVec2 scale = data.FramebufferScale;
  const int width = static_cast<int>(data.DisplaySize.x * scale.x),
            height = static_cast<int>(data.DisplaySize.y * scale.y);
  across_ = (width + tile_side - 1) / tile_side;
  down_ = (height + tile_side - 1) / tile_side;
  now_.assign(static_cast<std::size_t>(across_ * down_) + 1, 0);
  now_.back() = mixed(static_cast<std::uint64_t>(width), static_cast<std::uint64_t>(height));

  std::vector<std::uint64_t> vertices;
  const ImDrawList* signed_list = nullptr;
  each_command(data, [&](const ImDrawList& list, const ImDrawCmd& command, const PixelBox& clip) {
    if (&list != signed_list) {
      signed_list = &list;
      vertices.resize(static_cast<std::size_t>(list.VtxBuffer.Size));
      for (int i = 0; i < list.VtxBuffer.Size; ++i)
        vertices[static_cast<std::size_t>(i)] = signature_of(list.VtxBuffer[i]);
    }
    const std::uint64_t common = signature_of(command);
    const ImDrawIdx* index = list.IdxBuffer.Data + command.IdxOffset;
    for (unsigned k = 0; k < command.ElemCount; k += 3) {
      const unsigned a = index[k] + command.VtxOffset, b = index[k + 1] + command.VtxOffset,
                     c = index[k + 2] + command.VtxOffset;
      const ImDrawVert* corner = list.VtxBuffer.Data;
      const PixelBox box = overlap(box_of(corner[a], corner[b], corner[c], scale), clip);
      if (box.empty()) continue;
      const std::uint64_t signature = mixed(mixed(mixed(common, vertices[a]), vertices[b]), vertices[c]);
      for (int row = box.top / tile_side; row <= (box.bottom - 1) / tile_side; ++row) {
        for (int column = box.left / tile_side; column <= (box.right - 1) / tile_side; ++column) {
          std::uint64_t& tile = now_[static_cast<std::size_t>(row * across_ + column)];
          tile = mixed(tile, signature);
        }
      }
    }
  });

  const bool known = before_.size() == now_.size() && before_.back() == now_.back();
  std::vector<bool> changed(now_.size() - 1);
  for (std::size_t i = 0; i < changed.size(); ++i) changed[i] = !known || now_[i] != before_[i];
  before_.swap(now_);
  std::vector<PixelBox> boxes = boxes_of(changed, across_, down_);
  for (PixelBox& box : boxes) box = overlap(box, {0, 0, width, height});
  return boxes;
}

}  // namespace lw::page
