// How the page is divided: everything on one screen, the floor the largest part of it.
//
//   landscape                          portrait
//   +-----------------+---------+      +----------------+
//   | top             | panel   |      | top            |
//   +-----------------+         |      +----------------+
//   | floor           |         |      | floor          |
//   |                 |         |      +----------------+
//   +-----------------+         |      | play           |
//   | play            |         |      | charts         |
//   | charts          |         |      | panel          |
//   +-----------------+---------+      +----------------+
#pragma once

#include "web/panel/desk.h"

namespace lw::panel {

/// `touch`: fingers were seen. Portrait screens count as touched from the start.
Layout arrange(float width, float height, float scale, bool touch, bool charts_open);

/// The largest Desk::scale at which the parts of a window of that size still hold what is in them.
float largest_scale(float width, float height);

}  // namespace lw::panel
