#include "subgroup.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh::quality_detail {

Subgroup subgroup_of(std::span<const Sample> members) {
  Subgroup s;
  s.size = members.size();
  s.row = members.back().row;
  s.time = members.back().time;
  const auto n = static_cast<double>(members.size());
  double least = members.front().value;
  double greatest = least;
  double sum = 0;
  for (const auto& m : members) {
    least = std::min(least, m.value);
    greatest = std::max(greatest, m.value);
    sum += m.value;
  }
  s.mean = sum / n;
  s.range = greatest - least;
  double squares = 0;
  for (const auto& m : members) squares += (m.value - s.mean) * (m.value - s.mean);
  s.deviation = std::sqrt(squares / (n - 1.0));
  return s;
}

void test_spread(Signals& signals, double spread, const ControlLimits& limits, std::uint64_t row,
                 const std::optional<double>& time) {
  if (spread > limits.high || spread < limits.low) signals.add({spread, 0, row, time});
}

void test_point(TestedPoints& tested, const Subgroup& point, const ChartPlan& plan) {
  const auto kind = point.size > 1 ? ChartKind::mean_range : ChartKind::individuals;
  const auto limits = limits_established(kind, point.size, *plan.established, plan.table);
  tested.runs.add({point.mean, limits.z(point.mean), point.row, point.time}, plan.rules);
  if (point.size < 2) return;
  if (point.size <= kLargestTabled) {
    test_spread(tested.ranges, point.range, limits.spread, point.row, point.time);
  }
  const auto deviation =
      limits_established(ChartKind::mean_deviation, point.size, *plan.established, plan.table);
  test_spread(tested.deviations, point.deviation, deviation.spread, point.row, point.time);
}

}  // namespace capsigh::quality_detail
