// What runs in a worker, beside the page: a study (many drives, a search) as a sequence of short slices.
//
// The page starts a worker for each job, hands it the request, and calls step() until it says that it is
// over. Between slices messages go out; cancelling ends the worker wherever it is. The engine alone is linked
// here, no Dear ImGui. Request and messages are bytes whose meaning is agreed between the two ends, JSON for
// instance.
#pragma once

#include <functional>
#include <string>
#include <string_view>

namespace lw::worker {

/// Sends one message to the page (app::job_message). The bytes are copied out during the call.
using Send = std::function<void(std::string_view bytes)>;

/// Takes the request. Returns an empty text, or why it cannot be done (it reaches app::job_ended).
std::string begin(std::string_view request);

/// Does the next slice, best some 50 ms of work, and sends what is ready. True when there is more to do.
bool step(const Send& send);

}  // namespace lw::worker
