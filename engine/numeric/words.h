// Numbers in sentences and tables for people. What has to be read back goes through
// engine/scenario/value_text.h.
#pragma once

#include <cmath>
#include <cstdio>
#include <string>

namespace lw {

/// printf's result, however long.
template <class... Value>
std::string formatted(const char* format, Value... value) {
  const int length = std::snprintf(nullptr, 0, format, value...);
  std::string text(static_cast<std::size_t>(length > 0 ? length : 0), '\0');
  std::snprintf(text.data(), text.size() + 1, format, value...);
  return text;
}

/// So many digits, trailing zeros left out: 0.25, 1.2e+06.
inline std::string significant(double value, int digits) { return formatted("%.*g", digits, value); }

/// The same without exponents: whole from 1000 on.
inline std::string readable(double value, int digits) {
  return std::fabs(value) >= 1000.0 ? formatted("%.0f", value) : significant(value, digits);
}

}  // namespace lw
