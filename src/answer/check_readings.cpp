// What can be wrong with the keys about readings.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "capsigh/answer/card.hpp"
#include "recipe_check.hpp"

namespace capsigh::answer_detail {

void RecipeCheck::check_readings() {
  check_charting(recipe_.charting);
  if (recipe_.gauge) check_gauge(*recipe_.gauge);
  if (recipe_.card) check_card(*recipe_.card);
}

// Established values come in pairs, in the measure of the target they are charted with.
void RecipeCheck::check_charting(const ChartingSection& charting) {
  const bool both = charting.centre && charting.sigma;
  if (!both && (charting.centre || charting.sigma)) {
    const auto& given = charting.centre ? *charting.centre : *charting.sigma;
    error("established-half",
          fmt::format("'judging.{}' is given without '{}'", charting.centre ? "centre" : "sigma",
                      charting.centre ? "sigma" : "centre"),
          "both: established limits are centre ± 3 sigma (for subgroups of n, ± 3 sigma/√n)",
          "centre = \"3.70 vol\"\nsigma = \"0.03 vol\"", given.amount.source.place);
  }
  for (const auto* given : {&charting.centre, &charting.sigma}) {
    if (!*given || recipe_.target.empty()) continue;
    const bool same =
        std::any_of(recipe_.target.begin(), recipe_.target.end(),
                    [&](const GivenTarget& t) { return t.content.measure == (*given)->measure; });
    if (same || !(*given)->amount.value) continue;
    error("established-unit", "established values are in the measure of the target",
          "the unit of the [target]", "", (*given)->amount.source.place,
          recipe_.target.front().content.amount.source.place);
  }
}

void RecipeCheck::check_gauge(const GaugeSection& gauge) {
  if (gauge.piercer_gas && !gauge.piercer_volume) {
    error("piercer-without-volume", "'gauge.piercer_gas' is given without 'piercer_volume'",
          "the dead volume of the piercer and its gauge", "piercer_volume = \"10 mL\"",
          gauge.piercer_gas->place);
  }
  if (gauge.piercer_volume) check_piercer(gauge);
}

void RecipeCheck::check_piercer(const GaugeSection& gauge) {
  const auto& place = gauge.piercer_volume->source.place;
  if (!recipe_.container) {
    error("piercer-without-container",
          "what a piercer's dead volume does to a reading depends on the package", "a [container]",
          "[container]\nbrimful = \"355 mL\"\nfill = \"330 mL\"", place);
  }
  if (recipe_.gas.size() > 1) {
    error("piercer-in-mixture",
          "the dead volume of a piercer is answered for a headspace of one gas only",
          "[gas] with one gas, or none (CO2)", "", place, recipe_.gas_place);
  }
  for (const auto& gas : air_.gases) need_gas(gas);
  if (!gauge.piercer_gas) return;
  const auto& gas = *gauge.piercer_gas;
  if (gas.text == "evacuated" || gas.text == "air") return;
  const auto names = gas_names(library_);
  if (library_.find("selection.henry." + gas.text) != nullptr) {
    need_gas(gas.text);
    return;
  }
  const auto near = nearest_name(gas.text, names);
  error("unknown-gas",
        near ? fmt::format("no gas is called '{}'; did you mean '{}'?", gas.text, *near)
             : fmt::format("no gas is called '{}'", gas.text),
        "\"air\", \"evacuated\" or a gas", "piercer_gas = \"evacuated\"", gas.place);
}

void RecipeCheck::check_card(const CardSection& card) {
  const std::string example = "[card]\nfrom = \"34 degF\"\nto = \"60 degF\"\nstep = \"1 degF\"";
  if (!card.from || !card.to || !card.step) {
    error("card-incomplete",
          fmt::format("[card] lacks '{}'", !card.from ? "from"
                                           : !card.to ? "to"
                                                      : "step"),
          "from, to and step", example, card.place);
    return;
  }
  if (!card.from->value || !card.to->value || !card.step->value) return;
  if (*card.to->value < *card.from->value) {
    error("card-backwards", "the card ends at a lower temperature than it begins with",
          "'to' above 'from'", example, card.to->source.place, card.from->source.place);
    return;
  }
  const double rows = (*card.to->value - *card.from->value).value() / card.step->value->value();
  if (rows < static_cast<double>(kMostCardRows)) return;
  error("card-too-long",
        fmt::format("the card would have {:.0f} rows; more than {} help nobody",
                    std::floor(rows) + 1, kMostCardRows),
        "a larger step", "step = \"1 K\"", card.step->source.place);
}

}  // namespace capsigh::answer_detail
