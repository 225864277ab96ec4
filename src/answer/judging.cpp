#include "judging.hpp"

#include <cmath>

namespace capsigh::answer_detail {
namespace {

// Where a content stands in an answer: the last part of its path, what its SI value is divided by
// to be in the measure, and how machines read that.
struct InAnswer {
  std::string_view figure;
  double divisor = 1;
  JsonUnit unit;
};

InAnswer in_answer(ContentMeasure measure, double molar_mass) {
  switch (measure) {
    case ContentMeasure::volumes: return {"volumes", 1, json_unit::one};
    case ContentMeasure::mass_concentration:
      return {"mass_concentration", 1, json_unit::gram_per_litre};
    case ContentMeasure::amount_concentration:
      return {"amount_concentration", 1, json_unit::mole_per_litre};
    case ContentMeasure::mass_fraction:
      return {"mass_fraction", 1, json_unit::milligram_per_kilogram};
    case ContentMeasure::molality: break;
  }
  return {"mass_fraction", molar_mass, json_unit::mole_per_kilogram};
}

// Contents by mass and by amount differ by constants: one budget serves them all.
std::string budget_path(const std::string& path) {
  constexpr std::string_view volumes = ".volumes";
  if (path.ends_with(volumes)) return path;
  return path.substr(0, path.rfind('.') + 1) + "mass_concentration";
}

struct Measured {
  double value = 0;
  double u = 0;
  JsonUnit unit;
};

std::optional<Measured> measured(const Answer& answer, const WatchedTarget& target) {
  std::optional<Measured> y;
  each_figure(answer, [&](const FigurePath& path, const auto& figure, const JsonUnit&) {
    if (!figure.asked || path.text() != target.path) return;
    y = Measured{si_value(figure.value) / target.divisor, si_value(figure.u) / target.divisor,
                 target.unit};
  });
  return y;
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

// By the draws where there are some; a probability too near to what decides, for the number of
// draws, decides nothing.
Judgement by_draws(double p, std::uint64_t draws, const JudgingRule& rule) {
  const double scatter = 2 * std::sqrt(p * (1 - p) / static_cast<double>(draws));
  if (p - scatter >= 1.0 - rule.risk) return {Verdict::inside, p};
  if (p + scatter <= rule.risk) return {Verdict::outside, p};
  return {Verdict::undecided, p};
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
  // So coarse an instrument would call every content outside: it tells nothing.
  if (judged.zone.empty && judged.zone.best_probability <= rule.risk) {
    judged.verdict = Verdict::undecided;
  }
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

std::vector<WatchedTarget> watched_targets(const Binding& binding, const Answer& answer) {
  const Case& c = binding.problem;
  std::vector<WatchedTarget> watched;
  if (c.content_from_target || !answer.blend.empty()) return watched;
  for (const auto& target : c.targets) {
    const auto& gas = c.medium.gases[target.gas];
    const auto in = in_answer(target.measure, gas.molar_mass.law.value.value());
    const auto at = c.target_at_package ? FigurePath("container", "at", "0") : FigurePath();
    watched.push_back({at.then("dissolved").then(gas.name).then(in.figure).text(), in.divisor,
                       in.unit, target.accepted});
  }
  return watched;
}

void judge_targets(const Binding& binding, const JudgingRule& rule, Report& report) {
  const auto watched = watched_targets(binding, report.answer);
  std::size_t wish = 0;
  std::size_t limit = 0;
  for (std::size_t i = 0; i < watched.size(); ++i) {
    const auto& target = binding.problem.targets[i];
    const auto& words = target.is_limit ? report.limits[limit++] : report.targets[wish++];
    if (!target.accepted.bounded()) continue;  // a wish without a tolerance judges nothing
    const auto y = measured(report.answer, watched[i]);
    if (!y) continue;
    auto judged =
        judged_target(*y, target, rule, budget_of(report.budget, budget_path(watched[i].path)));
    if (report.monte_carlo && rule.guarded && y->u > 0) {
      const auto drawn =
          by_draws(report.monte_carlo->conforming[i], report.monte_carlo->draws, rule);
      judged.verdict = drawn.verdict;
      judged.probability = drawn.probability;
    }
    judged.gas = words.first;
    judged.wish = words.second;
    report.limits_met = report.limits_met && judged.verdict == Verdict::inside;
    report.judged.push_back(std::move(judged));
  }
}

}  // namespace capsigh::answer_detail
