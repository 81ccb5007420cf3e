// A trace as text: one row a loop, columns in the order of trace_columns, then reading_0, reading_1, ...
//
//   for people and plotting   comma-separated, in the units the column names carry, each number with the
//   fewest
//                             of 15 to 17 significant digits that read back to the same double
//   for comparing builds      the same columns in the engine's own units, each number as its bits (16 hex
//                             digits; -0 counts as 0, as in trace_hash), so that equal text is equal bits
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

#include "engine/drive/trace.h"

namespace lw {

/// The column names, separated by commas, without a line end.
std::string trace_header(const Trace& trace);

/// The whole table for people: header and rows, each ended by '\n'.
std::string trace_csv(const Trace& trace);

/// One row for comparing builds, without a line end. `row` < rows.
std::string trace_bits_row(const Trace& trace, std::size_t row);

/// The whole table for comparing builds: header and rows, each ended by '\n'.
std::string trace_bits(const Trace& trace);

/// Reads trace_bits() text back. Error: where the text is not of that form.
Result<Trace> read_trace_bits(std::string_view text, std::string_view name);

}  // namespace lw
