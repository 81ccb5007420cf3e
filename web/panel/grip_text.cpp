#include <algorithm>
#include <cmath>
#include <cstdio>
#include <cstdlib>

#include "engine/scenario/value_text.h"
#include "web/page/typeface.h"
#include "web/panel/grips.h"

namespace lw::panel {
namespace {

constexpr std::string_view minus_sign = "\xE2\x88\x92";
constexpr std::string_view ellipsis = "\xE2\x80\xA6";

const char* end_of(std::string_view text) { return text.data() + text.size(); }

/// A number as printf writes it, with a minus sign that is as wide as a digit.
std::string with_minus(const char* text) {
  std::string out;
  for (; *text; ++text) {
    if (*text == '-') {
      out += minus_sign;
    } else {
      out += *text;
    }
  }
  return out;
}

int decimals_of(double grain) {
  int decimals = 0;
  while (decimals < 6 && std::abs(grain - std::rint(grain)) > 1e-9) {
    grain *= 10.0;
    ++decimals;
  }
  return decimals;
}

}  // namespace

ImFont* font_of(Type type) {
  const page::Typeface& face = page::typeface();
  switch (type) {
    case Type::small:
      return face.small;
    case Type::strong:
      return face.strong;
    case Type::headline:
      return face.headline;
    case Type::text:
      break;
  }
  return face.text;
}

float line_height(const Ui&, Type type) {
  const ImFont* font = font_of(type);
  return (font ? font->FontSize : 16.0f) * ImGui::GetIO().FontGlobalScale;
}

ImVec2 measure(const Ui& ui, Type type, std::string_view text, float wrap) {
  const ImFont* font = font_of(type);
  if (!font) font = ImGui::GetFont();
  return font->CalcTextSizeA(line_height(ui, type), 1e9f, wrap, text.data(), end_of(text));
}

float put_text(const Ui& ui, Type type, ImVec2 at, ImU32 colour, std::string_view text, float wrap) {
  const ImFont* font = font_of(type);
  if (!font) font = ImGui::GetFont();
  at = {std::round(at.x), std::round(at.y)};
  ImGui::GetWindowDrawList()->AddText(font, line_height(ui, type), at, colour, text.data(), end_of(text),
                                      wrap);
  return measure(ui, type, text, wrap).x;
}

std::string fitted(const Ui& ui, Type type, std::string_view text, float width) {
  if (measure(ui, type, text).x <= width) return std::string(text);
  std::string cut(text);
  while (!cut.empty()) {
    do {
      cut.pop_back();
    } while (!cut.empty() && (static_cast<unsigned char>(cut.back()) & 0xC0) == 0x80);
    if (!cut.empty() && static_cast<unsigned char>(cut.back()) >= 0xC0) cut.pop_back();
    const std::string shown = cut + std::string(ellipsis);
    if (measure(ui, type, shown).x <= width) return shown;
  }
  return {};
}

std::string shown_number(double value, double grain) {
  char text[64];
  const int least = grain > 0 ? decimals_of(grain) : 0;
  // More decimals than the grain has when the value needs them, but not the tail of a binary fraction.
  for (int decimals = least; decimals <= 9; ++decimals) {
    std::snprintf(text, sizeof text, "%.*f", decimals, value);
    if (std::abs(std::strtod(text, nullptr) - value) <= 1e-9 * std::abs(value)) return text;
  }
  std::snprintf(text, sizeof text, "%.6g", value);
  return text;
}

std::string fixed(double value, int decimals) {
  char text[64];
  std::snprintf(text, sizeof text, "%.*f", decimals, value);
  if (std::strtod(text, nullptr) == 0.0) std::snprintf(text, sizeof text, "%.*f", decimals, 0.0);
  return with_minus(text);
}

std::optional<double> typed_number(std::string_view text) {
  std::string plain;
  for (std::size_t at = 0; at < text.size(); ++at) {
    if (text.substr(at, minus_sign.size()) == minus_sign) {
      plain += '-';
      at += minus_sign.size() - 1;
    } else {
      plain += text[at] == ',' ? '.' : text[at];
    }
  }
  const char* begin = plain.c_str();
  char* end = nullptr;
  const double value = std::strtod(begin, &end);
  if (end == begin || !std::isfinite(value)) return std::nullopt;
  const bool hexadecimal = plain.find_first_of("xX") != std::string::npos;
  const bool more_digits =
      plain.find_first_of("0123456789", static_cast<std::size_t>(end - begin)) < plain.size();
  if (hexadecimal || more_digits) return std::nullopt;
  return value;
}

}  // namespace lw::panel
