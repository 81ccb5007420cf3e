#include "web/page/fingers.h"

#include <algorithm>
#include <cmath>

namespace lw::page {

app::Pinch Fingers::between(app::Pinch::Phase phase) {
  const Finger& a = fingers_[0];
  const Finger& b = fingers_[1];
  const float x = (a.x + b.x) / 2, y = (a.y + b.y) / 2;
  const float distance = std::max(1.0f, std::hypot(a.x - b.x, a.y - b.y));
  app::Pinch pinch{phase, x, y, 0, 0, 1};
  if (phase == app::Pinch::moved) {
    pinch.moved_x = x - x_;
    pinch.moved_y = y - y_;
    pinch.scale = distance / distance_;
  }
  x_ = x;
  y_ = y;
  distance_ = distance;
  return pinch;
}

std::optional<app::Pinch> Fingers::take(const SDL_Event& event, float width, float height) {
  if (event.type != SDL_FINGERDOWN && event.type != SDL_FINGERMOTION && event.type != SDL_FINGERUP) return {};
  const SDL_FingerID id = event.tfinger.fingerId;
  const auto known =
      std::find_if(fingers_.begin(), fingers_.end(), [&](const Finger& f) { return f.id == id; });
  const bool is_known = known != fingers_.end();
  if (event.type == SDL_FINGERUP) {
    if (!is_known) return {};
    fingers_.erase(known);
    leaving_ = (leaving_ || pinching_) && !fingers_.empty();
    if (!pinching_) return {};
    if (fingers_.size() >= 2) {  // another pair goes on from where it is
      between(app::Pinch::began);
      return {};
    }
    pinching_ = false;
    return app::Pinch{app::Pinch::ended, x_, y_, 0, 0, 1};
  }
  const Finger now{id, event.tfinger.x * width, event.tfinger.y * height};
  if (is_known) {
    *known = now;
  } else {
    fingers_.push_back(now);
  }
  if (pinching_) return between(app::Pinch::moved);
  if (fingers_.size() < 2) return {};
  pinching_ = true;
  return between(app::Pinch::began);
}

bool Fingers::hides(const SDL_Event& event) const {
  if (!pinching_ && !leaving_) return false;
  switch (event.type) {
    case SDL_MOUSEMOTION:
      return event.motion.which == SDL_TOUCH_MOUSEID;
    case SDL_MOUSEBUTTONDOWN:
    case SDL_MOUSEBUTTONUP:
      return event.button.which == SDL_TOUCH_MOUSEID;
    default:
      return false;
  }
}

}  // namespace lw::page
