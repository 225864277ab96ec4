// The text report on opening, conditioning and supply.
#pragma once

#include "text_page.hpp"

namespace capsigh::render_detail {

/// What is answered first: dose, pressure once conditioned, gas of a run.
void life_answers(TextPage& page, const Report& report);
/// Below the losses of opening: their shares, cold, bubbles, the course, the package closed again.
void opened_rows(TextPage& page, const Report& report);
void conditioning_section(TextPage& page, const Report& report);
void supply_section(TextPage& page, const Report& report);

}  // namespace capsigh::render_detail
