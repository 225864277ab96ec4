// What a report says of a closed package: dangers first, then cautions, then limits judged.
#pragma once

#include "capsigh/answer/report.hpp"
#include "capsigh/quality/verdict.hpp"

namespace capsigh::answer_detail {

/// Cautions on ratings, liquid-full packages, frost, vacuum, ullage and heat.
void caution_package(const Case& c, const Library& library, Report& report);

/// Limits of the container against its figures, whose u is known.
void judge_package(const JudgingRule& rule, Report& report);

/// What of the container is carried into the report in the recipe's own words.
void describe_package(const Recipe& recipe, const ContainerCase& container, Report& report);

/// The freezing point of the liquid by Raoult.
Temperature freezing_point(const Case& c, const Library& library);

/// A caution without a place.
Finding caution(std::string code, std::string message);

/// "4.00 °C"
std::string celsius(Temperature t);

}  // namespace capsigh::answer_detail
