// The chain of formulas behind a figure, noted while it is evaluated once more at the solution.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "capsigh/constants/record.hpp"

namespace capsigh {

/// A value in a trace step: symbol, number and unit (SI).
struct TraceValue {
  std::string_view symbol;
  double value = 0;
  std::string_view unit;
};

/// One formula evaluated: its name, its equation, the record behind it (none for identities) or the
/// definition it follows (a record without doubt: a convention), what went in and what came out.
struct TraceStep {
  std::string_view law;
  std::string_view equation;
  const Record* record = nullptr;
  const Record* definition = nullptr;
  std::vector<TraceValue> inputs;
  TraceValue result;
  Conditions conditions;
};

/// The steps that lead to one figure; the last step's result is the figure.
struct TraceChain {
  std::string figure;
  std::vector<TraceStep> steps;
};

struct Trace {
  std::vector<TraceChain> chains;

  void begin(std::string figure) { chains.push_back({std::move(figure), {}}); }
  void note(TraceStep step) {
    if (chains.empty()) begin("");
    chains.back().steps.push_back(std::move(step));
  }
};

}  // namespace capsigh
