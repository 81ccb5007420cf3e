// The lists of a course by number: exact pieces, drawn points with their corners, gaps. The same edits as on
// the floor (web/view), so that gaps and corners keep to their places.
#include <algorithm>
#include <cmath>

#include "web/panel/field_rows.h"
#include "web/view/course_gaps.h"
#include "web/view/course_pieces.h"
#include "web/view/course_points.h"
#include "web/view/course_whole.h"

namespace lw::panel {
namespace {

constexpr double new_straight_mm = 500.0, new_radius_mm = 300.0, new_turn_deg = 90.0;

/// Takes an edited scenario as one step, or says why it cannot be.
bool apply(Ui& ui, Result<Scenario> edited) {
  if (!edited.ok()) {
    complain(ui.desk, text_of(edited.error()));
    return false;
  }
  edit(ui.desk, [&](Scenario& s) { s = std::move(*edited); });
  return true;
}

double length_mm(const Desk& desk) {
  return has_drive(desk) ? desk.good.plan.ground->line.length * 1000.0 : 0.0;
}

FieldInfo piece_info(std::string_view key) {
  FieldInfo found;
  each_piece_field(static_cast<const Piece&>(Piece{}), [&](const FieldInfo& info, const auto&) {
    if (info.key == key) found = info;
  });
  return found;
}

/// One number of one piece.
void piece_entry(Ui& ui, std::size_t i, std::string_view key, float x, float y, float width) {
  const Piece piece = ui.desk.scenario.course.pieces[i];
  const FieldInfo info = piece_info(key);
  std::optional<double> Piece::*member = key == "straight_mm" ? &Piece::straight_mm
                                         : key == "radius_mm" ? &Piece::radius_mm
                                                              : &Piece::turn_deg;
  const std::string path = "course.pieces[" + std::to_string(i) + "]." + std::string(key);
  ImGui::SetCursorScreenPos({x, y});
  const NumberGrip grip{path, info.unit, info.range, info.grain};
  const Moved moved = entry_grip(ui, grip, (piece.*member).value_or(0.0), width);
  tip(ui, info.meaning);
  if (!moved.value) return;
  Piece changed = piece;
  changed.*member = *moved.value;
  end_edit(ui.desk);
  apply(ui, view::with_piece_changed(ui.desk.scenario, i, changed));
}

/// The chosen row is marked as the piece or point is on the floor.
void mark_chosen(const Ui& ui, const Rows& rows, float y) {
  ImGui::GetWindowDrawList()->AddRectFilled(
      {rows.left, y + ui.px(4)}, {rows.left + ui.px(4), y + ui.row_height() - ui.px(4)}, ui.colours().accent);
}

/// The number of a row, which chooses it when pressed.
void row_number(Ui& ui, const Rows& rows, const char* what, int i, int& chosen, float y) {
  ImGui::SetCursorScreenPos({rows.left, y});
  const std::string id = std::string(what) + " " + std::to_string(i);
  if (ImGui::InvisibleButton(id.c_str(), {ui.px(32), ui.row_height()})) chosen = chosen == i ? -1 : i;
  if (chosen == i) mark_chosen(ui, rows, y);
  const float text_y = y + (ui.row_height() - line_height(ui, Type::text)) / 2;
  put_text(ui, Type::text, {rows.left + ui.px(9), text_y}, ui.colours().faint, std::to_string(i));
}

void piece_row(Rows& rows, std::size_t i) {
  Ui& ui = rows.ui;
  Desk& desk = ui.desk;
  const float y = rows.top, left = rows.left + ui.px(34), gap = ui.px(5), remove = ui.row_height();
  row_number(ui, rows, "Piece", static_cast<int>(i), desk.selection.piece, y);
  const float room = std::min(rows.width, ui.px(440)) - ui.px(34) - remove - gap;
  const bool straight = desk.scenario.course.pieces[i].straight_mm.has_value();
  if (straight) {
    piece_entry(ui, i, "straight_mm", left, y, (room - gap) / 2);
    const float text_y = y + (ui.row_height() - line_height(ui, Type::small)) / 2;
    put_text(ui, Type::small, {left + room / 2 + ui.px(10), text_y}, ui.colours().faint, "straight");
  } else {
    piece_entry(ui, i, "radius_mm", left, y, (room - gap) / 2);
    piece_entry(ui, i, "turn_deg", left + (room + gap) / 2, y, (room - gap) / 2);
  }
  ImGui::SetCursorScreenPos({left + room + gap, y});
  const std::string id = "Remove piece " + std::to_string(i);
  const bool removed = icon_button(ui, id.c_str(), Icon::cross, desk.scenario.course.pieces.size() > 1);
  const RowPlace place{rows.left, y, rows.width, 0, 0, 0};
  end_row(rows, place, "course.pieces[" + std::to_string(i) + "]");
  new_line(rows);
  if (removed && apply(ui, view::with_piece_removed(desk.scenario, i))) desk.selection.piece = -1;
}

/// Where a new piece goes: behind the chosen one, or at the end.
std::size_t insert_place(const Desk& desk) {
  const std::size_t count = desk.scenario.course.pieces.size();
  return desk.selection.piece < 0 ? count
                                  : std::min(count, static_cast<std::size_t>(desk.selection.piece) + 1);
}

void piece_buttons(Rows& rows) {
  Ui& ui = rows.ui;
  Desk& desk = ui.desk;
  ImGui::SetCursorScreenPos({rows.left, rows.top + ui.px(4)});
  const auto insert = [&](Piece piece) {
    const std::size_t at = insert_place(desk);
    if (apply(ui, view::with_piece_inserted(desk.scenario, at, piece)))
      desk.selection.piece = static_cast<int>(at);
  };
  if (button(ui, "+ Straight")) insert(view::straight_of(new_straight_mm));
  ImGui::SameLine();
  if (button(ui, "+ Left")) insert(view::bend_of(new_radius_mm, new_turn_deg));
  ImGui::SameLine();
  if (button(ui, "+ Right")) insert(view::bend_of(new_radius_mm, -new_turn_deg));
  ImGui::SameLine();
  if (button(ui, "Close", Weight::plain, 0, !desk.scenario.course.closed)) {
    apply(ui, view::with_pieces_closed(desk.scenario, new_radius_mm));
  }
  tip(ui, "Leads the end back to the start with bends and a straight");
  const RowPlace place{rows.left, rows.top + ui.px(6), rows.width, 0, 0, 0};
  end_row(rows, place, "course.pieces");
  new_line(rows);
}

}  // namespace

void piece_rows(Rows& rows, const FieldInfo& info) {
  Ui& ui = rows.ui;
  Course& course = ui.desk.scenario.course;
  new_line(rows);
  if (course.pieces.empty()) {
    ImGui::SetCursorScreenPos({rows.left, rows.top});
    if (button(ui, "Build it from exact pieces instead")) {
      edit(ui.desk, [](Scenario& s) { s = view::with_pieces_begun(s, new_straight_mm); });
    }
    tip(ui, info.meaning);
    const RowPlace place{rows.left, rows.top, rows.width, 0, 0, 0};
    end_row(rows, place, "course.pieces");
    new_line(rows);
    return;
  }
  title(ui, "Pieces: length, or radius and turn");
  rows.top = rows.bottom = ImGui::GetCursorScreenPos().y;
  for (std::size_t i = 0; i < course.pieces.size(); ++i) {
    if (ImGui::IsRectVisible({rows.left, rows.top}, {rows.left + 1, rows.top + ui.row_height()})) {
      piece_row(rows, i);
    } else {  // not on screen: its place alone
      rows.bottom = rows.top + ui.row_height();
      new_line(rows);
    }
  }
  piece_buttons(rows);
}

void point_rows(Rows& rows, const FieldInfo& info) {
  Ui& ui = rows.ui;
  Desk& desk = ui.desk;
  new_line(rows);
  if (desk.scenario.course.points_mm.empty()) {
    ImGui::SetCursorScreenPos({rows.left, rows.top});
    if (button(ui, "Turn the pieces into drawn points", Weight::plain, 0, has_drive(desk))) {
      apply(ui, view::with_points_from_pieces(desk.scenario, desk.good.plan.ground->line));
    }
    tip(ui, info.meaning);
    const RowPlace place{rows.left, rows.top, rows.width, 0, 0, 0};
    end_row(rows, place, "course.points_mm");
    new_line(rows);
    return;
  }
  title(ui, "Points, in order");
  rows.top = rows.bottom = ImGui::GetCursorScreenPos().y;
  std::optional<std::size_t> removed;
  for (std::size_t i = 0; i < desk.scenario.course.points_mm.size(); ++i) {
    const float y = rows.top;
    const bool seen = ImGui::IsRectVisible({rows.left, y}, {rows.left + 1, y + ui.row_height()});
    if (seen) {
      row_number(ui, rows, "Point", static_cast<int>(i), desk.selection.point, y);
      const float gap = ui.px(5), remove = ui.row_height(), left = rows.left + ui.px(40);
      const float each = (std::min(rows.width, ui.px(440)) - ui.px(40) - 2 * remove - 3 * gap) / 2;
      const Point point = desk.scenario.course.points_mm[i];
      const double values[] = {point.x_mm, point.y_mm};
      for (int axis = 0; axis < 2; ++axis) {
        const std::string path = "course.points_mm[" + std::to_string(i) + "][" + std::to_string(axis) + "]";
        ImGui::SetCursorScreenPos({left + static_cast<float>(axis) * (each + gap), y});
        const NumberGrip grip{path, axis == 0 ? "mm x" : "mm y", info.range, 0.1};
        const Moved moved = entry_grip(ui, grip, values[axis], each);
        if (!moved.value) continue;
        end_edit(desk);
        const Point to = axis == 0 ? Point{*moved.value, point.y_mm} : Point{point.x_mm, *moved.value};
        apply(ui, view::with_point_moved(desk.scenario, i, to));
      }
      ImGui::SetCursorScreenPos({left + 2 * (each + gap), y});
      const bool sharp = view::is_corner(desk.scenario.course, i);
      const std::string corner = (sharp ? "L##corner " : "S##corner ") + std::to_string(i);
      if (button(ui, corner.c_str(), Weight::plain, remove))
        apply(ui, view::with_corner(desk.scenario, i, !sharp));
      tip(ui, sharp ? "Sharp corner; press for smooth" : "Smooth; press for a sharp corner");
      ImGui::SameLine(0, gap);
      if (icon_button(ui, ("Remove point " + std::to_string(i)).c_str(), Icon::cross)) removed = i;
    }
    rows.bottom = rows.top + ui.row_height();
    new_line(rows);
  }
  if (removed && apply(ui, view::with_point_deleted(desk.scenario, *removed))) desk.selection.point = -1;
  const RowPlace place{rows.left, rows.top - ui.row_height(), rows.width, 0, 0, 0};
  end_row(rows, place, "course.points_mm");
  new_line(rows);
}

void corner_row(Rows& rows, const FieldInfo& info) {
  // Corners are set at their points; here only a fault of theirs is shown.
  const RowPlace place{rows.left, rows.top - rows.ui.row_height(), rows.width, 0, 0, 0};
  end_row(rows, place, path_of(info));
  new_line(rows);
}

void gap_rows(Rows& rows, const FieldInfo& info) {
  Ui& ui = rows.ui;
  Desk& desk = ui.desk;
  new_line(rows);
  title(ui, "Gaps in the line");
  rows.top = rows.bottom = ImGui::GetCursorScreenPos().y;
  const double length = length_mm(desk);
  std::optional<std::size_t> removed;
  for (std::size_t i = 0; i < desk.scenario.course.gaps_mm.size(); ++i) {
    const float y = rows.top, gap = ui.px(5), left = rows.left + ui.px(34), remove = ui.row_height();
    row_number(ui, rows, "Gap", static_cast<int>(i), desk.selection.gap, y);
    const float each = (std::min(rows.width, ui.px(440)) - ui.px(34) - remove - 2 * gap) / 2;
    const Stretch stretch = desk.scenario.course.gaps_mm[i];
    const double values[] = {stretch.from_mm, stretch.to_mm};
    for (int end = 0; end < 2; ++end) {
      const std::string path = "course.gaps_mm[" + std::to_string(i) + "][" + std::to_string(end) + "]";
      ImGui::SetCursorScreenPos({left + static_cast<float>(end) * (each + gap), y});
      const NumberGrip grip{path, end == 0 ? "mm from" : "mm to", info.range, info.grain};
      const Moved moved = entry_grip(ui, grip, values[end], each);
      if (!moved.value) continue;
      end_edit(desk);
      apply(ui, view::with_gap_end(desk.scenario, i, end == 1, *moved.value, length));
    }
    ImGui::SetCursorScreenPos({left + 2 * (each + gap), y});
    if (icon_button(ui, ("Remove gap " + std::to_string(i)).c_str(), Icon::cross)) removed = i;
    const RowPlace place{rows.left, y, rows.width, 0, 0, 0};
    end_row(rows, place, "course.gaps_mm[" + std::to_string(i) + "]");
    new_line(rows);
  }
  if (removed && apply(ui, view::with_gap_removed(desk.scenario, *removed))) desk.selection.gap = -1;
  ImGui::SetCursorScreenPos({rows.left, rows.top + ui.px(2)});
  if (button(ui, "+ Gap at the cursor", Weight::plain, 0, has_drive(desk))) {
    const TraceRow row = between_rows(desk.good.trace, desk.playback.cursor);
    const double at =
        std::max(0.0, row.progress * 1000.0 - length * std::floor(row.progress * 1000.0 / length));
    const double wide = 2.0 * desk.scenario.course.line_mm;
    apply(ui, view::with_gap(desk.scenario, std::max(0.0, at - wide / 2), std::min(length, at + wide / 2),
                             length));
  }
  const RowPlace place{rows.left, rows.top + ui.px(2), rows.width, 0, 0, 0};
  end_row(rows, place, "course.gaps_mm", info.meaning);
  new_line(rows);
}

}  // namespace lw::panel
