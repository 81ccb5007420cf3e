#include "engine/drive/trace.h"

#include <algorithm>

#include "engine/numeric/hash.h"

namespace lw {

std::uint64_t hash_row(std::uint64_t hash, const Trace& trace, std::size_t row) {
  for (const TraceColumn& column : trace_columns) hash = fnv_number(hash, trace.rows[row].*column.member);
  const auto sensors = static_cast<std::size_t>(trace.sensors);
  for (std::size_t i = 0; i < sensors; ++i) hash = fnv_number(hash, trace.readings[row * sensors + i]);
  return hash;
}

std::uint64_t trace_hash(const Trace& trace) {
  std::uint64_t hash = fnv_start;
  for (std::size_t row = 0; row < trace.rows.size(); ++row) hash = hash_row(hash, trace, row);
  return hash;
}

namespace {

bool same_bits(double a, double b) { return (a == 0.0 && b == 0.0) || bits_of(a) == bits_of(b); }

bool differs(TraceDifference& difference, std::size_t row, std::string field, double a, double b) {
  if (same_bits(a, b)) return false;
  difference = {row, std::move(field), a, b};
  return true;
}

}  // namespace

bool first_difference(const Trace& a, const Trace& b, TraceDifference& difference) {
  if (differs(difference, 0, "sensors", a.sensors, b.sensors)) return true;
  const std::size_t common = std::min(a.rows.size(), b.rows.size());
  const auto sensors = static_cast<std::size_t>(a.sensors);
  for (std::size_t row = 0; row < common; ++row) {
    for (const TraceColumn& column : trace_columns) {
      if (differs(difference, row, column.name, a.rows[row].*column.member, b.rows[row].*column.member))
        return true;
    }
    for (std::size_t i = 0; i < sensors; ++i) {
      const std::size_t at = row * sensors + i;
      if (differs(difference, row, "reading_" + std::to_string(i), a.readings[at], b.readings[at]))
        return true;
    }
  }
  return differs(difference, common, "rows", static_cast<double>(a.rows.size()),
                 static_cast<double>(b.rows.size()));
}

}  // namespace lw
