// Carbonation by fermentation in the package, and gas for a run.
#include <catch2/catch.hpp>

#include <set>

#include "capsigh/models/fermentation.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

double number_of(const auto& figure) { return si_value(figure.value); }
double u(const auto& figure) { return si_value(figure.u); }

double molar_mass(std::string_view name) {
  return built_in_library().at("molar_mass." + std::string(name)).values[0].value;
}

// Grams of CO2 of a gram of sugar, as the program has it.
double per_gram(const std::string& sugar) {
  const auto& record = built_in_library().at("conditioning." + sugar);
  const CarbonDioxideOfSugar law{record.values[0].value, record.values[1].value};
  const auto mass = [](double g) { return from_si<MolarMass>(g * 1e-3); };
  return law(mass(molar_mass("CO2")), mass(built_in_library().at(record.parts[0]).values[0].value),
             mass(molar_mass("H2O")))
      .value();
}

const std::string kBottle =
    "[container]\nbrimful = \"775 mL\"\nfill = \"750 mL\"\n"
    "closed_at = { temperature = \"16 degC\", air = \"100 %\" }\n";

std::string conditioned(const std::string& keys, const std::string& contact = "20 degC") {
  return "[contact]\ntemperature = \"" + contact + "\"\n[conditioning]\n" + keys;
}

}  // namespace

TEST_CASE("stoichiometry follows from molar masses, to all digits") {
  // IUPAC 2007 atomic weights, summed here from the formulas.
  constexpr double c = 12.0107;
  constexpr double h = 1.00794;
  constexpr double o = 15.9994;
  const double gas = c + 2 * o;
  const double hexose = 6 * c + 12 * h + 6 * o;
  const double disaccharide = 12 * c + 22 * h + 11 * o;
  const double water = molar_mass("H2O");  // of ordinary isotopic composition, 18.015268
  CHECK(within_relative(molar_mass("CO2"), gas, 1e-12));
  CHECK(within_relative(molar_mass("glucose"), hexose, 1e-12));
  CHECK(within_relative(molar_mass("maltose"), disaccharide, 1e-12));
  CHECK(within_relative(water, 2 * h + o, 1e-6));
  const std::map<std::string, double> expected{
      {"glucose", 2 * gas / hexose},
      {"fructose", 2 * gas / hexose},
      {"sucrose", 4 * gas / disaccharide},
      {"maltose", 4 * gas / disaccharide},
      {"glucose monohydrate", 2 * gas / (hexose + water)},
      {"maltose monohydrate", 4 * gas / (disaccharide + water)},
  };
  // Four digits of any textbook; half of the last.
  const std::map<std::string, double> printed{
      {"glucose", 0.4886},
      {"fructose", 0.4886},
      {"sucrose", 0.5143},
      {"maltose", 0.5143},
      {"maltose monohydrate", 0.4886},
      {"glucose monohydrate", 0.4442},
  };
  for (const auto& [sugar, ratio] : expected) {
    INFO(sugar);
    CHECK(within_relative(per_gram(sugar), ratio, 1e-14));
    CHECK(std::abs(per_gram(sugar) - printed.at(sugar)) <= 0.00005);
  }
  // Mass closes: sugar and water become ethanol and CO2.
  CHECK(within_relative(4 * (gas + molar_mass("ethanol")), disaccharide + 2 * h + o, 1e-12));
  CHECK(within_relative(2 * (gas + molar_mass("ethanol")), hexose, 1e-12));
  // Practice (Balling) is the assumed yield of glucose, within its 3 %.
  const auto& practice = built_in_library().at("conditioning.practice");
  const auto& yield = built_in_library().at("assumed.conditioning_yield");
  CHECK(within_relative(per_gram("glucose") * yield.values[0].value / 100, practice.values[0].value,
                        0.03));
}

TEST_CASE("a dose: residual and produced make the content, and its pressure") {
  const auto r = answered(conditioned(
      "sugar = \"sucrose\"\ndose = \"8 g/L\"\nresidual = \"18 degC\"\nyield = \"95 %\"\n"));
  const auto& c = r.answer.conditioning;
  CHECK(within_relative(number_of(c.produced), 8 * per_gram("sucrose") * 0.95, 1e-12));
  // Water under 1 atm of CO2 at 18 °C, by its own recipe.
  const auto open = answered("[contact]\ntemperature = \"18 degC\"\npressure = \"0 bar gauge\"\n");
  CHECK(within_relative(number_of(c.residual), number_of(open.answer.gases[0].mass_concentration),
                        1e-12));
  CHECK(within_relative(number_of(r.answer.gases[0].mass_concentration),
                        number_of(c.residual) + number_of(c.produced), 1e-12));
  CHECK(number_of(c.pressure_gauge) == number_of(r.answer.pressure_gauge));
  const auto same = answered("[contact]\ntemperature = \"20 degC\"\ndissolved = { CO2 = \"" +
                             fmt::format("{:.12f}", number_of(c.content)) + " g/L\" }\n");
  CHECK(within_relative(number_of(c.pressure_gauge), number_of(same.answer.pressure_gauge), 1e-9));
  // Ethanol by weight is 46.068/44.010 of the CO2; 789.24 kg/m³ at 20 °C (OIML R22).
  CHECK(within_relative(number_of(c.ethanol_added),
                        number_of(c.produced) * 46.06844 / 44.0095 / 789.24, 1e-5));
}

TEST_CASE("a dose is found, and brings its target") {
  const std::string wish = "[target]\nCO2 = \"2.8 vol\"\n";
  const auto found = answered(
      conditioned("sugar = \"glucose monohydrate\"\ndose = \"find\"\nresidual = \"18 degC\"\n") +
      wish);
  const auto& c = found.answer.conditioning;
  CHECK(within_relative(number_of(found.answer.gases[0].volumes), 2.8, 1e-12));
  const auto back =
      answered(conditioned("sugar = \"glucose monohydrate\"\nresidual = \"18 degC\"\n"
                           "dose = \"" +
                           fmt::format("{:.12f}", number_of(c.dose)) + " g/L\"\n"));
  CHECK(within_relative(number_of(back.answer.gases[0].volumes), 2.8, 1e-10));
  // By weight 10 % more than of anhydrous glucose: (180.156 + 18.015)/180.156.
  const auto dry = answered(
      conditioned("sugar = \"glucose\"\ndose = \"find\"\nresidual = \"18 degC\"\n") + wish);
  CHECK(within_relative(number_of(c.dose) / number_of(dry.answer.conditioning.dose),
                        per_gram("glucose") / per_gram("glucose monohydrate"), 1e-12));
  CHECK(u(c.dose) > 0.02 * number_of(c.dose));  // the assumed yield alone is 2 %
}

TEST_CASE("in a package all CO2 is conserved, and the headspace takes its share") {
  const auto r = answered(
      conditioned("dose = \"8 g/L\"\nresidual = { CO2 = \"1.6 g/L\" }\nyield = \"100 %\"\n") +
      kBottle + "[opening]\n");
  const auto& c = r.answer.conditioning;
  const double inside = number_of(r.answer.opened.total) * 1e3;  // g
  // 750 mL of residual liquid at 16 °C hold 750 mL · ρ(16)/ρ(20) of it at 20 °C, less its swelling:
  // 998.943/998.204, and b v̄ = 1.6/44.01 mol/kg · 33 cm³/mol.
  const double litres = 0.750 * 998.943 / 998.204 / (1 + 1.6 / 44.0095 * 33e-3);
  // Air closed in brings 0.04 % of CO2 in 25 mL: 20 µg.
  CHECK(within_relative(inside, litres * number_of(c.content), 1e-4));
  const auto& package = r.answer.package.at.at(0);
  CHECK(number_of(package.gases[0].mass_concentration) < number_of(c.content));
  // The package's pressure at the contact's temperature; the container's at closing, colder.
  CHECK(number_of(c.pressure_gauge) > number_of(package.pressure_gauge));
}

TEST_CASE("a dose for a target in the package") {
  const auto r = answered(conditioned("dose = \"find\"\nresidual = \"16 degC\"\n", "16 degC") +
                          "[target]\nCO2 = \"3.2 vol\"\nat = \"package\"\n" + kBottle);
  CHECK(within_relative(number_of(r.answer.package.at.at(0).gases.at(0).volumes), 3.2, 1e-9));
  CHECK(number_of(r.answer.gases.at(0).volumes) > 3.2);
  const auto without =
      answered(conditioned("dose = \"find\"\nresidual = \"16 degC\"\n", "16 degC") +
               "[target]\nCO2 = \"3.2 vol\"\n" + kBottle);
  CHECK(number_of(r.answer.conditioning.dose) > number_of(without.answer.conditioning.dose));
}

TEST_CASE("the cellar rule: 4 g/L of sugar a bar") {
  // Common practice, no source: true in a cellar at 10 to 12 °C; at 20 °C it gives 1.3 to 1.4 bar.
  const auto pressure = [](double dose, const std::string& t) {
    return number_of(
               answered(
                   "[liquid]\nlike = \"sparkling wine\"\n" +
                   conditioned(fmt::format("dose = \"{} g/L\"\nresidual = {{ CO2 = \"1 mg/L\" }}\n"
                                           "yield = \"94 %\"\n",
                                           dose),
                               t))
                   .answer.conditioning.pressure_gauge) /
           1e5;
  };
  const auto per_bar = [&](const std::string& t) {
    return (pressure(24, t) - pressure(12, t)) / 3;  // bar per 4 g/L
  };
  CHECK(per_bar("11 degC") > 0.90);
  CHECK(per_bar("11 degC") < 1.10);
  CHECK(per_bar("20 degC") > 1.25);
  CHECK(per_bar("20 degC") < 1.45);
}

TEST_CASE("the monohydrate trap, overpriming and glass are named") {
  const auto codes = [](const std::string& keys) {
    std::set<std::string> all;
    for (const auto& c : answered(conditioned(keys + "residual = \"18 degC\"\n")).cautions) {
      all.insert(c.code);
    }
    return all;
  };
  CHECK(codes("sugar = \"glucose\"\ndose = \"6 g/L\"\n").count("monohydrate") == 1);
  CHECK(codes("sugar = \"glucose monohydrate\"\ndose = \"6 g/L\"\n").count("monohydrate") == 0);
  CHECK(codes("sugar = \"sucrose\"\ndose = \"6 g/L\"\n").count("overpriming") == 0);
  CHECK(codes("sugar = \"sucrose\"\ndose = \"20 g/L\"\n").count("overpriming") == 1);
  CHECK(codes("sugar = \"sucrose\"\ndose = \"6 g/L\"\n").count("bottle-conditioning") == 1);
}

TEST_CASE("gas of a run: what dissolves, what fills, what purges") {
  const std::string contact =
      "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"7.3 g/L\" }\n";
  const auto flow = answered(contact +
                             "[supply]\nliquid = \"120 hL/h\"\n"
                             "incoming = { CO2 = \"0.3 g/L\" }\n");
  // (7.3 − 0.3) g/L · 12 000 L/h.
  CHECK(within_relative(number_of(flow.answer.supply.gas_flow) * 3600, 84.0, 1e-12));
  CHECK(within_relative(number_of(flow.answer.supply.per_hectolitre), 0.700, 1e-12));
  const std::string can = "[container]\nbrimful = \"355 mL\"\nfill = \"330 mL\"\n";
  const auto run = answered(contact + can + "[supply]\namount = \"400 hL\"\npurge = \"200 %\"\n");
  const auto& s = run.answer.supply;
  CHECK(within_relative(number_of(s.dissolved), 0.730, 1e-12));
  CHECK(within_relative(number_of(s.gas_mass), 400 * number_of(s.per_hectolitre), 1e-12));
  // 25 mL of CO2 at 4 °C and 1 atm less its vapour, Z 0.99363 (B −144.9 cm3/mol, Weiss
  // 1974): 1.9320 g/L, in about 304 cans a hL; B is given to four digits.
  const double cans = 100 / (0.330 * 999.97 / 998.20 / (1 + 7.3 / 44.0095 * 33e-3));
  CHECK(within_relative(number_of(s.headspace), cans * 0.025e-3 * 1.9320, 2e-4));
  // 710 mL at ambient, ideal.
  const double per_litre = 101325 * 44.0095e-3 / (8.314462618 * 277.15) * 1e-3;
  CHECK(within_relative(number_of(s.purge), cans * 0.710 * per_litre, 1e-4));
  CHECK(within_relative(number_of(s.per_hectolitre),
                        number_of(s.dissolved) + number_of(s.headspace) + number_of(s.purge),
                        1e-12));
  // Air in the headspace needs no gas.
  const auto air =
      answered(contact + can + "closed_at = { air = \"40 %\" }\n[supply]\namount = \"1 hL\"\n");
  CHECK(
      within_relative(number_of(air.answer.supply.headspace), 0.6 * number_of(s.headspace), 0.003));
}

TEST_CASE("incoming liquid that holds more takes nothing, and says so") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"5 g/L\" }\n[supply]\n"
      "liquid = \"10 hL/h\"\nincoming = { CO2 = \"6 g/L\" }\n");
  CHECK(number_of(r.answer.supply.gas_flow) == 0);
  CHECK(std::any_of(r.cautions.begin(), r.cautions.end(),
                    [](const auto& c) { return c.code == "incoming-holds-more"; }));
}

TEST_CASE("what opening, conditioning and supply need is asked for") {
  const std::string contact = "[contact]\ntemperature = \"4 degC\"\npressure = \"2 bar gauge\"\n";
  const std::string can = "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\n";
  using Codes = std::vector<std::string>;
  CHECK(refusals(contact + "[opening]\nafter = \"5 min\"\n") == Codes{"escape-missing"});
  CHECK(refusals(contact + can + "[opening]\nreclose_after = \"-1 min\"\n") ==
        Codes{"reclose-before-open"});
  CHECK(refusals(contact + "[opening]\nsurface = \"20 cm2\"\n") == Codes{"escape-incomplete"});
  CHECK(refusals(conditioned("sugar = \"dextrose\"\ndose = \"8 g/L\"\n")) ==
        Codes{"unknown-sugar"});
  CHECK(refusals(conditioned("sugar = \"sucrose\"\n")) == Codes{"dose-missing"});
  CHECK(refusals(conditioned("dose = \"find\"\n")) == Codes{"find-needs"});
  CHECK(refusals("[conditioning]\ndose = \"8 g/L\"\nresidual = \"18 degC\"\n") ==
        Codes{"nothing-answerable"});
  CHECK(refusals(conditioned("dose = \"find\"\nresidual = \"4 degC\"\n") +
                 "[target]\nCO2 = \"1.2 vol\"\n") == Codes{"nothing-to-condition"});
  // Closed again at once, nothing needs to be known of the escape.
  CHECK(refusals(contact + can + "[opening]\nreclose_after = \"0 s\"\n").empty());
}
