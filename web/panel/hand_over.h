// The last step: name and note, what `check` is to assert, gains in both units, and what goes out of the
// page.
#pragma once

#include "web/panel/grips.h"

namespace lw::panel {

void hand_over(Ui& ui);

/// 16 hexadecimal digits.
std::string hash_text(std::uint64_t hash);

}  // namespace lw::panel
