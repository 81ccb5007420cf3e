#include "web/panel/headline.h"

#include <algorithm>
#include <cmath>

namespace lw::panel {
namespace {

ImU32 outcome_colour(const Theme& t, Outcome outcome) {
  switch (outcome) {
    case Outcome::finished:
      return t.good;
    case Outcome::line_lost:
      return t.bad;
    case Outcome::time_out:
      break;
  }
  return t.warn;
}

std::string with_capital(std::string text) {
  if (!text.empty() && text[0] >= 'a' && text[0] <= 'z') text[0] = static_cast<char>(text[0] - 'a' + 'A');
  return text;
}

std::string difference(const Figure& figure) {
  const std::string text = fixed(figure.value - figure.kept, figure.decimals);
  const double shown = std::abs(figure.value - figure.kept) * std::pow(10.0, figure.decimals);
  if (shown < 0.5) return "=";
  return figure.value > figure.kept ? "+" + text : text;
}

ImU32 difference_colour(const Theme& t, const Figure& figure) {
  const double gain = (figure.value - figure.kept) * figure.better;
  return gain == 0 ? t.faint : gain > 0 ? t.good : t.bad;
}

void draw_figure(const Ui& ui, const Figure& figure, ImVec2 at, float width, bool compare) {
  const Theme& t = ui.colours();
  const float value_width = put_text(ui, Type::strong, at, t.text, fixed(figure.value, figure.decimals));
  const float small_y = at.y + line_height(ui, Type::strong) - line_height(ui, Type::small) - ui.px(1);
  float x = at.x + value_width + ui.px(4);
  x += put_text(ui, Type::small, {x, small_y}, t.faint, figure.unit);
  const ImVec2 below{at.x, at.y + line_height(ui, Type::strong)};
  const float name_width = put_text(ui, Type::small, below, t.faint, figure.name);
  if (!compare) return;
  const std::string text = difference(figure);
  const float room = width - name_width - ui.px(6);
  const bool fits = measure(ui, Type::small, text).x <= room;
  const ImVec2 place =
      fits ? ImVec2{below.x + name_width + ui.px(6), below.y} : ImVec2{x + ui.px(6), small_y};
  put_text(ui, Type::small, place, difference_colour(t, figure), text);
}

}  // namespace

std::vector<Figure> figures(const Summary& s, const Summary* kept, bool closed) {
  const Summary& k = kept ? *kept : s;
  return {{closed ? "lap time" : "time", "s", s.time, 2, k.time, s.outcome == Outcome::finished ? -1 : 0},
          {"mean speed", "mm/s", s.mean_speed * 1e3, 0, k.mean_speed * 1e3, 1},
          {"deviation rms", "mm", s.deviation_rms * 1e3, 2, k.deviation_rms * 1e3, -1},
          {"deviation max", "mm", s.deviation_max * 1e3, 1, k.deviation_max * 1e3, -1},
          {"saturated", "%", s.saturated * 100, 1, k.saturated * 100, -1},
          {"reversals", "/s", s.reversals_per_s, 1, k.reversals_per_s, -1}};
}

void draw_headline(Ui& ui, const Box& box) {
  const Desk& desk = ui.desk;
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const float pad = ui.px(14);
  const bool drawn = has_drive(desk);
  const Summary& summary = desk.good.summary;
  const ImU32 signal = desk.error ? t.bad : drawn ? outcome_colour(t, summary.outcome) : t.rule;
  draw.AddRectFilled({box.x, box.y}, {box.x + ui.px(6), box.bottom()}, signal);

  std::string sentence = drawn ? with_capital(desk.good.headline) : std::string("Nothing driven yet");
  if (desk.error) sentence = text_of(*desk.error);
  const float width = box.width - 2 * pad - ui.px(6), x = box.x + ui.px(6) + pad;
  Type type = Type::headline;
  const float figures_height = line_height(ui, Type::strong) + line_height(ui, Type::small);
  const float room = box.height - figures_height - ui.px(22);
  if (measure(ui, type, sentence, width).y > room) type = Type::strong;
  if (measure(ui, type, sentence, width).y > room) type = Type::small;  // two lines
  if (measure(ui, type, sentence, width).y > room) sentence = fitted(ui, type, sentence, width);
  put_text(ui, type, {x, box.y + ui.px(9)}, desk.error ? t.bad : t.text, sentence, width);
  // An item of its own, so that the sentence can be read by whoever works the page by its labels.
  ImGui::SetCursorScreenPos({x, box.y + ui.px(9)});
  ImGui::InvisibleButton((sentence + "##headline").c_str(), measure(ui, type, sentence, width));
  if (!drawn) return;

  const bool compare = desk.kept.has_value() && desk.show_kept;
  const bool closed = desk.good.scenario.course.closed && desk.good.scenario.drive.laps == 1;
  const auto all = figures(summary, compare ? &desk.kept->summary : nullptr, closed);
  const float each = std::min(width / static_cast<float>(all.size()), ui.px(190));
  float at = x;
  for (const Figure& figure : all) {
    draw_figure(ui, figure, {at, box.bottom() - figures_height - ui.px(8)}, each - ui.px(8), compare);
    at += each;
  }
  if (desk.error) {
    const float note_x = at + ui.px(8);
    const std::string note = fitted(ui, Type::small, "figures: last drive", box.right() - note_x - pad);
    put_text(ui, Type::small, {note_x, box.bottom() - line_height(ui, Type::small) - ui.px(8)}, t.warn, note);
  }
}

}  // namespace lw::panel
