// Fingers on the canvas, told apart: one is a mouse (SDL makes it so), two are a pinch.
#pragma once

#include <SDL_events.h>

#include <optional>
#include <vector>

#include "web/page_app.h"

namespace lw::page {

class Fingers {
 public:
  /// Takes note of a finger event (any other changes nothing); `width` and `height` of the window in CSS
  /// pixels. Returns what the application has to know of it.
  std::optional<app::Pinch> take(const SDL_Event& event, float width, float height);

  /// Whether a pinch is going on.
  bool pinching() const { return pinching_; }

  /// Whether this event is the mouse that SDL makes of a finger while a pinch is going on, or the rest of its
  /// fingers leaves: until none is left they mean nothing.
  bool hides(const SDL_Event& event) const;

 private:
  struct Finger {
    SDL_FingerID id;
    float x, y;  // CSS pixels
  };
  app::Pinch between(app::Pinch::Phase phase);

  std::vector<Finger> fingers_;
  bool pinching_ = false;
  bool leaving_ = false;  // a pinch is over and fingers are still down
  float x_ = 0, y_ = 0, distance_ = 1;
};

}  // namespace lw::page
