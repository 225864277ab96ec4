// One subgroup and its tests, shared by the charts.
#pragma once

#include <span>

#include "capsigh/quality/control_chart.hpp"

namespace capsigh::quality_detail {

/// Mean, range and standard deviation of two values or more.
Subgroup subgroup_of(std::span<const Sample> members);

/// Counts a spread outside its limits.
void test_spread(Signals& signals, double spread, const ControlLimits& limits, std::uint64_t row,
                 const std::optional<double>& time);

/// Tests a point and its spread against established limits.
void test_point(TestedPoints& tested, const Subgroup& point, const ChartPlan& plan);

}  // namespace capsigh::quality_detail
