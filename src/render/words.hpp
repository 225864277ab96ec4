// Budgets and advice in words.
#pragma once

#include <string>
#include <string_view>

#include "capsigh/answer/advice.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh::render_detail {

/// "a thermometer good to ± 0.13 K (contact.temperature, now ± 0.3 K) would halve it"
std::string advice_text(const Advice& advice, std::string_view would,
                        const std::vector<const Unit*>& asked);

/// "contact.pressure 47 %, contact.temperature 35 %, henry.CO2.weiss1974 17 %"
std::string shares_text(const std::vector<BudgetLine>& lines);

/// A figure's path in words: "Dissolved CO2".
std::string figure_label(std::string_view path);

}  // namespace capsigh::render_detail
