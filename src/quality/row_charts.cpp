#include <algorithm>
#include <array>
#include <cmath>
#include <span>

#include "capsigh/quality/control_chart.hpp"
#include "subgroup.hpp"

namespace capsigh {

using quality_detail::subgroup_of;
using quality_detail::test_point;
using quality_detail::test_spread;

// The sample `age` steps back; 0 is the newest.
const Sample& RowCharts::back(std::size_t age) const {
  const std::size_t size = recent.size();
  return recent[(count - 1 - age) % size];
}

void RowCharts::add(const Sample& sample, const ChartPlan& plan) {
  const std::size_t m = plan.subgroup;
  if (phases.empty()) phases.resize(m);
  if (head.size() < std::max<std::size_t>(m - 1, 1)) head.push_back(sample);
  if (!plan.established) window.add(sample);
  if (m == 1 && count > 0) add_moving_range(back(0), sample, plan);
  if (recent.size() < m) {
    recent.push_back(sample);
  } else {
    recent[count % m] = sample;
  }
  ++count;
  if (count < m) return;
  if (m == 1) {
    add_subgroup(0, {sample.value, 0, 0, 1, sample.row, sample.time}, plan);
    return;
  }
  boost::container::static_vector<Sample, kLargestTabled> members;
  for (std::size_t age = m; age-- > 0;) members.push_back(back(age));
  add_subgroup(count % m, subgroup_of({members.data(), members.size()}), plan);
}

void RowCharts::add_moving_range(const Sample& from, const Sample& to, const ChartPlan& plan) {
  const double range = std::abs(to.value - from.value);
  moving_ranges.add(range);
  if (!plan.established) return;
  const auto limits = limits_established(ChartKind::individuals, 2, *plan.established, plan.table);
  test_spread(phases[0].tested.ranges, range, limits.spread, to.row, to.time);
}

void RowCharts::add_subgroup(std::size_t phase, const Subgroup& subgroup, const ChartPlan& plan) {
  PhaseState& state = phases[phase];
  ++state.subgroups;
  state.means.add(subgroup.mean);
  if (plan.subgroup > 1) {
    state.ranges.add(subgroup.range);
    state.deviations.add(subgroup.deviation);
  }
  if (plan.established) test_point(state.tested, subgroup, plan);
}

void RowCharts::shift_rows(std::uint64_t rows) {
  for (auto& sample : head) sample.row += rows;
  for (auto& sample : recent) sample.row += rows;
  for (auto& phase : phases) {
    phase.tested.runs.shift_rows(rows);
    phase.tested.ranges.shift_rows(rows);
    phase.tested.deviations.shift_rows(rows);
  }
  window.shift_rows(rows);
}

void RowCharts::append(const RowCharts& later, const ChartPlan& plan) {
  const std::size_t m = plan.subgroup;
  if (later.count == 0) return;
  if (count == 0) {
    *this = later;
    return;
  }
  if (later.count <= later.head.size()) {
    for (const auto& sample : later.head) add(sample, plan);
    return;
  }
  if (m == 1) add_moving_range(back(0), later.head[0], plan);
  moving_ranges.merge(later.moving_ranges);
  if (phases.empty()) phases.resize(m);
  // The values on both sides of the seam; each phase has one subgroup across it.
  boost::container::static_vector<Sample, 2 * kLargestTabled> seam;
  const std::size_t before = std::min<std::size_t>(count, m - 1);
  for (std::size_t age = before; age-- > 0;) seam.push_back(back(age));
  for (std::size_t j = 0; j + 1 < m; ++j) seam.push_back(later.head[j]);
  for (std::size_t j = 1; j < m; ++j) {
    if (before + j < m) continue;
    const std::span<const Sample> members{seam.data() + (before + j - m), m};
    add_subgroup((count + j) % m, subgroup_of(members), plan);
  }
  for (std::size_t p = 0; p < m; ++p) {
    PhaseState& to = phases[(count + p) % m];
    const PhaseState& from = later.phases[p];
    to.subgroups += from.subgroups;
    to.means.merge(from.means);
    to.ranges.merge(from.ranges);
    to.deviations.merge(from.deviations);
    to.tested.runs.append(from.tested.runs, plan.rules);
    to.tested.ranges.append(from.tested.ranges);
    to.tested.deviations.append(from.tested.deviations);
  }
  const std::size_t missing = std::max<std::size_t>(m - 1, 1);
  for (std::size_t j = 0; head.size() < missing; ++j) head.push_back(later.head[j]);
  window.append(later.window);
  // later holds at least m values: the last of the whole are its own. The ring turns with count.
  const std::uint64_t total = count + later.count;
  boost::container::static_vector<Sample, kLargestTabled> ring(m);
  for (std::size_t age = 0; age < m; ++age) ring[(total - 1 - age) % m] = later.back(age);
  recent = ring;
  count = total;
}

}  // namespace capsigh
