// Triangles ready for the screen: what is drawn again and again without having changed.
//
// Edges are softened by a rim one pixel wide that fades out, as Dear ImGui does for its own shapes. Parts
// that lie wholly outside the clip box are left out when they are added.
#pragma once

#include <imgui.h>

#include <cstdint>
#include <span>
#include <vector>

#include "web/view/transform.h"

namespace lw::view {

struct Mesh {
  struct Vertex {
    float x, y;
    ImU32 colour;
  };
  std::vector<Vertex> vertices;
  std::vector<std::uint32_t> indices;
  Frame clip{-1e9f, -1e9f, 2e9f, 2e9f};
  void clear() { vertices.clear(), indices.clear(); }
};

/// A place along a ribbon: its middle, the unit vector to its left, half its width in px, its colour there.
struct RibbonPoint {
  Pixel at;
  float left_x = 0, left_y = 0;
  float half = 1;
  ImU32 colour = 0;
};

/// A band through the points, cut square at its ends.
void add_ribbon(Mesh& mesh, std::span<const RibbonPoint> points);

/// A band of constant width through pixels that lie close together: the sides come from the neighbours.
void add_trail(Mesh& mesh, std::span<const Pixel> points, std::span<const ImU32> colours, float half);

void add_disc(Mesh& mesh, Pixel middle, float radius, ImU32 colour);

/// Copies the mesh to a draw list.
void put(const Mesh& mesh, ImDrawList& draw);

}  // namespace lw::view
