// The closed package in a text report.
#pragma once

#include "text_page.hpp"

namespace capsigh::render_detail {

/// Its part of the answer: pressures against the rating, what may be asked the other way round.
void package_answer(TextPage& page, const Report& report);

/// What is left to the rating; it says nothing without the temperature.
void rating(TextPage& page, const Figure<Pressure>& margin, const Figure<Temperature>& at);

/// Its states, one table over the storage temperatures.
void package_states(TextPage& page, const PackageFigures& package);

/// Its course on the shelf.
void package_shelf(TextPage& page, const PackageFigures& package);

}  // namespace capsigh::render_detail
