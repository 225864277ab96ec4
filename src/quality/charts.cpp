// The charts of a whole stream, from its state.
#include <algorithm>
#include <cmath>
#include <span>

#include "capsigh/quality/control_chart.hpp"
#include "subgroup.hpp"

namespace capsigh {
namespace {

using quality_detail::subgroup_of;
using quality_detail::test_spread;

constexpr std::uint64_t kFewest = 2;  // points that make a chart

// The location chart of points against limits of their own.
template <class Points, class LimitsOf>
void test_points(ChartFigures& chart, const Points& points, const RunsRules& rules,
                 const LimitsOf& limits_of) {
  chart.tested = points.size();
  if (!(chart.limits.sigma > 0)) return;  // all values the same: nothing to test against
  Runs runs;
  for (const auto& point : points) {
    const ChartLimits limits = limits_of(point.size);
    runs.add({point.mean, limits.z(point.mean), point.row, point.time}, rules);
    if (point.size < 2) continue;
    const bool by_range = chart.kind == ChartKind::mean_range;
    if (by_range && point.size > kLargestTabled) continue;
    test_spread(chart.spread_signals, by_range ? point.range : point.deviation, limits.spread,
                point.row, point.time);
  }
  chart.signals = runs.signals;
}

void take_tested(ChartFigures& chart, const TestedPoints& tested) {
  chart.established = true;
  chart.tested = chart.points;
  chart.signals = tested.runs.signals;
  chart.spread_signals =
      chart.kind == ChartKind::mean_deviation ? tested.deviations : tested.ranges;
}

ChartFigures individuals(const RowCharts& rows, const ChartPlan& plan) {
  ChartFigures chart;
  chart.points = rows.count;
  chart.size = 1;
  const auto n = static_cast<double>(rows.count);
  if (plan.established) {
    chart.limits = limits_established(ChartKind::individuals, 2, *plan.established, plan.table);
    take_tested(chart, rows.phases[0].tested);
    return chart;
  }
  chart.limits = limits_from_data(ChartKind::individuals, 2, rows.phases[0].means.value() / n,
                                  rows.moving_ranges.value() / (n - 1.0), plan.table);
  std::vector<Subgroup> points;
  points.reserve(rows.window.size());
  for (std::size_t i = 0; i < rows.window.size(); ++i) {
    const auto& s = rows.window[i];
    points.push_back({s.value, 0, 0, 1, s.row, s.time});
  }
  test_points(chart, points, plan.rules, [&](std::size_t) { return chart.limits; });
  if (!(chart.limits.sigma > 0)) return chart;
  for (std::size_t i = 1; i < points.size(); ++i) {
    test_spread(chart.spread_signals, std::abs(points[i].mean - points[i - 1].mean),
                chart.limits.spread, points[i].row, points[i].time);
  }
  return chart;
}

// The complete subgroups in the window; they begin with the first value of the stream.
std::vector<Subgroup> windowed(const RowCharts& rows, std::size_t m) {
  std::vector<Subgroup> points;
  const std::uint64_t before = rows.count - rows.window.size();
  std::size_t at = (m - before % m) % m;
  std::vector<Sample> members(m);
  for (; at + m <= rows.window.size(); at += m) {
    for (std::size_t i = 0; i < m; ++i) members[i] = rows.window[at + i];
    points.push_back(subgroup_of(members));
  }
  return points;
}

ChartFigures by_rows(ChartKind kind, const RowCharts& rows, const ChartPlan& plan,
                     const std::vector<Subgroup>& points) {
  const PhaseState& phase = rows.phases[0];
  ChartFigures chart;
  chart.kind = kind;
  chart.size = plan.subgroup;
  chart.points = phase.subgroups;
  if (plan.established) {
    chart.limits = limits_established(kind, plan.subgroup, *plan.established, plan.table);
    take_tested(chart, phase.tested);
    return chart;
  }
  const auto k = static_cast<double>(phase.subgroups);
  const auto& spread = kind == ChartKind::mean_range ? phase.ranges : phase.deviations;
  chart.limits = limits_from_data(kind, plan.subgroup, phase.means.value() / k, spread.value() / k,
                                  plan.table);
  test_points(chart, points, plan.rules, [&](std::size_t) { return chart.limits; });
  return chart;
}

// Standard deviation within subgroups, from those whose spread is known.
double sigma_within(ChartKind kind, const LabelCharts& all, const ControlConstants& table) {
  ExactSum sum;
  std::uint64_t known = 0;
  for (std::size_t n = 2; n <= kLargestTabled; ++n) {
    const auto& sums = all.by_size[n];
    const bool by_range = kind == ChartKind::mean_range;
    sum.add(by_range ? sums.ranges.value() / table.d2[n] : sums.deviations.value() / table.c4[n]);
    known += sums.subgroups;
  }
  if (kind == ChartKind::mean_deviation) {
    sum.merge(all.by_size[kLargestTabled + 1].deviations);
    known += all.by_size[kLargestTabled + 1].subgroups;
  }
  return known > 0 ? sum.value() / static_cast<double>(known) : 0.0;
}

// The most frequent size, and whether it is the only one.
std::pair<std::size_t, bool> usual_size(const LabelCharts& all) {
  std::size_t usual = 1;
  std::size_t kinds = 0;
  for (std::size_t n = 1; n < all.by_size.size(); ++n) {
    if (all.by_size[n].subgroups > 0) ++kinds;
    if (all.by_size[n].subgroups > all.by_size[usual].subgroups) usual = n;
  }
  return {usual, kinds == 1 && usual <= kLargestTabled};
}

ChartFigures by_label(ChartKind kind, const LabelCharts& all, const ChartPlan& plan, double mean,
                      const std::vector<Subgroup>& points) {
  const auto [usual, only] = usual_size(all);
  ChartFigures chart;
  chart.kind = kind;
  chart.points = all.closed;
  chart.size = only ? usual : 0;
  const std::size_t shown = std::clamp<std::size_t>(usual, 2, kLargestTabled);
  if (plan.established) {
    chart.limits = limits_established(kind, shown, *plan.established, plan.table);
    take_tested(chart, all.tested);
    return chart;
  }
  const double sigma = sigma_within(kind, all, plan.table);
  if (only && usual > 1) {
    const auto& sums = all.by_size[usual];
    const auto& spread = kind == ChartKind::mean_range ? sums.ranges : sums.deviations;
    chart.limits = limits_from_data(
        kind, usual, mean, spread.value() / static_cast<double>(sums.subgroups), plan.table);
    test_points(chart, points, plan.rules, [&](std::size_t) { return chart.limits; });
    return chart;
  }
  chart.limits = limits_from_sigma(kind, shown, mean, sigma, plan.table);
  test_points(chart, points, plan.rules,
              [&](std::size_t n) { return limits_from_sigma(kind, n, mean, sigma, plan.table); });
  return chart;
}

}  // namespace

std::vector<ChartFigures> charts(const RowCharts& rows, const ChartPlan& plan) {
  if (rows.phases.empty()) return {};
  if (plan.subgroup == 1) {
    if (rows.count < kFewest) return {};
    return {individuals(rows, plan)};
  }
  if (rows.phases[0].subgroups < kFewest) return {};
  const auto points = plan.established ? std::vector<Subgroup>{} : windowed(rows, plan.subgroup);
  return {by_rows(ChartKind::mean_range, rows, plan, points),
          by_rows(ChartKind::mean_deviation, rows, plan, points)};
}

std::vector<ChartFigures> charts(const LabelCharts& labels, const ChartPlan& plan, double mean) {
  if (!labels.first || !labels.last) return {};
  // The first and the last subgroup are complete now: there is nothing beside them.
  LabelCharts all;
  all.close(*labels.first, plan);
  for (std::size_t i = 0; i < all.by_size.size(); ++i) {
    all.by_size[i].subgroups += labels.by_size[i].subgroups;
    all.by_size[i].ranges.merge(labels.by_size[i].ranges);
    all.by_size[i].deviations.merge(labels.by_size[i].deviations);
  }
  all.closed += labels.closed;
  all.tested.runs.append(labels.tested.runs, plan.rules);
  all.tested.ranges.append(labels.tested.ranges);
  all.tested.deviations.append(labels.tested.deviations);
  all.window.append(labels.window);
  all.close(*labels.last, plan);
  std::vector<Subgroup> points;
  for (std::size_t i = 0; i < all.window.size(); ++i) points.push_back(all.window[i]);
  return {by_label(ChartKind::mean_range, all, plan, mean, points),
          by_label(ChartKind::mean_deviation, all, plan, mean, points)};
}

}  // namespace capsigh
