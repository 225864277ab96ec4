// How readings are judged: everything a row needs that no row brings itself.
#pragma once

#include <memory>
#include <optional>
#include <string>

#include "capsigh/answer/reading.hpp"
#include "capsigh/constants/library.hpp"
#include "capsigh/quality/summary.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "capsigh/readings/columns.hpp"
#include "capsigh/readings/kernel.hpp"

namespace capsigh {

struct ReadingPlan {
  std::shared_ptr<const ReadingBinding> binding;
  std::shared_ptr<const ReadingLaws> laws;
  std::shared_ptr<const Kernel> kernel;
  const Unit* unit = nullptr;  ///< of contents in the output
  Interval limits;             ///< SI units of the measure; unbounded: nothing is judged
  JudgingRule rule;
  InstrumentDoubt doubt;
  TemperatureDifference temperature_offset{};  ///< added to the reading
  Pressure pressure_offset{};
  Pressure ambient{};    ///< where no column gives it
  bool pierced = false;  ///< by a piercer with a dead volume
  ColumnWishes wishes;
  SummaryPlan summary;
  double widening = 0;  ///< of the doubt of a record, per width of its range outside it
  /// For the benchmark only: content, u and probability are constants, all else is done.
  bool constants_for_benchmark = false;

  [[nodiscard]] bool judges() const { return limits.bounded(); }
  [[nodiscard]] ContentMeasure measure() const { return binding->measure; }
};

/// The plan of a recipe; findings that are no errors are what the recipe leaves open, and an
/// acceptance zone that is empty. `recipe_text` is what the digest in summaries identifies.
Outcome<ReadingPlan> plan_readings(const Recipe& recipe, std::string_view recipe_text,
                                   const Library& library);

}  // namespace capsigh
