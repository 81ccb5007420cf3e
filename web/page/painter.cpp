#include "web/page/painter.h"

#include <GLES3/gl3.h>

#include <cmath>
#include <cstddef>
#include <vector>

#include "web/page/damage.h"

namespace lw::page {

namespace {

constexpr int plain_side = 32;  // pixels; smaller plain rectangles are cheaper among the other triangles

struct Painter {
  GLuint program = 0, vertices = 0, layout = 0, typeface = 0;
  GLint to_clip = -1;
  Damage damage;
  std::vector<ImDrawVert> batch;  // triangles waiting to be drawn, three corners each
  GLuint batch_texture = 0;
  PixelBox batch_clip;
  int height = 0;  // of the framebuffer
};
Painter& painter() {
  static Painter one;
  return one;
}

constexpr const char* vertex_shader = R"(#version 300 es
precision highp float;
layout(location = 0) in vec2 position;
layout(location = 1) in vec2 texture_at;
layout(location = 2) in vec4 colour;
uniform vec4 to_clip;
out vec2 at;
out vec4 tint;
void main() {
  at = texture_at;
  tint = colour;
  gl_Position = vec4(position * to_clip.xy + to_clip.zw, 0.0, 1.0);
})";

constexpr const char* pixel_shader = R"(#version 300 es
precision highp float;
uniform sampler2D picture;
in vec2 at;
in vec4 tint;
layout(location = 0) out vec4 pixel;
void main() { pixel = tint * texture(picture, at); })";

GLuint compiled(GLenum kind, const char* text) {
  const GLuint shader = glCreateShader(kind);
  glShaderSource(shader, 1, &text, nullptr);
  glCompileShader(shader);
  return shader;
}

void set_scissor(const PixelBox& box) {
  glScissor(box.left, painter().height - box.bottom, box.right - box.left, box.bottom - box.top);
}

void flush() {
  Painter& p = painter();
  if (p.batch.empty()) return;
  set_scissor(p.batch_clip);
  glBindTexture(GL_TEXTURE_2D, p.batch_texture);
  const auto bytes = static_cast<GLsizeiptr>(p.batch.size() * sizeof(ImDrawVert));
  glBufferData(GL_ARRAY_BUFFER, bytes, p.batch.data(), GL_STREAM_DRAW);
  glDrawArrays(GL_TRIANGLES, 0, static_cast<GLsizei>(p.batch.size()));
  p.batch.clear();
}

bool same(const PixelBox& a, const PixelBox& b) {
  return a.left == b.left && a.top == b.top && a.right == b.right && a.bottom == b.bottom;
}

/// Two triangles that make an opaque rectangle of one colour along the axes, as Dear ImGui writes one: 0 1 2,
/// 0 2 3.
bool plain_rectangle(const ImDrawVert* list, const ImDrawIdx* index, ImVec2 white) {
  if (index[3] != index[0] || index[4] != index[2]) return false;
  const ImDrawVert &a = list[index[0]], &b = list[index[1]], &c = list[index[2]], &d = list[index[5]];
  for (const ImDrawVert* corner : {&a, &b, &c, &d}) {
    if (corner->col != a.col || corner->uv.x != white.x || corner->uv.y != white.y) return false;
  }
  return (a.col >> IM_COL32_A_SHIFT) == 255 && a.pos.y == b.pos.y && b.pos.x == c.pos.x &&
         c.pos.y == d.pos.y && d.pos.x == a.pos.x;
}

/// The pixels whose middles lie within the rectangle of two opposite corners: those that rasterising it would
/// fill.
PixelBox filled_by(const ImDrawVert& a, const ImDrawVert& c, ImVec2 scale) {
  const auto first = [](float edge) { return static_cast<int>(std::ceil(edge - 0.5f)); };
  return {first(a.pos.x * scale.x), first(a.pos.y * scale.y), first(c.pos.x * scale.x),
          first(c.pos.y * scale.y)};
}

void clear(const PixelBox& box, ImU32 colour) {
  flush();
  set_scissor(box);
  const ImVec4 c = ImGui::ColorConvertU32ToFloat4(colour);
  glClearColor(c.x, c.y, c.z, c.w);
  glClear(GL_COLOR_BUFFER_BIT);
}

void draw_command(const ImDrawList& list, const ImDrawCmd& command, const PixelBox& clip, ImVec2 scale) {
  Painter& p = painter();
  const auto texture = static_cast<GLuint>(reinterpret_cast<std::uintptr_t>(command.TextureId));
  const ImVec2 white = ImGui::GetIO().Fonts->TexUvWhitePixel;
  const ImDrawVert* corner = list.VtxBuffer.Data + command.VtxOffset;
  const ImDrawIdx* index = list.IdxBuffer.Data + command.IdxOffset;
  for (unsigned k = 0; k < command.ElemCount; k += 3, index += 3) {
    if (k + 6 <= command.ElemCount && texture == p.typeface && plain_rectangle(corner, index, white)) {
      const PixelBox box = overlap(filled_by(corner[index[0]], corner[index[2]], scale), clip);
      if (box.right - box.left >= plain_side && box.bottom - box.top >= plain_side) {
        clear(box, corner[index[0]].col);
        k += 3, index += 3;
        continue;
      }
    }
    const ImDrawVert &a = corner[index[0]], &b = corner[index[1]], &c = corner[index[2]];
    if (overlap(box_of(a, b, c, scale), clip).empty()) continue;
    if (texture != p.batch_texture || !same(clip, p.batch_clip)) {
      flush();
      p.batch_texture = texture;
      p.batch_clip = clip;
    }
    p.batch.insert(p.batch.end(), {a, b, c});
  }
}

void draw_box(const ImDrawData& data, const PixelBox& box) {
  clear(box, IM_COL32(0, 0, 0, 255));
  each_command(data, [&](const ImDrawList& list, const ImDrawCmd& command, const PixelBox& clip) {
    const PixelBox seen = overlap(clip, box);
    if (!seen.empty()) draw_command(list, command, seen, data.FramebufferScale);
  });
  flush();
}

void set_state(const ImDrawData& data) {
  Painter& p = painter();
  p.height = static_cast<int>(data.DisplaySize.y * data.FramebufferScale.y);
  glViewport(0, 0, static_cast<int>(data.DisplaySize.x * data.FramebufferScale.x), p.height);
  glEnable(GL_SCISSOR_TEST);
  glEnable(GL_BLEND);
  glBlendFuncSeparate(GL_SRC_ALPHA, GL_ONE_MINUS_SRC_ALPHA, GL_ONE, GL_ONE_MINUS_SRC_ALPHA);
  glUseProgram(p.program);
  glUniform4f(p.to_clip, 2.0f / data.DisplaySize.x, -2.0f / data.DisplaySize.y, -1.0f, 1.0f);
  glBindVertexArray(p.layout);
  glBindBuffer(GL_ARRAY_BUFFER, p.vertices);
  glActiveTexture(GL_TEXTURE0);
}

}  // namespace

bool painter_start() {
  Painter& p = painter();
  p.program = glCreateProgram();
  glAttachShader(p.program, compiled(GL_VERTEX_SHADER, vertex_shader));
  glAttachShader(p.program, compiled(GL_FRAGMENT_SHADER, pixel_shader));
  glLinkProgram(p.program);
  GLint linked = 0;
  glGetProgramiv(p.program, GL_LINK_STATUS, &linked);
  p.to_clip = glGetUniformLocation(p.program, "to_clip");

  glGenVertexArrays(1, &p.layout);
  glBindVertexArray(p.layout);
  glGenBuffers(1, &p.vertices);
  glBindBuffer(GL_ARRAY_BUFFER, p.vertices);
  const auto place = [](GLuint slot, GLint size, GLenum type, GLboolean unit, std::size_t offset) {
    glEnableVertexAttribArray(slot);
    glVertexAttribPointer(slot, size, type, unit, sizeof(ImDrawVert), reinterpret_cast<const void*>(offset));
  };
  place(0, 2, GL_FLOAT, GL_FALSE, offsetof(ImDrawVert, pos));
  place(1, 2, GL_FLOAT, GL_FALSE, offsetof(ImDrawVert, uv));
  place(2, 4, GL_UNSIGNED_BYTE, GL_TRUE, offsetof(ImDrawVert, col));
  ImGui::GetIO().BackendFlags |= ImGuiBackendFlags_RendererHasVtxOffset;
  return linked != 0;
}

void painter_take_typeface() {
  Painter& p = painter();
  unsigned char* pixels = nullptr;
  int width = 0, height = 0;
  ImFontAtlas& atlas = *ImGui::GetIO().Fonts;
  atlas.GetTexDataAsRGBA32(&pixels, &width, &height);
  if (p.typeface == 0) glGenTextures(1, &p.typeface);
  glBindTexture(GL_TEXTURE_2D, p.typeface);
  glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_MIN_FILTER, GL_LINEAR);
  glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_MAG_FILTER, GL_LINEAR);
  glTexImage2D(GL_TEXTURE_2D, 0, GL_RGBA, width, height, 0, GL_RGBA, GL_UNSIGNED_BYTE, pixels);
  atlas.SetTexID(reinterpret_cast<ImTextureID>(static_cast<std::uintptr_t>(p.typeface)));
  painter_forget();
}

void painter_forget() { painter().damage.forget(); }

bool painter_draw(const ImDrawData& data) {
  const std::vector<PixelBox> boxes = painter().damage.take(data);
  if (boxes.empty()) return false;
  set_state(data);
  for (const PixelBox& box : boxes) draw_box(data, box);
  return true;
}

}  // namespace lw::page
