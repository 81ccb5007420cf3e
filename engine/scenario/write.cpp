// The writing half of text.h.
#include "engine/scenario/fields.h"
#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "engine/scenario/value_text.h"

namespace lw {
namespace {

// The two ways of writing: for reading by people, and as short as it goes.
struct Style {
  bool brief;
  std::string_view equals() const { return brief ? "=" : " = "; }
  std::string_view comma() const { return brief ? "," : ", "; }
  std::string_view pad() const { return brief ? "" : " "; }
};

constexpr std::size_t line_width = 100;  // of a list in text for people

std::string text_of(double value, Style style) {
  return style.brief ? number_text(value) : float_text(value);
}
std::string text_of(std::int64_t value, Style) { return std::to_string(value); }
std::string text_of(int value, Style) { return std::to_string(value); }
std::string text_of(bool value, Style) { return value ? "true" : "false"; }
std::string text_of(const std::string& value, Style) { return in_quotes(value); }
template <NamedEnum E>
std::string text_of(E value, Style) {
  return in_quotes(name_of(value));
}

std::string pair_text(double first, double second, Style style) {
  std::string text = "[" + text_of(first, style);
  return (text += style.comma()) += text_of(second, style) + "]";
}
std::string text_of(const Point& point, Style style) { return pair_text(point.x_mm, point.y_mm, style); }
std::string text_of(const Stretch& gap, Style style) { return pair_text(gap.from_mm, gap.to_mm, style); }

std::string text_of(const Piece& piece, Style style) {
  std::string inside;
  each_piece_field(piece, [&](const FieldInfo& info, const std::optional<double>& value) {
    if (!value) return;
    if (!inside.empty()) inside += style.comma();
    ((inside += info.key) += style.equals()) += text_of(*value, style);
  });
  const std::string pad(style.pad());
  return "{" + pad + inside + pad + "}";
}

std::string spread_text(const Spread& spread, Style style) {
  std::string text = in_quotes(spread.key);
  ((text += style.equals()) += '{') += style.pad();
  ((text += name_of(spread.kind)) += style.equals()) += text_of(spread.amount, style);
  return (text += style.pad()) += '}';
}

std::string text_of(const std::vector<Spread>& spreads, Style style) {
  std::string text = "{";
  for (const Spread& spread : spreads) {
    if (text.size() > 1) text += style.comma();
    text += spread_text(spread, style);
  }
  return text += '}';
}

// On one line where it fits, else as many entries a line as fit; pieces always one a line.
template <class T>
std::string text_of(const std::vector<T>& values, Style style) {
  std::string flat = "[";
  std::string folded = "[\n ";
  std::size_t column = 1;
  for (const T& value : values) {
    const std::string entry = text_of(value, style);
    if (flat.size() > 1) flat += style.comma();
    flat += entry;
    const bool wrap = column > 1 && (std::is_same_v<T, Piece> || column + entry.size() + 2 > line_width);
    if (wrap) folded += "\n ";
    column = (wrap ? 1 : column) + entry.size() + 2;
    folded += ' ' + entry + ',';
  }
  const bool fits = flat.size() < line_width && !(std::is_same_v<T, Piece> && values.size() > 1);
  return style.brief || fits ? flat + "]" : folded + "\n]";
}

template <class T>
std::string text_of(const std::optional<T>& value, Style style) {
  return text_of(*value, style);
}

// Whether a field has a value to write: an absent expectation and an empty list or word have none.
template <class T>
bool has_value(const T&) {
  return true;
}
template <class T>
bool has_value(const std::optional<T>& value) {
  return value.has_value();
}
template <class T>
bool has_value(const std::vector<T>& values) {
  return !values.empty();
}
bool has_value(const std::string& text) { return !text.empty(); }

struct Writer {
  std::string out;
  std::string section;
  Style style;

  void open(std::string_view name) {
    if (section == name) return;
    section = std::string(name);
    if (!style.brief) out += '\n';
    ((out += '[') += name) += "]\n";
  }

  template <class T>
  void field(const FieldInfo& info, const T& value) {
    open(info.section);
    ((out += info.key) += style.equals()) += text_of(value, style) + '\n';
  }

  void field(const FieldInfo& info, const std::vector<Spread>& spreads) {
    open(style.brief ? std::string(info.section) : path_of(info));
    if (style.brief) {
      ((out += info.key) += style.equals()) += text_of(spreads, style) + '\n';
      return;
    }
    for (const Spread& spread : spreads) out += spread_text(spread, style) + '\n';
  }
};

Writer begin(Style style) {
  Writer writer{"", "", style};
  ((writer.out += "format") += style.equals()) += "\"linewright " + std::to_string(format_version) + "\"\n";
  return writer;
}

}  // namespace

std::string write(const Scenario& scenario) {
  Writer writer = begin(Style{false});
  each_field(scenario, [&](const FieldInfo& info, const auto& value) {
    if (has_value(value)) writer.field(info, value);
  });
  return writer.out;
}

std::string write_short(const Scenario& scenario) {
  const auto values = field_bytes(scenario);
  const auto defaults = field_bytes(Scenario{});
  Writer writer = begin(Style{true});
  std::size_t index = 0;
  each_field(scenario, [&](const FieldInfo& info, const auto& value) {
    const bool differs = values[index] != defaults[index];
    ++index;
    if (differs) writer.field(info, value);
  });
  return writer.out;
}

}  // namespace lw
