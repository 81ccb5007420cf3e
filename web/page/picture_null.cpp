// web/page/picture.h without graphics, for tests: every call gives another number, counted from 1.
#include "web/page/picture.h"

namespace lw::page {

ImTextureID show(Picture& picture, int width, int height, const std::uint32_t*) {
  const unsigned before = picture.sides[picture.front].texture;
  picture.front = 1 - picture.front;
  picture.sides[picture.front] = {before + 1, width, height};
  return texture_of(picture);
}

}  // namespace lw::page
