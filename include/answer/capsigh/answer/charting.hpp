// How readings are charted and summed up: constants of control charts from the library, the rest
// from the recipe.
#pragma once

#include "capsigh/answer/reading.hpp"
#include "capsigh/constants/library.hpp"
#include "capsigh/quality/control_limits.hpp"
#include "capsigh/quality/runs.hpp"
#include "capsigh/quality/summary.hpp"

namespace capsigh {

ControlConstants control_constants(const Library& library);
RunsRules runs_rules(const Library& library);

/// Puts the library's constants into a plan.
void use_constants(SummaryPlan& plan, const Library& library);

/// What all parts of a summary of this recipe's readings have in common; limits and established
/// values in the unit of the target (binding.unit).
SummaryPlan summary_plan(const Recipe& recipe, std::string_view recipe_text,
                         const ReadingBinding& binding, const Library& library);

}  // namespace capsigh
