// Targets and limits of a report, judged.
#pragma once

#include "capsigh/answer/report.hpp"

namespace capsigh::answer_detail {

/// The rule of a recipe, defaults from the library.
JudgingRule rule_of(const Recipe& recipe, const Library& library);

/// Every target as a figure of the answer and what of it conforms, in the order of the targets;
/// none where the content is a target's itself.
std::vector<WatchedTarget> watched_targets(const Binding& binding, const Answer& answer);

/// Judges every target with a tolerance and every limit against the content at the contact or in
/// the package, where that is known without them. Needs the budget in the report.
void judge_targets(const Binding& binding, const JudgingRule& rule, Report& report);

}  // namespace capsigh::answer_detail
