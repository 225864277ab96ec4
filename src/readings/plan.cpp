#include "capsigh/readings/plan.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "capsigh/answer/advice.hpp"
#include "capsigh/answer/charting.hpp"

namespace capsigh {
namespace {

Pressure ambient_now(const Case& c) {
  if (!c.ambient.altitude) return c.ambient.stated.now();
  return c.ambient.atmosphere(c.ambient.altitude->now());
}

// Half of what one standard uncertainty to either side moves the ambient by.
Pressure doubt_of_ambient(Case c) {
  const auto at = [&](double z) {
    c.ambient.stated.z = z;
    if (c.ambient.altitude) c.ambient.altitude->z = z;
    return ambient_now(c);
  };
  const double half = 0.5 * std::abs((at(1) - at(-1)).value());
  return from_si<Pressure>(half);
}

template <class Q>
Q together(const Uncertain<Q>& a, const Uncertain<Q>& b) {
  return from_si<Q>(std::hypot(si_value(a.u), si_value(b.u)));
}

ColumnWishes wishes_of(const ChartingSection& charting) {
  ColumnWishes wishes;
  for (const auto& c : charting.columns) wishes.columns.push_back({c.header, c.meaning});
  wishes.group_by = charting.group_by;
  wishes.subgroup = charting.subgroup_column;
  return wishes;
}

std::string needed_in_words(const Improvement& i) {
  const bool pressure = i.unit == "Pa";
  const auto& unit = pressure ? *find_unit("bar", Dimension::pressure)
                              : *find_unit("K", Dimension::temperature_difference);
  const std::string what = i.input == "gauge.pressure"      ? "a gauge"
                           : i.input == "gauge.temperature" ? "a thermometer"
                                                            : i.input;
  return fmt::format("{} of ± {} {}", what, significant(difference_in_unit(i.needed, unit), 2),
                     pressure ? "bar" : "K");
}

// Which instruments would let a value be accepted at all.
std::string opened_by(const std::vector<BudgetLine>& budget, double wanted) {
  std::vector<BudgetLine> lines;
  for (const auto& line : budget) lines.push_back(line);
  const auto advice = advise(lines, wanted);
  if (advice.by == Advice::By::none) return "no instrument: the published constants leave more";
  std::string all;
  for (const auto& i : advice.improvements) {
    all += (all.empty() ? "" : " and ") + needed_in_words(i);
  }
  return all;
}

// Judged at the temperature of the recipe's contact, else at 20 °C, on the middle of the limits.
std::optional<Finding> empty_zone(const Recipe& recipe, const ReadingBinding& binding,
                                  const Library& library) {
  const Interval& limits = binding.accepted;
  if (!limits.bounded() || !binding.rule.guarded) return std::nullopt;
  const bool two = std::isfinite(limits.low) && std::isfinite(limits.high);
  const double wish = two                          ? 0.5 * (limits.low + limits.high)
                      : std::isfinite(limits.high) ? limits.high
                                                   : limits.low;
  auto t = from_si<Temperature>(library.at("fundamental.T_content").values[0].value);
  if (recipe.contact && recipe.contact->temperature && recipe.contact->temperature->value) {
    t = *recipe.contact->temperature->value;
  }
  const Case& c = binding.binding.problem;
  const auto shown = ReadingModel(c, binding.gas, binding.measure).pressure(t, wish);
  if (refused(shown) != nullptr) return std::nullopt;
  const auto read =
      read_with_doubt(c, binding, {t, std::get<GaugePressure>(shown), std::nullopt, std::nullopt});
  if (refused(read) != nullptr) return std::nullopt;
  const auto& doubt = std::get<ReadContent>(read);
  const auto zone = acceptance_zone(doubt.u, limits, binding.rule);
  if (!zone.empty) return std::nullopt;
  Finding f;
  f.severity = Severity::caution;
  f.code = "empty-acceptance-zone";
  const auto celsius = *find_unit("°C", Dimension::temperature);
  f.message = fmt::format(
      "these instruments cannot show that a package is inside: U is {} {} at {} °C, the tolerance "
      "{}; every reading will be undecided or outside",
      significant(2 * doubt.u / binding.unit->factor, 2), binding.unit->text,
      significant(in_unit(t.kelvin(), celsius), 3), binding.wish);
  if (zone.u_to_open > 0) f.expected = opened_by(doubt.budget, zone.u_to_open / doubt.u);
  return f;
}

// What the recipe leaves open: assumptions, cautions, and instruments that count as exact.
Findings notes_of(const Binding& binding) {
  Findings notes = binding.notes;
  std::string exact;
  for (const auto& key : binding.doubt_not_stated) {
    if (key.starts_with("gauge.")) exact += (exact.empty() ? "" : ", ") + key;
  }
  if (exact.empty()) return notes;
  Finding f;
  f.severity = Severity::assumption;
  f.code = "doubt-not-stated";
  f.message = fmt::format("no doubt stated for {}: they count as exact", exact);
  f.example = "[gauge]\npressure = \"± 0.02 bar\"\ntemperature = \"± 0.2 K\"";
  notes.push_back(std::move(f));
  return notes;
}

}  // namespace

Outcome<ReadingPlan> plan_readings(const Recipe& recipe, std::string_view recipe_text,
                                   const Library& library) {
  auto bound = bind_readings(recipe, library, recipe.container.has_value());
  if (!bound || has_error(bound.findings)) return {{}, bound.findings};
  ReadingPlan plan;
  plan.binding = std::make_shared<const ReadingBinding>(std::move(*bound.value));
  const ReadingBinding& binding = *plan.binding;
  const Case& c = binding.binding.problem;
  plan.laws = std::make_shared<const ReadingLaws>(c, binding.gas, binding.measure);
  plan.kernel = std::make_shared<const Kernel>(*plan.laws);
  plan.unit = binding.unit;
  plan.limits = binding.accepted;
  plan.rule = binding.rule;
  plan.ambient = ambient_now(c);
  plan.doubt.ambient = doubt_of_ambient(c);
  if (c.gauge) {
    plan.doubt.gauge = together(c.gauge->pressure, c.gauge->pressure_offset);
    plan.doubt.temperature = together(c.gauge->temperature, c.gauge->temperature_offset);
    plan.pressure_offset = c.gauge->pressure.best + c.gauge->pressure_offset.best;
    plan.temperature_offset = c.gauge->temperature.best + c.gauge->temperature_offset.best;
    plan.pierced = c.gauge->dead && c.gauge->dead->best.value() > 0;
  }
  plan.wishes = wishes_of(recipe.charting);
  plan.summary = summary_plan(recipe, recipe_text, binding, library);
  plan.widening = library.at("assumed.widening").values[0].value;
  Findings notes = notes_of(binding.binding);
  if (!plan.judges()) {
    Finding f;
    f.severity = Severity::caution;
    f.code = "nothing-judged";
    f.message = "the recipe has no target with a tolerance: contents are given, nothing is judged";
    f.example = "[target]\nCO2 = \"3.70 vol ± 0.10 vol\"";
    notes.push_back(std::move(f));
  }
  if (auto f = empty_zone(recipe, binding, library)) notes.push_back(std::move(*f));
  return {std::move(plan), std::move(notes)};
}

}  // namespace capsigh
