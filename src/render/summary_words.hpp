// Charts, tests and groups in words.
#pragma once

#include <string>
#include <string_view>

#include "capsigh/quality/summary.hpp"

namespace capsigh::render_detail {

/// "2026-03-01 06:30:00", as the rows give it.
std::string time_text(double seconds);
std::string_view test_words(RunsTest test);
std::string_view chart_words(ChartKind kind);
/// "line 2, valve 7"
std::string group_words(const SummaryPlan& plan, std::string_view group);

}  // namespace capsigh::render_detail
