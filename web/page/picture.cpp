#include "web/page/picture.h"

#include <GLES3/gl3.h>

namespace lw::page {
namespace {

GLuint new_texture() {
  GLuint texture = 0;
  glGenTextures(1, &texture);
  glBindTexture(GL_TEXTURE_2D, texture);
  glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_MIN_FILTER, GL_NEAREST);
  glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_MAG_FILTER, GL_NEAREST);
  glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_WRAP_S, GL_CLAMP_TO_EDGE);
  glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_WRAP_T, GL_CLAMP_TO_EDGE);
  return texture;
}

}  // namespace

ImTextureID show(Picture& picture, int width, int height, const std::uint32_t* pixels) {
  picture.front = 1 - picture.front;
  Picture::Side& side = picture.sides[picture.front];
  if (side.texture == 0) side.texture = new_texture();
  glBindTexture(GL_TEXTURE_2D, side.texture);
  if (side.width == width && side.height == height) {
    glTexSubImage2D(GL_TEXTURE_2D, 0, 0, 0, width, height, GL_RGBA, GL_UNSIGNED_BYTE, pixels);
  } else {
    glTexImage2D(GL_TEXTURE_2D, 0, GL_RGBA, width, height, 0, GL_RGBA, GL_UNSIGNED_BYTE, pixels);
    side.width = width;
    side.height = height;
  }
  return texture_of(picture);
}

}  // namespace lw::page
