// The summary of judged readings: overall and by group, in constant memory. What one machine, one
// file or one block of rows gathers can be appended to what came before it:
//
//   summary(A) + summary(B) = summary(A followed by B)
//
// exactly for counts, extremes and violations (rows are numbered through), to rounding of the last
// bit for everything else.
#pragma once

#include <map>
#include <string>
#include <string_view>

#include "capsigh/quality/capability.hpp"
#include "capsigh/quality/control_chart.hpp"
#include "capsigh/quality/drift.hpp"
#include "capsigh/quality/verdict.hpp"

namespace capsigh {

inline constexpr std::size_t kMaxGroups = 1000;
inline constexpr char kGroupSeparator = '\x1f';  ///< between the values of several group columns

/// What every part of a summary has in common; parts that differ in it do not belong together.
struct SummaryPlan {
  std::string title;                  ///< of the recipe
  std::string quantity;               ///< "CO2"
  std::string unit;                   ///< of all values: "vol"
  std::string wish;                   ///< the target or limit in the recipe's words
  Interval limits;                    ///< tolerance, in `unit`; unbounded: nothing is judged
  std::vector<std::string> group_by;  ///< names of the group columns
  std::string label_column;           ///< of the subgroups, where they are by label
  std::string recipe_digest;
  std::string constants_digest;
  std::uint64_t preliminary = 0;  ///< limits from fewer points than this are called preliminary
  ChartPlan chart;
};

/// One judged row.
struct Reading {
  double value = 0;            ///< finite, in the plan's unit
  std::optional<double> time;  ///< s since 1970
  std::optional<Verdict> verdict;
  std::string_view group;  ///< values of the group columns, joined by kGroupSeparator
  std::string_view label;  ///< of its subgroup
};

struct VerdictCounts {
  std::uint64_t inside = 0;
  std::uint64_t outside = 0;
  std::uint64_t undecided = 0;

  void add(Verdict verdict);
  void merge(const VerdictCounts& other);
};

/// What is kept of one stream of values.
struct StreamState {
  VerdictCounts verdicts;
  Moments moments;
  TimeSums times;
  RowCharts rows;      ///< or ...
  LabelCharts labels;  ///< where subgroups are by label

  void add(const Reading& reading, std::uint64_t row, const ChartPlan& plan);
  void shift_rows(std::uint64_t rows);
  void append(const StreamState& later, const ChartPlan& plan);
};

struct Summary {
  SummaryPlan plan;
  std::uint64_t rows = 0;      ///< all, those rejected too
  std::uint64_t rejected = 0;  ///< not in any statistics
  bool too_many_groups = false;
  StreamState overall;
  std::map<std::string, StreamState, std::less<>> groups;

  void add(const Reading& reading);
  void reject() {
    ++rows;
    ++rejected;
  }
  /// Appends the summary of the rows that follow. The plans must agree.
  void append(Summary later);
};

/// Why two summaries do not belong together, in words; empty where they do.
std::string mismatch(const SummaryPlan& a, const SummaryPlan& b);

/// A stream of values as found.
struct StreamFigures {
  std::uint64_t count = 0;
  VerdictCounts verdicts;
  std::optional<double> mean;
  std::optional<double> deviation;
  std::optional<double> least;
  std::optional<double> greatest;
  std::optional<Capability> capability;
  std::vector<ChartFigures> charts;
  std::optional<Drift> drift;            ///< per hour, where rows have times
  std::optional<double> hours_to_limit;  ///< from the last time, where the drift leads to one
};

StreamFigures figures(const StreamState& stream, const SummaryPlan& plan);

}  // namespace capsigh
