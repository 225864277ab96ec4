#include "capsigh/answer/advice.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {
namespace {

Improvement improved(const BudgetLine& line, double factor) {
  const double limit = line.u * std::sqrt(3.0);  // u = a/√3
  return {line.input, limit, limit * factor, line.u_unit};
}

}  // namespace

std::vector<BudgetLine> budget_of(const std::vector<BudgetLine>& budget, std::string_view figure) {
  std::vector<BudgetLine> lines;
  std::copy_if(budget.begin(), budget.end(), std::back_inserter(lines),
               [&](const BudgetLine& line) { return line.of == figure; });
  return lines;
}

Advice advise(const std::vector<BudgetLine>& lines, double wanted) {
  Advice advice;
  const double goal = wanted * wanted;  // of the variance
  double inputs = 0;
  double all = 0;
  for (const auto& line : lines) {
    all += line.share;
    if (!line.is_record) inputs += line.share;
  }
  const double records = std::max(all - inputs, 0.0);
  advice.records_alone = std::sqrt(records);
  advice.inputs_stated = inputs > 0;
  if (all <= goal) return advice;
  // The budget is sorted by share: the first that can do it alone is the least demanding.
  for (const auto& line : lines) {
    const double others = all - line.share;
    if (line.is_record || others >= goal) continue;
    advice.by = Advice::By::instrument;
    advice.improvements.push_back(improved(line, std::sqrt((goal - others) / line.share)));
    return advice;
  }
  if (records >= goal || inputs <= 0) {
    advice.by = Advice::By::none;
    return advice;
  }
  advice.by = Advice::By::instruments;
  const double factor = std::sqrt((goal - records) / inputs);
  constexpr double worth_naming = 0.02;
  for (const auto& line : lines) {
    if (!line.is_record && line.share > worth_naming) {
      advice.improvements.push_back(improved(line, factor));
    }
  }
  return advice;
}

}  // namespace capsigh
