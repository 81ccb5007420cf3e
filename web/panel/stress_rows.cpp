// Tolerances (which number is spread, how, how much), expectations, and the unit of the gains.
#include <algorithm>
#include <cmath>

#include "engine/scenario/numbers.h"
#include "web/panel/field_rows.h"
#include "web/panel/quick.h"

namespace lw::panel {
namespace {

std::string name_of_field(const NumberField& field) {
  const std::size_t bracket = field.path.find('[');
  const std::string entry = bracket == std::string::npos ? "" : " " + field.path.substr(bracket);
  std::string section(field.info.section);
  if (!section.empty()) section[0] = static_cast<char>(section[0] - 'a' + 'A');
  return section + ": " + std::string(field.info.label) + entry;
}

/// The fields that may be spread and are not yet.
std::vector<NumberField> free_fields(const Scenario& scenario) {
  std::vector<NumberField> fields = number_fields(scenario);
  fields.erase(std::remove_if(fields.begin(), fields.end(),
                              [&](const NumberField& field) {
                                return std::any_of(scenario.stress.spread.begin(),
                                                   scenario.stress.spread.end(),
                                                   [&](const Spread& s) { return s.key == field.path; });
                              }),
               fields.end());
  return fields;
}

/// A button that opens the list of the scenario's numbers; returns the path picked.
std::optional<std::string> pick_field(Ui& ui, const char* label) {
  std::optional<std::string> picked;
  if (button(ui, label)) ImGui::OpenPopup(label);
  ImGui::PushStyleVar(ImGuiStyleVar_WindowPadding, {ui.px(8), ui.px(8)});
  ImGui::SetNextWindowSizeConstraints({ui.px(300), 0}, {ui.px(420), ui.px(420)});
  if (ImGui::BeginPopup(label)) {
    for (const NumberField& field : free_fields(ui.desk.scenario)) {
      const std::string line = name_of_field(field) + "##" + field.path;
      if (ImGui::Selectable(line.c_str(), false, 0, {0, ui.row_height() * 0.8f})) picked = field.path;
    }
    ImGui::EndPopup();
  }
  ImGui::PopStyleVar();
  return picked;
}

double start_amount(const Scenario& scenario, const NumberField& field) {
  const double value = number_at(scenario, field.path).value_or(0.0);
  const double share = snapped({0, 1e6}, field.info.grain, std::abs(value) * 0.02);
  return std::max(share, field.info.grain);
}

void spread_row(Rows& rows, const FieldInfo& info, std::size_t i, std::optional<std::size_t>& removed) {
  Ui& ui = rows.ui;
  Spread& spread = ui.desk.scenario.stress.spread[i];
  NumberField field{spread.key, info};
  for (const NumberField& known : number_fields(ui.desk.scenario)) {
    if (known.path == spread.key) field = known;
  }
  const float y = rows.top, kind = ui.px(150), remove = ui.row_height(), gap = ui.px(5);
  put_text(ui, Type::small, {rows.left + ui.px(11), y + ui.px(4)}, ui.colours().text, name_of_field(field));
  const float line = y + line_height(ui, Type::small) + ui.px(4);
  ImGui::SetCursorScreenPos({rows.left + ui.px(11), line});
  const std::string path = "stress.spread." + spread.key;
  const int picked = choice(ui, path, spread_kind_names, static_cast<int>(spread.kind), kind);
  if (picked >= 0) edit(ui.desk, [&](Scenario&) { spread.kind = static_cast<SpreadKind>(picked); });
  ImGui::SetCursorScreenPos({rows.left + ui.px(11) + kind + gap, line});
  const float width = std::min(ui.px(130), rows.width - kind - remove - 2 * gap - ui.px(11));
  const NumberGrip grip{path, field.info.unit, info.range, field.info.grain > 0 ? field.info.grain : 0.01};
  take(ui, entry_grip(ui, grip, spread.amount, width), [&](double v) { spread.amount = v; });
  tip(ui, spread.kind == SpreadKind::normal ? "Standard deviation"
                                            : "Half-width: evenly within this much either way");
  ImGui::SetCursorScreenPos({rows.left + ui.px(16) + kind + gap + width, line});
  if (icon_button(ui, ("Remove tolerance " + spread.key).c_str(), Icon::cross)) removed = i;
  RowPlace place{rows.left, line, rows.width, 0, 0, 0};
  end_row(rows, place, path);
  new_line(rows);
}

/// A bound that holds for the drive on screen with some room, to begin with.
double first_bound(const Summary& s, std::string_view key) {
  if (key == "time_s_max") return std::ceil(s.time * 11.0) / 10.0;
  if (key == "deviation_mm_max") return std::ceil(s.deviation_max * 1250.0);
  if (key == "deviation_rms_mm_max") return std::ceil(s.deviation_rms * 12500.0) / 10.0;
  if (key == "saturated_pct_max") return std::min(100.0, std::ceil(s.saturated * 125.0));
  if (key == "reversals_per_s_max") return std::ceil(s.reversals_per_s * 1.25);
  if (key == "stress_share_min") return 0.95;
  return 6.0;  // dB of gain margin, the usual rule (common practice, no source)
}

constexpr std::string_view off_on[] = {"off", "on"};

}  // namespace

void spread_rows(Rows& rows, const FieldInfo& info) {
  Ui& ui = rows.ui;
  new_line(rows);
  std::optional<std::size_t> removed;
  for (std::size_t i = 0; i < ui.desk.scenario.stress.spread.size(); ++i) spread_row(rows, info, i, removed);
  if (removed) {
    edit(ui.desk, [&](Scenario& s) {
      s.stress.spread.erase(s.stress.spread.begin() + static_cast<std::ptrdiff_t>(*removed));
    });
  }
  RowPlace place{rows.left, rows.top + ui.px(4), rows.width, 0, 0, 0};
  ImGui::SetCursorScreenPos({rows.left + ui.px(11), place.y});
  if (const auto path = pick_field(ui, "Add a tolerance")) {
    edit(ui.desk, [&](Scenario& s) {
      for (const NumberField& field : number_fields(s)) {
        if (field.path == *path)
          s.stress.spread.push_back({*path, SpreadKind::normal, start_amount(s, field)});
      }
    });
  }
  end_row(rows, place, path_of(info), info.meaning);
  new_line(rows);
}

void expect_row(Rows& rows, const FieldInfo& info, std::optional<double>& value) {
  Ui& ui = rows.ui;
  const std::string path = path_of(info);
  RowPlace place;
  begin_row(rows, label_of(info, path), place);
  const float toggle = ui.px(92);
  const int picked = choice(ui, path, off_on, value ? 1 : 0, toggle);
  if (picked >= 0) {
    edit(ui.desk, [&](Scenario&) {
      value = picked == 1 ? std::optional<double>(first_bound(ui.desk.good.summary, info.key)) : std::nullopt;
    });
  }
  if (value) {
    ImGui::SetCursorScreenPos({place.control + toggle + ui.px(6), place.y});
    const NumberGrip grip{path, info.unit, info.range, info.grain};
    take(ui, entry_grip(ui, grip, *value, std::min(ui.px(110), place.room - toggle - ui.px(6))),
         [&](double v) { value = v; });
  }
  end_row(rows, place, path, info.meaning);
}

void expect_row(Rows& rows, const FieldInfo& info, std::optional<Outcome>& value) {
  Ui& ui = rows.ui;
  const std::string path = path_of(info);
  RowPlace place;
  begin_row(rows, label_of(info, path), place);
  constexpr std::string_view names[] = {"off", "finished", "lost", "time out"};
  const int picked = choice(ui, path, names, value ? static_cast<int>(*value) + 1 : 0, place.room);
  if (picked >= 0) {
    edit(ui.desk, [&](Scenario&) {
      value = picked == 0 ? std::nullopt : std::optional<Outcome>(static_cast<Outcome>(picked - 1));
    });
  }
  end_row(rows, place, path, info.meaning);
}

void gain_unit_row(Rows& rows, const FieldInfo& info) {
  Ui& ui = rows.ui;
  const std::string path = path_of(info);
  RowPlace place;
  begin_row(rows, label_of(info, path), place);
  const int picked =
      choice(ui, path, gain_unit_names, static_cast<int>(ui.desk.scenario.controller.gains), place.room);
  if (picked >= 0) {
    edit(ui.desk, [&](Scenario& s) {
      const BothUnits ki = ki_of(s), kd = kd_of(s);
      s.controller.gains = static_cast<GainUnit>(picked);
      const bool loop = s.controller.gains == GainUnit::per_loop;
      s.controller.ki = loop ? ki.per_loop : ki.per_second;
      s.controller.kd = loop ? kd.per_loop : kd.per_second;
    });
    say(ui.desk, "Ki and Kd converted: the same law in the other unit.");
  }
  end_row(rows, place, path, info.meaning);
}

}  // namespace lw::panel
