#include <algorithm>
#include <cmath>

#include "capsigh/quality/control_chart.hpp"
#include "subgroup.hpp"

namespace capsigh {
namespace {

void extend(LabelGroup& group, const Sample& sample) {
  group.moments.add(sample.value);
  group.row = sample.row;
  group.time = sample.time;
}

void extend(LabelGroup& group, const LabelGroup& later) {
  group.moments.merge(later.moments);
  group.row = later.row;
  group.time = later.time;
}

LabelGroup begin(std::string_view label, const Sample& sample) {
  LabelGroup group{std::string(label), {}, 0, {}};
  extend(group, sample);
  return group;
}

}  // namespace

void LabelCharts::close(const LabelGroup& group, const ChartPlan& plan) {
  const auto size = static_cast<std::size_t>(group.moments.count);
  const double deviation = group.moments.deviation().value_or(0.0);
  const Subgroup point{
      *group.moments.mean(), group.moments.range(), deviation, size, group.row, group.time};
  const bool tabled = size <= kLargestTabled;
  SizeSums& sums = by_size[tabled ? size : kLargestTabled + 1];
  ++sums.subgroups;
  if (tabled) sums.ranges.add(point.range);
  sums.deviations.add(tabled ? deviation : deviation / unbiasing(size, plan.table));
  ++closed;
  if (plan.established) {
    quality_detail::test_point(tested, point, plan);
  } else {
    window.add(point);
  }
}

void LabelCharts::add(std::string_view label, const Sample& sample, const ChartPlan& plan) {
  if (!first) {
    first = begin(label, sample);
    return;
  }
  LabelGroup& open = last ? *last : *first;
  if (open.label == label) {
    extend(open, sample);
    return;
  }
  if (last) close(*last, plan);
  last = begin(label, sample);
}

void LabelCharts::shift_rows(std::uint64_t rows) {
  if (first) first->row += rows;
  if (last) last->row += rows;
  tested.runs.shift_rows(rows);
  tested.ranges.shift_rows(rows);
  tested.deviations.shift_rows(rows);
  window.shift_rows(rows);
}

void LabelCharts::append(const LabelCharts& later, const ChartPlan& plan) {
  if (!later.first) return;
  if (!first) {
    *this = later;
    return;
  }
  LabelGroup& open = last ? *last : *first;
  if (open.label == later.first->label) {
    extend(open, *later.first);
  } else {
    if (last) close(*last, plan);
    last = *later.first;
  }
  if (!later.last) return;
  if (last) close(*last, plan);
  for (std::size_t i = 0; i < by_size.size(); ++i) {
    by_size[i].subgroups += later.by_size[i].subgroups;
    by_size[i].ranges.merge(later.by_size[i].ranges);
    by_size[i].deviations.merge(later.by_size[i].deviations);
  }
  closed += later.closed;
  tested.runs.append(later.tested.runs, plan.rules);
  tested.ranges.append(later.tested.ranges);
  tested.deviations.append(later.tested.deviations);
  window.append(later.window);
  last = later.last;
}

}  // namespace capsigh
