// What can be wrong with [opening], [conditioning] and [supply] before anything is bound.
#include <fmt/format.h>

#include <algorithm>

#include "recipe_check.hpp"

namespace capsigh::answer_detail {
namespace {

// The names behind a prefix of record keys.
std::vector<std::string> names_under(const Library& library, std::string_view prefix) {
  std::vector<std::string> names;
  for (const auto& record : library.records()) {
    if (record.key.starts_with(prefix)) names.emplace_back(record.key.substr(prefix.size()));
  }
  return names;
}

std::string unknown(std::string_view what, const std::string& text,
                    const std::vector<std::string>& names) {
  const auto near = nearest_name(text, names);
  return near ? fmt::format("no {} is called '{}'; did you mean '{}'?", what, text, *near)
              : fmt::format("no {} is called '{}'", what, text);
}

}  // namespace

void RecipeCheck::check_life() {
  if (recipe_.opening) check_opening(*recipe_.opening);
  if (recipe_.conditioning) check_conditioning(*recipe_.conditioning);
  if (recipe_.supply) check_supply(*recipe_.supply);
}

void RecipeCheck::check_opening(const OpeningSection& opening) {
  check_escape(opening);
  if (opening.after_place && opening.after.empty()) {
    error("after-empty", "'opening.after' lists no time", "one time or more",
          "after = [\"30 s\", \"5 min\", \"1 h\"]", opening.after_place);
  }
  if (opening.after.size() > kMaxMoments) {
    error("after-too-many", fmt::format("'opening.after' lists {} times", opening.after.size()),
          fmt::format("at most {}", kMaxMoments), "after = [\"30 s\", \"5 min\", \"1 h\"]",
          opening.after_place);
  }
  if (!opening.reclose_after) return;
  const auto& again = *opening.reclose_after;
  if (again.value && again.value->value() < 0) {
    error("reclose-before-open", "a package cannot be closed again before it is opened",
          "the time it stood open, zero or more", "reclose_after = \"10 min\"", again.source.place);
  }
  if (!recipe_.container) {
    error("reclose-without-container",
          "only a package can be closed again; there is no [container]",
          "a [container] with brimful and fill", "", again.source.place);
  }
}

void RecipeCheck::check_escape(const OpeningSection& opening) {
  const auto names = names_under(library_, "stillness.");
  if (opening.stillness &&
      std::find(names.begin(), names.end(), opening.stillness->text) == names.end()) {
    error("unknown-stillness", unknown("stillness", opening.stillness->text, names),
          fmt::format("{}", fmt::join(names, ", ")), "stillness = \"quiet\"",
          opening.stillness->place);
  }
  const bool by_surface = opening.surface || opening.stillness;
  const std::string example =
      "escape_half_life = \"40 min\"\nor: surface = \"20 cm2\" and stillness = \"quiet\"";
  if (opening.escape_half_life && by_surface) {
    error("escape-twice",
          "the escape of gas is given both by a half-life and by surface and stillness",
          "one of the two", example,
          opening.surface ? opening.surface->source.place : opening.stillness->place,
          opening.escape_half_life->source.place);
  } else if (by_surface && !(opening.surface && opening.stillness)) {
    error("escape-incomplete",
          fmt::format("[opening] lacks '{}'", opening.surface ? "stillness" : "surface"),
          "surface and stillness together, or escape_half_life", example,
          opening.surface ? opening.surface->source.place : opening.stillness->place);
  }
  const bool later =
      opening.after_place || (opening.reclose_after && opening.reclose_after->value &&
                              opening.reclose_after->value->value() > 0);
  if (later && !opening.escape_half_life && !by_surface) {
    error("escape-missing", "how fast the gas escapes is not known",
          "escape_half_life, measured, or surface and stillness", example,
          opening.after_place ? *opening.after_place : opening.reclose_after->source.place);
  }
}

void RecipeCheck::check_conditioning(const ConditioningSection& conditioning) {
  if (conditioning.sugar) check_sugar(*conditioning.sugar);
  if (!conditioning.dose && !conditioning.find) {
    error("dose-missing", "[conditioning] lacks 'dose'",
          "the sugar per litre, or \"find\" with a [target]", "dose = \"8 g/L\"",
          conditioning.place);
  }
  const bool wish =
      std::any_of(recipe_.target.begin(), recipe_.target.end(), [](const GivenTarget& t) {
        return t.content.gas.text == "CO2" && !t.is_maximum && !t.is_minimum;
      });
  if (conditioning.find && !wish && recipe_.readable) {
    error("find-needs", "a dose can be found only for a [target] of CO2", "a wanted content of CO2",
          "[target]\nCO2 = \"2.8 vol\"", conditioning.find->place);
  }
  check_residual(conditioning);
  check_conditioning_contact(conditioning);
}

void RecipeCheck::check_sugar(const LocatedText& sugar) {
  auto names = names_under(library_, "conditioning.");
  names.erase(std::remove(names.begin(), names.end(), "practice"), names.end());
  if (std::find(names.begin(), names.end(), sugar.text) != names.end()) return;
  const bool dextrose = sugar.text == "dextrose" || sugar.text == "corn sugar";
  const bool table = sugar.text == "sugar" || sugar.text == "table sugar" ||
                     sugar.text == "cane sugar" || sugar.text == "beet sugar";
  const std::string lactose = "lactose is not fermented by the yeasts of beer, wine and cider";
  error("unknown-sugar",
        sugar.text == "lactose" ? lactose
        : dextrose ? fmt::format("'{}' is sold with and without water of crystallisation: say "
                                 "'glucose monohydrate' (the usual one) or 'glucose'",
                                 sugar.text)
        : table    ? fmt::format("no sugar is called '{}'; did you mean 'sucrose'?", sugar.text)
                   : unknown("sugar", sugar.text, names),
        fmt::format("{}", fmt::join(names, ", ")), "sugar = \"sucrose\"", sugar.place);
}

void RecipeCheck::check_residual(const ConditioningSection& conditioning) {
  if (conditioning.residual_place) {
    const auto& gases = conditioning.residual;
    if (gases.size() != 1 || gases.front().gas.text != "CO2") {
      error("residual-is-CO2", "'conditioning.residual' is the CO2 that is dissolved already",
            "a temperature, or the content of CO2", "residual = { CO2 = \"1.7 g/L\" }",
            gases.empty() ? conditioning.residual_place : gases.front().gas.place);
    }
    return;
  }
  const bool temperature = recipe_.contact && recipe_.contact->temperature;
  if (conditioning.residual_temperature || temperature) return;
  error("residual-missing", "[conditioning] lacks 'residual'",
        "the warmest temperature at which the liquid last stood open, or its content of CO2",
        "residual = \"18 degC\"", conditioning.place);
}

// The content is made in the package; the contact gives one of temperature and pressure.
void RecipeCheck::check_conditioning_contact(const ConditioningSection& conditioning) {
  const auto* contact = recipe_.contact ? &*recipe_.contact : nullptr;
  const std::string example = "[contact]\ntemperature = \"20 degC\"";
  if (contact == nullptr || (!contact->temperature && !contact->pressure)) {
    if (!recipe_.readable) return;
    error("nothing-answerable",
          "nothing can be answered yet: the pressure after conditioning needs a temperature",
          "the temperature of the package", example,
          contact == nullptr ? conditioning.place : contact->place);
    return;
  }
  const auto refuse = [&](std::string_view key, const Place& place) {
    error("conditioning-contact",
          fmt::format("'contact.{}' has no meaning where the content is made by fermentation", key),
          "the temperature of the package alone; CO2 from before as 'conditioning.residual'",
          example, place, conditioning.place);
  };
  if (contact->dissolved_place) refuse("dissolved", *contact->dissolved_place);
  if (contact->temperature && contact->pressure)
    refuse("pressure", contact->pressure->source.place);
  if (contact->depth) refuse("depth", contact->depth->source.place);
  if (contact->approach) refuse("approach", contact->approach->source.place);
  GivenContent made;
  made.gas = {"CO2", conditioning.place};
  if (recipe_.readable) check_content_gas(made);
  if (recipe_.supply) {
    error("supply-with-conditioning", "a drink conditioned in its package needs no gas supply",
          "[conditioning] or [supply]", "", recipe_.supply->place, conditioning.place);
  }
}

void RecipeCheck::check_supply(const SupplySection& supply) {
  if (supply.flow && supply.amount) {
    error("supply-twice", "the liquid is given both as a flow and as an amount", "one of them", "",
          supply.amount->source.place, supply.flow->source.place);
  } else if (!supply.flow && !supply.amount) {
    error("supply-incomplete", "[supply] lacks 'liquid'", "a flow of liquid, or an amount",
          "liquid = \"120 hL/h\"\nor: amount = \"400 hL\"", supply.place);
  }
  for (const auto& content : supply.incoming) {
    if (recipe_.readable) check_content_gas(content);
  }
  if (supply.purge && !recipe_.container) {
    error("purge-without-container",
          "a purge is counted in volumes of the container; there is none",
          "a [container] with brimful and fill", "", supply.purge->source.place);
  }
}

}  // namespace capsigh::answer_detail
