// The list of fields itself, and that comparing, hashing and writing miss none of them.
#include <set>
#include <string>

#include "engine/scenario/fields.h"
#include "engine/scenario/keys.h"
#include "engine/scenario/same.h"
#include "engine/scenario/text.h"
#include "engine/scenario/validate.h"
#include "tests/catch.h"
#include "tests/engine/scenario/samples.h"

namespace lw {
namespace {

// Every way in which a value of each type can differ from another: calls use(changed value) for each.
void changes(double value, auto&& use) { use(value == 1.25 ? 2.5 : 1.25); }
void changes(std::int64_t value, auto&& use) { use(value + 1); }
void changes(int value, auto&& use) { use(value + 1); }
void changes(bool value, auto&& use) { use(!value); }
void changes(const std::string& value, auto&& use) {
  use(value + "x");
  use(value + '\n');
}
template <NamedEnum E>
void changes(E value, auto&& use) {
  for (std::size_t i = 0; i < names_of(value).size(); ++i)
    if (static_cast<E>(i) != value) use(static_cast<E>(i));
}
template <class T>
void changes(const std::optional<T>& value, auto&& use) {
  if (value) use(std::optional<T>{});
  changes(value.value_or(T{}), [&](T inner) { use(std::optional<T>(inner)); });
}
void changes(const Point& point, auto&& use) {
  changes(point.x_mm, [&](double x) { use(Point{x, point.y_mm}); });
  changes(point.y_mm, [&](double y) { use(Point{point.x_mm, y}); });
}
void changes(const Stretch& gap, auto&& use) {
  changes(gap.from_mm, [&](double from) { use(Stretch{from, gap.to_mm}); });
  changes(gap.to_mm, [&](double to) { use(Stretch{gap.from_mm, to}); });
}
void changes(const Piece& piece, auto&& use) {
  const auto one = [&](std::optional<double> Piece::*part) {
    changes(piece.*part, [&](std::optional<double> value) {
      Piece changed = piece;
      changed.*part = value;
      use(changed);
    });
  };
  one(&Piece::straight_mm);
  one(&Piece::radius_mm);
  one(&Piece::turn_deg);
}
void changes(const Spread& spread, auto&& use) {
  changes(spread.key, [&](const std::string& key) { use(Spread{key, spread.kind, spread.amount}); });
  changes(spread.kind, [&](SpreadKind kind) { use(Spread{spread.key, kind, spread.amount}); });
  changes(spread.amount, [&](double amount) { use(Spread{spread.key, spread.kind, amount}); });
}
template <class T>
void changes(const std::vector<T>& values, auto&& use) {
  std::vector<T> longer = values;
  longer.push_back(T{});
  use(longer);
  for (std::size_t i = 0; i < values.size(); ++i) {
    changes(values[i], [&](const T& value) {
      std::vector<T> changed = values;
      changed[i] = value;
      use(changed);
    });
  }
}

TEST_CASE("every field is described, once, and its default lies in its range") {
  std::set<std::string> paths;
  const Scenario defaults;
  each_field(defaults, [&](const FieldInfo& info, const auto& value) {
    INFO(path_of(info));
    CHECK(paths.insert(path_of(info)).second);
    CHECK(!info.label.empty());
    REQUIRE(!info.meaning.empty());
    CHECK(info.meaning.back() == '.');
    CHECK(info.most >= 1);
    CHECK(is_key(info.section, info.key));
    CHECK(!find_fault_in(defaults, path_of(info)));
    if constexpr (std::is_same_v<std::decay_t<decltype(value)>, double>) CHECK(info.grain > 0);
  });
  CHECK(paths.size() > 60);
  Piece piece;
  each_piece_field(piece, [&](const FieldInfo& info, const auto&) { CHECK(!info.meaning.empty()); });
}

TEST_CASE("the names of enum values are as many as the values") {
  CHECK(name_of(Scheme::bar) == "bar");
  CHECK(names_of(Scheme{}).size() == 3);
  CHECK(name_of(Edge::right) == "right");
  CHECK(names_of(Edge{}).size() == 2);
  CHECK(name_of(GainUnit::per_second) == "per_second");
  CHECK(names_of(GainUnit{}).size() == 2);
  CHECK(name_of(SpreadKind::normal) == "normal");
  CHECK(names_of(SpreadKind{}).size() == 2);
  CHECK(name_of(Outcome::time_out) == "time_out");
  CHECK(names_of(Outcome{}).size() == 3);
}

TEST_CASE("a change of any field alone gives another scenario, another hash and another text") {
  for (const std::uint64_t seed : {1u, 2u, 3u}) {
    const Scenario scenario = seed == 1 ? samples::seedling_cart() : samples::random_scenario(seed);
    const std::uint64_t hash = content_hash(scenario);
    const std::string text = write(scenario);
    const std::string brief = write_short(scenario);
    Scenario changed = scenario;
    std::set<std::string> fields;
    each_field(changed, [&](const FieldInfo& info, auto& value) {
      const auto old = value;
      changes(old, [&](const auto& other) {
        value = other;
        INFO("seed " << seed << ", " << path_of(info));
        CHECK(!same(scenario, changed));
        CHECK(content_hash(changed) != hash);
        CHECK(write(changed) != text);
        CHECK(write_short(changed) != brief);
        fields.insert(path_of(info));
      });
      value = old;
    });
    CHECK(fields.size() > 60);
    CHECK(same(scenario, changed));
    CHECK(content_hash(changed) == hash);
  }
}

TEST_CASE("0 and -0 are different bits") {
  Scenario scenario = samples::seedling_cart();
  const Scenario before = scenario;
  scenario.controller.ki = -0.0;
  CHECK(!same(before, scenario));
  CHECK(content_hash(before) != content_hash(scenario));
}

}  // namespace
}  // namespace lw
