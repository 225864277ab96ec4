#include "capsigh/answer/charting.hpp"

#include <cmath>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

ControlConstants::BySize by_size(const Library& library, std::string_view key) {
  ControlConstants::BySize table{};
  const auto& values = library.at(key).values;
  constexpr std::size_t smallest = 2;
  for (std::size_t i = 0; i < values.size() && i + smallest < table.size(); ++i) {
    table[i + smallest] = values[i].value;
  }
  return table;
}

Interval in_unit_of(const Interval& si, const Unit& unit) {
  const auto end = [&](double x) { return std::isfinite(x) ? in_unit(x, unit) : x; };
  return {end(si.low), end(si.high)};
}

}  // namespace

ControlConstants control_constants(const Library& library) {
  ControlConstants c;
  c.d2 = by_size(library, "chart.d2");
  c.c4 = by_size(library, "chart.c4");
  c.a2 = by_size(library, "chart.A2");
  c.a3 = by_size(library, "chart.A3");
  c.b3 = by_size(library, "chart.B3");
  c.b4 = by_size(library, "chart.B4");
  c.d3_limit = by_size(library, "chart.D3");
  c.d4_limit = by_size(library, "chart.D4");
  return c;
}

RunsRules runs_rules(const Library& library) {
  const auto& values = library.at("chart.runs").values;
  const auto length = [&](std::size_t i) { return static_cast<int>(values[i].value); };
  return {values[0].value, length(1), length(2), length(3), length(4), length(5)};
}

void use_constants(SummaryPlan& plan, const Library& library) {
  plan.chart.table = control_constants(library);
  plan.chart.rules = runs_rules(library);
  plan.preliminary = static_cast<std::uint64_t>(library.at("assumed.chart_points").values[0].value);
}

SummaryPlan summary_plan(const Recipe& recipe, std::string_view recipe_text,
                         const ReadingBinding& binding, const Library& library) {
  const auto& charting = recipe.charting;
  SummaryPlan plan;
  plan.quantity = binding.binding.problem.medium.gases[binding.gas].name;
  plan.unit = binding.unit->text;
  plan.wish = binding.wish;
  plan.limits = in_unit_of(binding.accepted, *binding.unit);
  for (const auto& name : charting.group_by) plan.group_by.push_back(name.text);
  plan.recipe_digest = sha1_digest(recipe_text);
  plan.constants_digest = library.digest();
  plan.title = recipe.title;
  use_constants(plan, library);
  plan.chart.subgroup = charting.subgroup.value_or(1);
  if (charting.subgroup_column) {
    plan.chart.by_label = true;
    plan.label_column = charting.subgroup_column->text;
  }
  if (charting.centre && charting.sigma) {
    plan.chart.established =
        Established{in_unit(charting.centre->amount.value->value(), *binding.unit),
                    difference_in_unit(charting.sigma->amount.value->value(), *binding.unit)};
  }
  return plan;
}

}  // namespace capsigh
