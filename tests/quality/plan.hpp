// A plan of charts with the shipped constants.
#pragma once

#include "capsigh/answer/charting.hpp"
#include "capsigh/quality/summary.hpp"

namespace capsigh::test {

inline ChartPlan chart_plan(std::size_t subgroup = 1) {
  ChartPlan plan;
  plan.subgroup = subgroup;
  plan.table = control_constants(built_in_library());
  plan.rules = runs_rules(built_in_library());
  return plan;
}

}  // namespace capsigh::test
