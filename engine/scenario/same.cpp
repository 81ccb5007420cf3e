#include "engine/scenario/same.h"

#include "engine/numeric/hash.h"
#include "engine/scenario/fields.h"

namespace lw {
namespace {

void append(std::string& out, std::uint64_t bits) {
  for (int shift = 0; shift < 64; shift += 8) out += static_cast<char>(bits >> shift & 0xFF);
}
void append(std::string& out, double value) { append(out, __builtin_bit_cast(std::uint64_t, value)); }
void append(std::string& out, std::int64_t value) { append(out, static_cast<std::uint64_t>(value)); }
void append(std::string& out, int value) { append(out, static_cast<std::int64_t>(value)); }
void append(std::string& out, bool value) { append(out, static_cast<std::uint64_t>(value)); }
void append(std::string& out, const std::string& value) {
  append(out, static_cast<std::uint64_t>(value.size()));
  out += value;
}
template <NamedEnum E>
void append(std::string& out, E value) {
  append(out, static_cast<std::uint64_t>(value));
}
template <class T>
void append(std::string& out, const std::optional<T>& value) {
  append(out, value.has_value());
  if (value) append(out, *value);
}
void append(std::string& out, const Point& point) {
  append(out, point.x_mm);
  append(out, point.y_mm);
}
void append(std::string& out, const Stretch& stretch) {
  append(out, stretch.from_mm);
  append(out, stretch.to_mm);
}
void append(std::string& out, const Piece& piece) {
  each_piece_field(piece, [&](const FieldInfo&, const auto& value) { append(out, value); });
}
void append(std::string& out, const Spread& spread) {
  append(out, spread.key);
  append(out, spread.kind);
  append(out, spread.amount);
}
template <class T>
void append(std::string& out, const std::vector<T>& values) {
  append(out, static_cast<std::uint64_t>(values.size()));
  for (const T& value : values) append(out, value);
}

}  // namespace

std::vector<std::string> field_bytes(const Scenario& scenario) {
  std::vector<std::string> all;
  each_field(scenario, [&](const FieldInfo&, const auto& value) { append(all.emplace_back(), value); });
  return all;
}

bool same(const Scenario& a, const Scenario& b) { return field_bytes(a) == field_bytes(b); }

std::uint64_t content_hash(const Scenario& scenario) {
  std::uint64_t hash = fnv_start;
  each_field(scenario, [&](const FieldInfo& info, const auto& value) {
    std::string bytes;
    append(bytes, value);
    hash = fnv_text(fnv_text(hash, path_of(info)), bytes);
  });
  return hash;
}

}  // namespace lw
