#include "web/view/mesh.h"

#include <algorithm>
#include <cmath>

namespace lw::view {
namespace {

constexpr float rim = 0.5f;  // px to either side of the true edge

ImU32 clear_of(ImU32 colour) { return colour & ~IM_COL32_A_MASK; }

/// Whether the box around two places with `reach` px around them misses the clip box.
bool outside(const Frame& clip, Pixel a, Pixel b, float reach) {
  return std::max(a.x, b.x) + reach < clip.x || std::min(a.x, b.x) - reach > clip.x + clip.width ||
         std::max(a.y, b.y) + reach < clip.y || std::min(a.y, b.y) - reach > clip.y + clip.height;
}

void add_quad(Mesh& mesh, std::uint32_t a, std::uint32_t b, std::uint32_t c, std::uint32_t d) {
  for (const std::uint32_t index : {a, b, c, a, c, d}) mesh.indices.push_back(index);
}

/// The four places across the band: rim, edge, edge, rim.
std::uint32_t add_section(Mesh& mesh, const RibbonPoint& p) {
  const auto first = static_cast<std::uint32_t>(mesh.vertices.size());
  const float inner = std::max(p.half - rim, 0.0f), outer = p.half + rim;
  const auto add = [&](float offset, ImU32 colour) {
    mesh.vertices.push_back({p.at.x + offset * p.left_x, p.at.y + offset * p.left_y, colour});
  };
  add(outer, clear_of(p.colour));
  add(inner, p.colour);
  add(-inner, p.colour);
  add(-outer, clear_of(p.colour));
  return first;
}

}  // namespace

void add_ribbon(Mesh& mesh, std::span<const RibbonPoint> points) {
  bool open = false;
  std::uint32_t before = 0;
  for (std::size_t i = 1; i < points.size(); ++i) {
    const RibbonPoint& a = points[i - 1];
    const RibbonPoint& b = points[i];
    if (outside(mesh.clip, a.at, b.at, std::max(a.half, b.half) + 1.0f)) {
      open = false;
      continue;
    }
    if (!open) before = add_section(mesh, a);
    const std::uint32_t now = add_section(mesh, b);
    for (std::uint32_t k = 0; k < 3; ++k) add_quad(mesh, before + k, before + k + 1, now + k + 1, now + k);
    before = now;
    open = true;
  }
}

void add_trail(Mesh& mesh, std::span<const Pixel> points, std::span<const ImU32> colours, float half) {
  std::vector<RibbonPoint> ribbon(points.size());
  float left_x = 0, left_y = -1;
  for (std::size_t i = 0; i < points.size(); ++i) {
    const Pixel a = points[i > 0 ? i - 1 : 0], b = points[std::min(i + 1, points.size() - 1)];
    const float dx = b.x - a.x, dy = b.y - a.y, length = std::sqrt(dx * dx + dy * dy);
    if (length > 1e-3f) left_x = dy / length, left_y = -dx / length;
    ribbon[i] = {points[i], left_x, left_y, half, colours.size() == 1 ? colours[0] : colours[i]};
  }
  add_ribbon(mesh, ribbon);
}

void add_disc(Mesh& mesh, Pixel middle, float radius, ImU32 colour) {
  if (outside(mesh.clip, middle, middle, radius + 1.0f)) return;
  const int sides = std::clamp(static_cast<int>(4.0f + 2.5f * std::sqrt(radius)), 8, 90);
  const auto centre = static_cast<std::uint32_t>(mesh.vertices.size());
  mesh.vertices.push_back({middle.x, middle.y, colour});
  for (int i = 0; i < sides; ++i) {
    const float angle = 6.2831853f * static_cast<float>(i) / static_cast<float>(sides);
    const float x = std::cos(angle), y = std::sin(angle), inner = std::max(radius - rim, 0.0f);
    mesh.vertices.push_back({middle.x + inner * x, middle.y + inner * y, colour});
    mesh.vertices.push_back({middle.x + (radius + rim) * x, middle.y + (radius + rim) * y, clear_of(colour)});
  }
  for (int i = 0; i < sides; ++i) {
    const std::uint32_t a = centre + 1 + 2 * static_cast<std::uint32_t>(i);
    const std::uint32_t b = centre + 1 + 2 * static_cast<std::uint32_t>((i + 1) % sides);
    for (const std::uint32_t index : {centre, a, b}) mesh.indices.push_back(index);
    add_quad(mesh, a, a + 1, b + 1, b);
  }
}

void put(const Mesh& mesh, ImDrawList& draw) {
  if (mesh.indices.empty()) return;
  draw.PrimReserve(static_cast<int>(mesh.indices.size()), static_cast<int>(mesh.vertices.size()));
  const ImVec2 white = ImGui::GetFontTexUvWhitePixel();
  const auto base = static_cast<ImDrawIdx>(draw._VtxCurrentIdx);
  for (const std::uint32_t index : mesh.indices) draw.PrimWriteIdx(static_cast<ImDrawIdx>(base + index));
  for (const Mesh::Vertex& v : mesh.vertices) draw.PrimWriteVtx({v.x, v.y}, white, v.colour);
}

}  // namespace lw::view
