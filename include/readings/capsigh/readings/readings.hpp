// A file of readings, judged row by row in constant memory.
//
// Threads read blocks of whole records one after the other, work on them side by side, and deliver
// them in the order of the input: rows, rejects and statistics are the same bytes for any number of
// threads. A slow pipe gets each row at once: a block is what a read gives, not what fills it.
#pragma once

#include <cstdint>
#include <functional>
#include <optional>
#include <string>

#include "capsigh/readings/plan.hpp"

namespace capsigh {

struct ReadingsRequest {
  std::string input = "-";  ///< a file, or "-" for standard input; gz or not
  std::string out;          ///< empty: standard output
  std::string rejects;      ///< empty: standard error
  bool resume = false;      ///< continue what an interrupted run wrote
  bool stop_on_error = false;
  unsigned threads = 1;
};

/// How a run ended.
struct ReadingsRun {
  Summary summary;
  std::uint64_t resumed_from = 0;           ///< bytes of the output that stood there already
  std::optional<std::uint64_t> stopped_at;  ///< line of the row that --stop-on-error stopped at
  bool system_failed = false;               ///< the findings hold a file that failed
  Findings findings;                        ///< errors of the file, cautions
};

/// Judges all readings of the request. `notice` is called once, before the first row is out, with
/// what the plan and the columns have to say.
ReadingsRun judge_readings(const ReadingsRequest& request, const ReadingPlan& plan,
                           const std::function<void(const Findings&)>& notice);

}  // namespace capsigh
