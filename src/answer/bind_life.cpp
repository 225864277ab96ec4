#include "bind_life.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "capsigh/quantity/grammar.hpp"
#include "recipe_check.hpp"
#include "records.hpp"

namespace capsigh::answer_detail {

void LifeBinder::assume(std::string code, std::string message) {
  binding_.notes.push_back(note(Severity::assumption, std::move(code), std::move(message)));
}

void LifeBinder::caution(std::string code, std::string message) {
  binding_.notes.push_back(note(Severity::caution, std::move(code), std::move(message)));
}

void LifeBinder::cite(std::string_view key) {
  const Record* record = &library_.at(key);
  auto& used = binding_.also_used;
  if (std::find(used.begin(), used.end(), record) == used.end()) used.push_back(record);
}

void LifeBinder::bind_opening() {
  if (!recipe_.opening) return;
  const auto& given = *recipe_.opening;
  OpeningCase opening;
  if (given.temperature) {
    opening.temperature = take("opening.temperature", *given.temperature);
  } else {
    assume("opening-temperature-assumed", "opened at the temperature of the liquid above");
  }
  if (!recipe_.container) {
    assume("opening-per-litre", "no container: losses per litre of degassed liquid, no headspace");
  }
  bind_laws_of_opening(opening);
  if (given.escape_half_life || given.surface) opening.escape = escape(given);
  for (const auto& moment : given.after) opening.after.push_back(take("opening.after", moment));
  if (given.reclose_after) {
    opening.reclose_after = take("opening.reclose_after", *given.reclose_after);
  }
  binding_.problem.opening = std::move(opening);
}

EscapeCase LifeBinder::escape(const OpeningSection& given) {
  EscapeCase e;
  if (given.escape_half_life) {
    e.half_life = take("opening.escape_half_life", *given.escape_half_life);
    assume("escape-as-measured",
           "every gas escapes with the half-life of the recipe, from the content at opening on");
    return e;
  }
  e.surface = take("opening.surface", *given.surface);
  const auto& stillness = given.stillness->text;
  const Record& record = library_.at("stillness." + stillness);
  e.transfer = cited_constant<Velocity>(record);
  assume("stillness-assumed",
         fmt::format("a {} surface: transfer coefficient {} {}, of the order of magnitude only",
                     stillness, record.values[0].digits, record.unit));
  if (const Record* pour = library_.find("pour." + stillness)) {
    e.pour = cited_constant<Fraction>(*pour);
    assume(
        "pour-assumed",
        fmt::format("pouring takes {} % of the CO2 at once: 5.5 % were measured for lager poured "
                    "gently, 27 % for sparkling wine poured upright",
                    significant(100 * pour->values[0].value * pour->factor, 2)));
  }
  return e;
}

void LifeBinder::bind_laws_of_opening(OpeningCase& opening) {
  const auto& medium = binding_.problem.medium;
  for (const auto& gas : medium.gases) {
    opening.heat_ratio.push_back(
        cited_constant<Fraction>(library_.at("heat_capacity_ratio." + std::string(gas.name))));
  }
  const auto liquid = compose(medium.liquid, medium.content_temperature);
  if (liquid.x_ethanol.value() > 0) {
    opening.tension = cited_constant<SurfaceTension>(library_.at("surface_tension.fermented"));
  } else {
    const Record& record = library_.at("surface_tension.water");
    opening.tension =
        Cited<WaterSurfaceTension>{WaterSurfaceTension::from(record), doubt_of(record)};
  }
  opening.sublimation = SublimationPressure::from(library_.at("sublimation_pressure.CO2"));
  if (recipe_.container) cite("sublimation_pressure.CO2");
}

// Dextrose as it is sold carries a tenth of water: the commonest mistake in priming.
void LifeBinder::name_the_monohydrate(const std::string& sugar) {
  const auto per_gram = [&](const std::string& name) {
    const Record& record = library_.at("conditioning." + name);
    const CarbonDioxideOfSugar law{record.values[0].value, record.values[1].value};
    return law(constant<MolarMass>(library_, "molar_mass.CO2"),
               constant<MolarMass>(library_, record.parts[0]),
               constant<MolarMass>(library_, "molar_mass.H2O"))
        .value();
  };
  const std::string hydrate = sugar + " monohydrate";
  if (library_.find("conditioning." + hydrate) == nullptr) return;
  caution("monohydrate",
          fmt::format("{0} is taken as anhydrous; {0} monohydrate{1} gives {2} % less CO2 from the "
                      "same weight: name it \"{3}\" if that is in the bag",
                      sugar, sugar == "glucose" ? " (dextrose as it is mostly sold)" : "",
                      significant(100 * (1 - per_gram(hydrate) / per_gram(sugar)), 2), hydrate));
}

void LifeBinder::bind_conditioning() {
  if (!recipe_.conditioning) return;
  const auto& given = *recipe_.conditioning;
  const std::string sugar = given.sugar ? given.sugar->text : "sucrose";
  if (!given.sugar) assume("sugar-assumed", "sugar: sucrose");
  ConditioningCase c;
  const Record& record = library_.at("conditioning." + sugar);
  cite(record.key);
  c.of_sugar = {record.values[0].value, record.values[1].value};
  c.sugar = cited_constant<MolarMass>(library_.at(record.parts[0]));
  c.ethanol = cited_constant<MolarMass>(library_.at("molar_mass.ethanol"));
  const Record& density = library_.at("density.ethanol_water");
  c.ethanol_density = {EthanolWaterDensity::from(density, binding_.problem.medium.zero_celsius),
                       doubt_of(density)};
  name_the_monohydrate(sugar);
  if (given.dose) {
    c.dose = take("conditioning.dose", *given.dose);
  } else {
    const auto wish =
        std::find_if(recipe_.target.begin(), recipe_.target.end(),
                     [](const GivenTarget& t) { return t.content.gas.text == "CO2"; });
    c.wanted = content_(wish->content, "");
  }
  if (given.residual_temperature) {
    c.residual_temperature = take("conditioning.residual", *given.residual_temperature);
  } else if (given.residual_place) {
    c.residual = content_(given.residual.front(), "conditioning.residual.CO2");
  } else {
    assume("residual-assumed",
           "CO2 before conditioning: in equilibrium with the open air of a fermenter (pure CO2 at "
           "ambient pressure) at the contact's temperature; colder, there is more");
  }
  if (given.yield) {
    c.yield = take("conditioning.yield", *given.yield);
  } else {
    const Record& assumed = library_.at("assumed.conditioning_yield");
    c.assumed_yield = cited_constant<Fraction>(assumed);
    assume("yield-assumed", fmt::format("yield: {} % of the stoichiometric CO2, as is usual",
                                        assumed.values[0].digits));
  }
  assume(
      "conditioning-liquid",
      "the liquid's composition is that after conditioning; only the sugar dosed ferments, all of "
      "it, and no gas leaves the package");
  if (recipe_.container) {
    assume("conditioning-air",
           "air closed in stays: yeast may take its oxygen, and a little of the pressure with it");
  }
  binding_.problem.conditioning = std::move(c);
}

void LifeBinder::bind_supply() {
  if (!recipe_.supply) return;
  const auto& given = *recipe_.supply;
  SupplyCase s;
  if (given.flow) s.flow = take("supply.liquid", *given.flow);
  if (given.amount) s.amount = take("supply.amount", *given.amount);
  for (const auto& in : given.incoming) {
    s.incoming.push_back(content_(in, "supply.incoming." + in.gas.text));
  }
  if (given.incoming.empty()) assume("incoming-assumed", "the incoming liquid holds no gas");
  if (given.purge) s.purge = take("supply.purge", *given.purge);
  s.enthalpy = doubt_of(library_.at("enthalpy.from_henry"));
  s.water = cited_constant<SpecificHeat>(library_.at("heat_capacity.water"));
  s.alcohol = cited_constant<SpecificHeat>(library_.at("heat_capacity.ethanol"));
  s.solids = cited_constant<SpecificHeat>(library_.at("heat_capacity.solids"));
  assume("supply-net",
         "gas that the drink and its packages take; leaks, venting and what a saturator blows off "
         "come on top. Litres are of degassed liquid at 20 °C");
  binding_.problem.supply = std::move(s);
}

}  // namespace capsigh::answer_detail
