// Cautions on opening, conditioning and supply.
#pragma once

#include "capsigh/answer/report.hpp"

namespace capsigh::answer_detail {

void caution_life(const Binding& binding, const Library& library, Report& report);

}  // namespace capsigh::answer_detail
