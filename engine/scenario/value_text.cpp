#include "engine/scenario/value_text.h"

#include <cmath>
#include <cstdio>
#include <cstdlib>

namespace lw {

std::string number_text(double value) {
  if (std::isnan(value)) return "nan";
  if (std::isinf(value)) return value < 0 ? "-inf" : "inf";
  if (value == 0) return std::signbit(value) ? "-0.0" : "0";
  char text[32];
  for (int digits = 15; digits <= 17; ++digits) {
    std::snprintf(text, sizeof text, "%.*g", digits, value);
    if (std::strtod(text, nullptr) == value) break;
  }
  return text;
}

std::string float_text(double value) {
  std::string text = number_text(value);
  if (text.find_first_of(".en") == std::string::npos) text += ".0";
  return text;
}

std::string in_quotes(std::string_view text) {
  std::string out = "\"";
  for (const char c : text) {
    const auto code = static_cast<unsigned char>(c);
    if (c == '"' || c == '\\') {
      out += '\\';
      out += c;
    } else if (c == '\n') {
      out += "\\n";
    } else if (c == '\t') {
      out += "\\t";
    } else if (code < 0x20 || code == 0x7F) {
      char escape[8];
      std::snprintf(escape, sizeof escape, "\\u%04X", static_cast<unsigned>(code));
      out += escape;
    } else {
      out += c;
    }
  }
  return out += '"';
}

std::string clipped(std::string_view text, std::size_t most) {
  std::string out;
  std::size_t end = text.size();
  if (end > most) {
    end = most;
    while (end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0) == 0x80) --end;
  }
  for (const char c : text.substr(0, end)) {
    const auto code = static_cast<unsigned char>(c);
    out += code < 0x20 || code == 0x7F ? '?' : c;
  }
  if (end < text.size()) out += "...";
  return out;
}

bool is_utf8(std::string_view text) {
  std::size_t i = 0;
  while (i < text.size()) {
    const auto lead = static_cast<unsigned char>(text[i++]);
    if (lead < 0x80) continue;
    const int more = lead >= 0xF0 ? 3 : lead >= 0xE0 ? 2 : 1;
    if (lead < 0xC2 || lead > 0xF4) return false;
    unsigned code = lead & (0x3Fu >> more);
    for (int k = 0; k < more; ++k, ++i) {
      if (i >= text.size()) return false;
      const auto next = static_cast<unsigned char>(text[i]);
      if ((next & 0xC0) != 0x80) return false;
      code = code << 6 | (next & 0x3Fu);
    }
    const bool overlong = (more == 2 && code < 0x800) || (more == 3 && code < 0x10000);
    const bool surrogate = code >= 0xD800 && code <= 0xDFFF;
    if (overlong || surrogate || code > 0x10FFFF) return false;
  }
  return true;
}

}  // namespace lw
