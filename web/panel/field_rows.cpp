#include "web/panel/field_rows.h"

#include <array>
#include <type_traits>

#include "engine/scenario/fields.h"

namespace lw::panel {
namespace {

const Scenario& usual_scenario() {
  static const Scenario usual;
  return usual;
}

NumberRow row_of(const FieldInfo& info, const std::string& path, double usual, bool whole = false) {
  return {path, info.label, info.unit, info.meaning, info.range, info.grain, usual, whole};
}

/// One overload for each type that the visitor meets.
struct FieldRow {
  Rows& rows;

  void operator()(const FieldInfo& info, double& value) const {
    const std::string path = path_of(info);
    const double* usual = usual_field<double>(info.section, info.key);
    number_row(rows, row_of(info, path, usual ? *usual : 0.0), value, [&](double v) { value = v; });
  }

  void operator()(const FieldInfo& info, std::int64_t& value) const {
    const std::string path = path_of(info);
    const std::int64_t* usual = usual_field<std::int64_t>(info.section, info.key);
    number_row(rows, row_of(info, path, usual ? static_cast<double>(*usual) : 0.0, true),
               static_cast<double>(value), [&](double v) { value = static_cast<std::int64_t>(v); });
  }

  void operator()(const FieldInfo& info, bool& value) const {
    constexpr std::array<std::string_view, 2> names{"no", "yes"};
    choose(info, names, value ? 1 : 0, [&](int picked) { value = picked == 1; });
  }

  template <NamedEnum E>
  void operator()(const FieldInfo& info, E& value) const {
    if constexpr (std::is_same_v<E, Scheme>) {
      scheme_row(rows, info);
    } else if constexpr (std::is_same_v<E, GainUnit>) {
      gain_unit_row(rows, info);
    } else {
      choose(info, names_of(value), static_cast<int>(value),
             [&](int picked) { value = static_cast<E>(picked); });
    }
  }

  void operator()(const FieldInfo& info, Point& value) const { pair_row(info, value.x_mm, value.y_mm); }

  void operator()(const FieldInfo& info, std::vector<double>& value) const {
    if (info.section == "sensors") {
      if (info.key == "lateral_mm") sensor_table(rows);
    } else if (value.size() == 2) {
      pair_row(info, value[0], value[1]);
    }
  }

  void operator()(const FieldInfo& info, std::vector<int>&) const { corner_row(rows, info); }
  void operator()(const FieldInfo& info, std::vector<Piece>&) const { piece_rows(rows, info); }
  void operator()(const FieldInfo& info, std::vector<Point>&) const { point_rows(rows, info); }
  void operator()(const FieldInfo& info, std::vector<Stretch>&) const { gap_rows(rows, info); }
  void operator()(const FieldInfo& info, std::vector<Spread>&) const { spread_rows(rows, info); }

  template <class T>
  void operator()(const FieldInfo& info, std::optional<T>& value) const {
    expect_row(rows, info, value);
  }

  void operator()(const FieldInfo& info, std::string& value) const {
    const std::string path = path_of(info);
    RowPlace place;
    begin_row(rows, label_of(info, path), place);
    const std::string id = "##" + path;
    Ui& ui = rows.ui;
    if (auto text = text_entry(ui, id.c_str(), value, place.room, info.most)) {
      edit(ui.desk, [&](Scenario&) { value = *text; });
    }
    end_row(rows, place, path, info.meaning);
  }

 private:
  template <class Set>
  void choose(const FieldInfo& info, std::span<const std::string_view> names, int chosen, Set&& set) const {
    const std::string path = path_of(info);
    Ui& ui = rows.ui;
    RowPlace place;
    begin_row(rows, label_of(info, path), place);
    const int picked = choice(ui, path, names, chosen, place.room);
    if (picked >= 0) edit(ui.desk, [&](Scenario&) { set(picked); });
    end_row(rows, place, path, info.meaning);
  }

  void pair_row(const FieldInfo& info, double& first, double& second) const {
    const std::string path = path_of(info);
    Ui& ui = rows.ui;
    RowPlace place;
    begin_row(rows, label_of(info, path), place);
    const float width = (place.room - ui.px(6)) / 2;
    double* values[] = {&first, &second};
    for (int i = 0; i < 2; ++i) {
      const std::string entry = path + "[" + std::to_string(i) + "]";
      ImGui::SetCursorScreenPos({place.control + static_cast<float>(i) * (width + ui.px(6)), place.y});
      const std::string unit = std::string(info.unit) + (i == 0 ? " x" : " y");
      const NumberGrip grip{entry, unit, info.range, info.grain};
      take(ui, entry_grip(ui, grip, *values[i], width), [&](double v) { *values[i] = v; });
    }
    end_row(rows, place, path, info.meaning);
  }
};

}  // namespace

RowLabel label_of(const FieldInfo& info, const std::string& path) {
  RowLabel label;
  label.path = path;
  label.label = info.label;
  label.meaning = info.meaning;
  return label;
}

template <class T>
const T* usual_field(std::string_view section, std::string_view key) {
  const T* found = nullptr;
  each_field(usual_scenario(), [&](const FieldInfo& info, const auto& value) {
    if constexpr (std::is_same_v<std::decay_t<decltype(value)>, T>) {
      if (info.section == section && info.key == key) found = &value;
    }
  });
  return found;
}
template const double* usual_field<double>(std::string_view, std::string_view);
template const std::int64_t* usual_field<std::int64_t>(std::string_view, std::string_view);

bool is_quick(const FieldInfo& info) {
  const bool gain = info.key == "kp" || info.key == "ki" || info.key == "kd" || info.key == "base_pct";
  return (info.section == "controller" && gain) || (info.section == "sensors" && info.key == "noise_pct");
}

void section_rows(Rows& rows, std::string_view section) {
  const FieldRow row{rows};
  each_field(rows.ui.desk.scenario, [&](const FieldInfo& info, auto& value) {
    if (info.section == section && !is_quick(info)) row(info, value);
  });
}

}  // namespace lw::panel
