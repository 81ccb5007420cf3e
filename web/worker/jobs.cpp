// The jobs a worker can do. So far one: `echo`, which sends its request back, so that the way there and back
// is tested by itself.
#include "web/page/worker_app.h"

namespace lw::worker {
namespace {

std::string left;  // of an echo: what has not been sent back

}  // namespace

std::string begin(std::string_view request) {
  constexpr std::string_view echo = "echo ";
  if (request.substr(0, echo.size()) != echo) return "unknown job: " + std::string(request.substr(0, 40));
  left = request.substr(echo.size());
  return {};
}

bool step(const Send& send) {
  send(left);
  left.clear();
  return false;
}

}  // namespace lw::worker
