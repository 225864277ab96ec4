// Sections on the life of a package: [opening], [conditioning] and [supply].
#pragma once

#include "section.hpp"

namespace capsigh::recipe_detail {

OpeningSection read_opening(const Node& node, Recipe& recipe, Findings& findings);
ConditioningSection read_conditioning(const Node& node, Recipe& recipe, Findings& findings);
SupplySection read_supply(const Node& node, Recipe& recipe, Findings& findings);

}  // namespace capsigh::recipe_detail
