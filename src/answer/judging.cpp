#include "judging.hpp"

#include <cmath>

namespace capsigh::answer_detail {
namespace {

// The figure of a gas in the measure of its target: value and u in SI units, as machines read it,
// and the figure whose budget tells where u comes from.
struct Measured {
  double value = 0;
  double u = 0;
  JsonUnit unit;
  std::string_view budget;
};

Measured in_measure(const GasFigures& g, ContentMeasure measure, double molar_mass) {
  const auto of = [](const auto& figure, const JsonUnit& unit, std::string_view budget) {
    return Measured{si_value(figure.value), si_value(figure.u), unit, budget};
  };
  // Contents by mass and by amount differ by constants: one budget serves them all.
  constexpr std::string_view by_mass = "mass_concentration";
  switch (measure) {
    case ContentMeasure::volumes: return of(g.volumes, json_unit::one, "volumes");
    case ContentMeasure::mass_concentration:
      return of(g.mass_concentration, json_unit::gram_per_litre, by_mass);
    case ContentMeasure::amount_concentration:
      return of(g.amount_concentration, json_unit::mole_per_litre, by_mass);
    case ContentMeasure::mass_fraction:
      return of(g.mass_fraction, json_unit::milligram_per_kilogram, by_mass);
    case ContentMeasure::molality: break;
  }
  auto by_molality = of(g.mass_fraction, json_unit::mole_per_kilogram, by_mass);
  by_molality.value /= molar_mass;
  by_molality.u /= molar_mass;
  return by_molality;
}

// What would open an empty zone or decide an undecided value.
void advise_on(const Measured& y, const Interval& accepted, const JudgingRule& rule,
               const std::vector<BudgetLine>& lines, JudgedTarget& judged) {
  if (!(y.u > 0) || !rule.guarded) return;
  if (judged.zone.empty) {
    judged.advice = advise(lines, judged.zone.u_to_open / y.u);
  } else if (judged.verdict == Verdict::undecided) {
    if (const auto enough = u_to_decide(y.value, y.u, accepted, rule)) {
      judged.advice = advise(lines, *enough / y.u);
    }
  }
}

JudgedTarget judged_target(const Measured& y, const ContentCase& target, const JudgingRule& rule,
                           const std::vector<BudgetLine>& lines) {
  JudgedTarget judged;
  const auto judgement = judge(y.value, y.u, target.accepted, rule);
  judged.verdict = judgement.verdict;
  judged.probability = judgement.probability;
  judged.doubt_stated = y.u > 0;
  judged.guarded = rule.guarded;
  judged.unit = y.unit;
  judged.measure = target.measure;
  judged.zone = acceptance_zone(y.u, target.accepted, rule);
  advise_on(y, target.accepted, rule, lines, judged);
  return judged;
}

}  // namespace

JudgingRule rule_of(const Recipe& recipe, const Library& library) {
  const auto& record = library.at("assumed.risk");
  JudgingRule rule{true, record.values[0].value * record.factor};
  if (!recipe.judging) return rule;
  if (recipe.judging->rule) rule.guarded = recipe.judging->rule->text != "simple";
  if (recipe.judging->risk) rule.risk = recipe.judging->risk->value->value();
  return rule;
}

void judge_targets(const Binding& binding, const JudgingRule& rule, Report& report) {
  const Case& c = binding.problem;
  if (c.content_from_target || !report.answer.blend.empty() || c.target_at_package) return;
  std::size_t wish = 0;
  std::size_t limit = 0;
  for (const auto& target : c.targets) {
    const auto& words = target.is_limit ? report.limits[limit++] : report.targets[wish++];
    if (!target.accepted.bounded()) continue;  // a wish without a tolerance judges nothing
    for (const auto& g : report.answer.gases) {
      const auto& gas = c.medium.gases[target.gas];
      if (g.gas != gas.name) continue;
      const auto y = in_measure(g, target.measure, gas.molar_mass.law.value.value());
      const auto figure = FigurePath("dissolved", g.gas, y.budget).text();
      auto judged = judged_target(y, target, rule, budget_of(report.budget, figure));
      judged.gas = words.first;
      judged.wish = words.second;
      report.limits_met = report.limits_met && judged.verdict == Verdict::inside;
      report.judged.push_back(std::move(judged));
    }
  }
}

}  // namespace capsigh::answer_detail
