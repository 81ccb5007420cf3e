// Whether two scenarios are the same, bit for bit, and a short mark of what one holds.
//
// Both look at the bits of every field of fields.h: 0 and -0 differ, and so do a gain left out and a gain of
// all 1.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "engine/scenario/scenario.h"

namespace lw {

/// The bits of each field in the order of each_field(): 8 bytes a number, little end first, with counts
/// before what varies in length, so that different values never give equal bytes.
std::vector<std::string> field_bytes(const Scenario& scenario);

bool same(const Scenario& a, const Scenario& b);

/// FNV-1a 64 (engine/numeric/hash.h) over the path and the bytes of every field.
std::uint64_t content_hash(const Scenario& scenario);

}  // namespace lw
