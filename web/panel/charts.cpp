#include "web/panel/charts.h"

#include <algorithm>
#include <cmath>

namespace lw::panel {
namespace {

constexpr double least_shown = 0.02;  // s
constexpr float gutter = 128.0f;      // left of the strips: names and values at the cursor
constexpr float axis_height = 24.0f;
constexpr float edge = 10.0f;  // right of the strips

constexpr Strip all_strips[] = {{"Error", "%", 0, 1},    {"Terms", "%", 1, 3},      {"Steer", "%", 4, 1},
                                {"Commands", "%", 5, 2}, {"Deviation", "mm", 7, 1}, {"Speed", "mm/s", 8, 1}};
constexpr Curve fraction_curves[] = {
    {"Error", &TraceRow::error, 100}, {"P", &TraceRow::p, 100},
    {"I", &TraceRow::i, 100},         {"D", &TraceRow::d, 100},
    {"Steer", &TraceRow::steer, 100}, {"Left", &TraceRow::left, 100},
    {"Right", &TraceRow::right, 100}, {"Deviation", &TraceRow::deviation, 1e3},
    {"Speed", &TraceRow::speed, 1e3}};
constexpr std::size_t curve_count = std::size(fraction_curves);

const char* unit_of(const Strip& strip, Scheme scheme) {
  return strip.first == 0 && scheme == Scheme::bar ? "mm" : strip.unit;
}

/// How tall a strip is beside the others: its curves' names lie one above the other.
float share_of(const Strip& strip) { return strip.count == 1 ? 1.0f : strip.count == 2 ? 1.25f : 1.6f; }

ImU32 colour_of(const Theme& t, int curve) {
  const ImU32 colours[curve_count] = {t.error, t.p, t.i, t.d, t.steer, t.left, t.right, t.deviation, t.speed};
  return colours[curve];
}

bool is_shown(const ChartState& charts, std::size_t strip) { return (charts.shown >> strip) & 1u; }

/// The height of every curve over the whole drive, so that zooming in time leaves the vertical axes alone.
void measure_curves(const Desk& desk, ChartState& charts) {
  if (charts.measured == desk.good.revision) return;
  const auto all = curves(desk.good.scenario.sensors.scheme);
  charts.lowest.assign(all.size(), 0.0f);
  charts.highest.assign(all.size(), 0.0f);
  for (std::size_t c = 0; c < all.size(); ++c) {
    for (const TraceRow& row : desk.good.trace.rows) {
      const auto v = static_cast<float>(row.*all[c].member * all[c].scale);
      charts.lowest[c] = std::min(charts.lowest[c], v);
      charts.highest[c] = std::max(charts.highest[c], v);
    }
  }
  charts.measured = desk.good.revision;
}

struct Plot {
  Box box;
  float low, high;  // of the vertical axis
  float y(float value) const { return box.bottom() - (value - low) / (high - low) * box.height; }
};

/// Ticks as many as the height has room for, with one beside 0 at least.
Ticks value_ticks(const Ui& ui, const Plot& plot) {
  const auto most = static_cast<int>(plot.box.height / (line_height(ui, Type::small) * 1.2f));
  for (int count = std::clamp(most, 1, 6);; ++count) {
    Ticks ticks = ticks_of(plot.low, plot.high, count);
    if (ticks.at.size() > 1 || count > 12) return ticks;
  }
}

Plot plot_of(const ChartState& charts, const Strip& strip, const Box& box) {
  Plot plot{box, 0.0f, 0.0f};
  for (int c = strip.first; c < strip.first + strip.count; ++c) {
    plot.low = std::min(plot.low, charts.lowest[static_cast<std::size_t>(c)]);
    plot.high = std::max(plot.high, charts.highest[static_cast<std::size_t>(c)]);
  }
  if (!(plot.high - plot.low > 1e-6f)) {
    plot.low -= 1.0f;
    plot.high += 1.0f;
  }
  const float margin = 0.08f * (plot.high - plot.low);
  plot.low -= plot.low < 0 ? margin : 0.0f;
  plot.high += margin;
  return plot;
}

void draw_value_axis(const Ui& ui, const Plot& plot) {
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const float text = line_height(ui, Type::small);
  Ticks ticks = value_ticks(ui, plot);
  // The farthest from 0 are labelled first; a label that would lie on another is left out.
  std::stable_sort(ticks.at.begin(), ticks.at.end(),
                   [](double a, double b) { return std::abs(a) > std::abs(b); });
  std::vector<float> taken;
  for (double at : ticks.at) {
    const float y = std::round(plot.y(static_cast<float>(at))) + 0.5f;
    draw.AddLine({plot.box.x, y}, {plot.box.right(), y}, at == 0 ? t.faint : faded(t.rule, 0.8f));
    const float label_y = std::clamp(y - text / 2, plot.box.y - 2, plot.box.bottom() - text + 2);
    const auto hides = [&](float other) { return std::abs(other - label_y) < text - 2; };
    if (std::any_of(taken.begin(), taken.end(), hides)) continue;
    taken.push_back(label_y);
    const std::string label = fixed(at, ticks.decimals);
    const float width = measure(ui, Type::small, label).x;
    put_text(ui, Type::small, {plot.box.x - width - ui.px(6), label_y}, t.faint, label);
  }
}

/// Names of the curves, each with its value at the cursor.
void draw_names(const Ui& ui, const Strip& strip, const Box& box, const TraceRow& row) {
  const Theme& t = ui.colours();
  const auto all = curves(ui.desk.good.scenario.sensors.scheme);
  const char* unit = unit_of(strip, ui.desk.good.scenario.sensors.scheme);
  const float line = line_height(ui, Type::small), count = static_cast<float>(strip.count);
  const bool one_line = box.height < line * count * 0.95f;  // names alone, side by side
  float x = box.x + ui.px(14),
        y = box.y + std::max(0.0f, (box.height - line * (one_line ? 1.0f : count)) / 2);
  for (int c = strip.first; c < strip.first + strip.count; ++c) {
    const Curve& curve = all[static_cast<std::size_t>(c)];
    const float name = put_text(ui, Type::small, {x, y}, colour_of(t, c), curve.name);
    if (one_line && strip.count > 1) {
      x += name + ui.px(8);
      continue;
    }
    std::string value = fixed(row.*curve.member * curve.scale, 1);
    if (strip.count == 1) value += std::string(" ") + unit;
    put_text(ui, Type::small, {x + name + ui.px(6), y}, t.text, value);
    y += line;
  }
}

void draw_time_axis(const Ui& ui, const Box& plots, const Span& time, float bottom) {
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const Ticks ticks = ticks_of(time.low, time.high, std::max(2, static_cast<int>(plots.width / ui.px(80))));
  const float y = bottom - ui.px(axis_height) + ui.px(4);
  for (double at : ticks.at) {
    const float x =
        std::round(plots.x + static_cast<float>((at - time.low) / (time.high - time.low)) * plots.width);
    draw.AddLine({x + 0.5f, plots.y}, {x + 0.5f, y}, faded(t.rule, 0.55f));
    const std::string label = fixed(at, ticks.decimals) + " s";
    const float width = measure(ui, Type::small, label).x;
    const float left = std::clamp(x - width / 2, plots.x, plots.right() - width);
    put_text(ui, Type::small, {left, y}, t.faint, label);
  }
}

void handle_hand(Ui& ui, const Box& plots, const Span& time) {
  const ImGuiIO& io = ImGui::GetIO();
  ChartState& charts = ui.state.charts;
  const double per_px = (time.high - time.low) / std::max(1.0f, plots.width);
  const double pointed = time.low + (io.MousePos.x - plots.x) * per_px;
  if (ImGui::IsItemHovered()) {
    if (ImGui::IsMouseDoubleClicked(ImGuiMouseButton_Left)) charts.from = charts.to = 0.0;
    if (io.MouseWheel != 0) zoom_time(ui.desk, charts, pointed, std::pow(1.2, io.MouseWheel), 0.0);
    if (io.MouseWheelH != 0) zoom_time(ui.desk, charts, pointed, 1.0, -io.MouseWheelH * 40.0 * per_px);
  }
  if (!ImGui::IsItemActive()) return;
  const bool pan = io.KeyShift || !io.MouseDown[0];
  if (pan && io.MouseDelta.x != 0) zoom_time(ui.desk, charts, pointed, 1.0, -io.MouseDelta.x * per_px);
  if (!pan && (io.MouseDelta.x != 0 || ImGui::IsItemActivated())) {
    ui.desk.playback.playing = false;
    set_cursor(ui.desk, pointed);
  }
}

void draw_cursor(const Ui& ui, const Box& plots, const Span& time) {
  const double at = ui.desk.playback.cursor;
  if (at < time.low || at > time.high) return;
  const Theme& t = ui.colours();
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  const float share = static_cast<float>((at - time.low) / (time.high - time.low));
  const float x = std::round(plots.x + share * plots.width) + 0.5f;
  draw.AddLine({x, plots.y}, {x, plots.bottom()}, t.accent, ui.px(1.5f));
  draw.AddCircleFilled({x, plots.bottom()}, ui.px(4), t.accent);
}

/// What the picture over the strips is to show. It lies on whole device pixels.
ChartKey picture_key(const Ui& ui, const Box& plots, const Span& time) {
  const Desk& desk = ui.desk;
  const float ratio = ImGui::GetIO().DisplayFramebufferScale.x;
  const auto whole = [&](float length) { return static_cast<int>(std::round(length * ratio)); };
  ChartKey key;
  key.revision = desk.good.revision;
  key.kept_revision = desk.kept && desk.show_kept ? desk.kept->revision : 0;
  key.from = time.low;
  key.to = time.high;
  key.left = whole(plots.x);
  key.top = whole(plots.y);
  key.columns = whole(plots.right()) - key.left;
  key.rows = whole(plots.bottom()) - key.top;
  key.pixels = ui.px(1.0f) * ratio;
  key.shown = ui.state.charts.shown;
  key.dark = desk.dark;
  return key;
}

/// Draws the curves of one strip into the picture.
void paint_strip(const Desk& desk, ChartState& charts, const ChartKey& key, const Strip& strip,
                 const Plot& plot) {
  const float ratio = ImGui::GetIO().DisplayFramebufferScale.x, top = static_cast<float>(key.top);
  const auto row = [&](float y) { return std::clamp(static_cast<int>(y * ratio - top), 0, key.rows); };
  const StripPlace place{row(plot.box.y), row(plot.box.bottom()), plot.y(0.0f) * ratio - top,
                         plot.box.height / (plot.high - plot.low) * ratio};
  const auto all = curves(desk.good.scenario.sensors.scheme);
  const auto paint = [&](const Trace& trace, int c, ImU32 colour, float thick) {
    const Decimated curve = decimate(trace.rows, all[static_cast<std::size_t>(c)], key.from, key.to,
                                     static_cast<std::size_t>(key.columns));
    draw_curve(charts.pixels, place, curve, colour, thick * key.pixels);
  };
  const Theme& t = theme(key.dark);
  if (strip.count == 1 && key.kept_revision != 0) paint(desk.kept->trace, strip.first, t.kept, 1.2f);
  for (int c = strip.first; c < strip.first + strip.count; ++c)
    paint(desk.good.trace, c, colour_of(t, c), 1.5f);
}

/// All curves at once, painted anew only when they look different.
void draw_curves(const Ui& ui, std::span<const Strip> chosen, std::span<const Plot> strips,
                 const ChartKey& key) {
  ChartState& charts = ui.state.charts;
  if (!(key == charts.drawn)) {
    clear(charts.pixels, key.columns, key.rows);
    for (std::size_t i = 0; i < chosen.size(); ++i) paint_strip(ui.desk, charts, key, chosen[i], strips[i]);
    page::show(charts.picture, key.columns, key.rows, charts.pixels.colours.data());
    charts.drawn = key;
  }
  const float ratio = ImGui::GetIO().DisplayFramebufferScale.x;
  const auto at = [&](int x, int y) {
    return ImVec2(static_cast<float>(x) / ratio, static_cast<float>(y) / ratio);
  };
  ImGui::GetWindowDrawList()->AddImage(page::texture_of(charts.picture), at(key.left, key.top),
                                       at(key.left + key.columns, key.top + key.rows));
}

/// Which strips to show, a row of names at the right of the time axis.
void strip_choice(Ui& ui, const Box& box) {
  const Theme& t = ui.colours();
  ChartState& charts = ui.state.charts;
  float x = box.x + ui.px(4);
  const float height = box.height, y = box.y;
  const float target = std::max(height, ui.px(axis_height));
  ImGui::SetCursorScreenPos({x, y});
  const std::string fold = std::string(charts.open ? "Fold charts" : "Show charts") + "##fold";
  if (ImGui::InvisibleButton(fold.c_str(), {target, height})) charts.open = !charts.open;
  const ImVec2 c{x + target / 2, y + height / 2};
  const float r = ui.px(5), s = charts.open ? 1.0f : -1.0f;
  ImDrawList& draw = *ImGui::GetWindowDrawList();
  draw.AddTriangleFilled({c.x - r, c.y - s * r * 0.6f}, {c.x + r, c.y - s * r * 0.6f},
                         {c.x, c.y + s * r * 0.8f}, ImGui::IsItemHovered() ? t.accent : t.faint);
  tip(ui, charts.open ? "Fold the charts" : "Show the charts");
  x += target + ui.px(4);
  for (std::size_t i = 0; i < std::size(all_strips); ++i) {
    const float width = measure(ui, Type::small, all_strips[i].name).x + ui.px(20);
    if (x + width > box.right()) break;
    ImGui::SetCursorScreenPos({x, y});
    const std::string id = std::string(all_strips[i].name) + " strip";
    if (ImGui::InvisibleButton(id.c_str(), {width, height})) {
      charts.shown ^= 1u << i;
      charts.open = charts.open || is_shown(charts, i);
    }
    const bool on = is_shown(charts, i) && charts.open;
    const float middle = y + height / 2;
    const ImU32 colour = on ? t.text : t.faint;
    if (on)
      draw.AddRectFilled({x, middle - ui.px(4)}, {x + ui.px(8), middle + ui.px(4)},
                         colour_of(t, all_strips[i].first));
    draw.AddRect({x, middle - ui.px(4)}, {x + ui.px(8), middle + ui.px(4)}, t.faint);
    put_text(ui, Type::small, {x + ui.px(12), middle - line_height(ui, Type::small) / 2},
             ImGui::IsItemHovered() ? t.accent : colour, all_strips[i].name);
    x += width + ui.px(6);
  }
}

}  // namespace

std::span<const Strip> strips() { return all_strips; }

std::span<const Curve> curves(Scheme scheme) {
  static constexpr auto bar = [] {
    std::array<Curve, curve_count> all{};
    std::copy(std::begin(fraction_curves), std::end(fraction_curves), all.begin());
    all[0].scale = 1.0;  // mm already
    return all;
  }();
  if (scheme == Scheme::bar) return bar;
  return fraction_curves;
}

Span time_shown(const Desk& desk, const ChartState& charts) {
  const double end =
      desk.good.trace.rows.empty() ? 1.0 : std::max(desk.good.trace.rows.back().t, least_shown);
  if (charts.to > charts.from && charts.from < end) return {charts.from, std::min(charts.to, end)};
  return {0.0, end};
}

void zoom_time(const Desk& desk, ChartState& charts, double about, double factor, double shift) {
  const Span time = time_shown(desk, charts);
  const double end = desk.good.trace.rows.empty() ? 1.0 : desk.good.trace.rows.back().t;
  const double width = std::clamp((time.high - time.low) / factor, std::min(least_shown, end), end);
  const double share = (about - time.low) / (time.high - time.low);
  const double from = std::clamp(about - share * width + shift, 0.0, std::max(0.0, end - width));
  charts.from = from;
  charts.to = from + width;
  if (width >= end) charts.from = charts.to = 0.0;
}

void pinch_charts(Ui& ui, const Box& box, const app::Pinch& pinch) {
  if (pinch.phase != app::Pinch::moved) return;
  const Span time = time_shown(ui.desk, ui.state.charts);
  const double per_px = (time.high - time.low) / std::max(1.0f, box.width - ui.px(gutter + edge));
  const double about = time.low + (pinch.x - box.x - ui.px(gutter)) * per_px;
  zoom_time(ui.desk, ui.state.charts, about, pinch.scale, -pinch.moved_x * per_px);
}

void draw_charts(Ui& ui, const Box& box) {
  const Desk& desk = ui.desk;
  ChartState& charts = ui.state.charts;
  const float axis = ui.px(axis_height), bar = ui.px(desk.layout.touch ? 40.0f : axis_height);
  strip_choice(ui, {box.x, box.y, box.width, bar});
  std::vector<Strip> chosen;
  for (std::size_t i = 0; i < std::size(all_strips); ++i) {
    if (is_shown(charts, i)) chosen.push_back(all_strips[i]);
  }
  if (!charts.open || chosen.empty() || !has_drive(desk)) return;
  const Box plots{box.x + ui.px(gutter), box.y + bar, box.width - ui.px(gutter + edge),
                  box.height - bar - axis};
  if (plots.width < 20 || plots.height < 20) return;
  Span time = time_shown(desk, charts);
  ImGui::SetCursorScreenPos({plots.x, plots.y});
  ImGui::SetNextItemAllowOverlap();
  ImGui::InvisibleButton("charts", {plots.width, plots.height + axis},
                         ImGuiButtonFlags_MouseButtonLeft | ImGuiButtonFlags_MouseButtonRight |
                             ImGuiButtonFlags_MouseButtonMiddle);
  handle_hand(ui, plots, time);
  time = time_shown(desk, charts);
  measure_curves(desk, charts);

  draw_time_axis(ui, plots, time, box.bottom());
  const TraceRow row = between_rows(desk.good.trace, desk.playback.cursor);
  const float gap = ui.px(6), count = static_cast<float>(chosen.size());
  float shares = 0.0f;
  for (const Strip& strip : chosen) shares += share_of(strip);
  const float unit = (plots.height - gap * (count - 1)) / shares;
  float top = plots.y;
  std::vector<Plot> strips;
  for (const Strip& strip : chosen) {
    const float height = unit * share_of(strip);
    strips.push_back(plot_of(charts, strip, {plots.x, top, std::floor(plots.width), height}));
    top += height + gap;
    draw_value_axis(ui, strips.back());
    draw_names(ui, strip, {box.x, strips.back().box.y, ui.px(gutter), height}, row);
  }
  draw_curves(ui, chosen, strips, picture_key(ui, plots, time));
  draw_cursor(ui, plots, time);
}

}  // namespace lw::panel
