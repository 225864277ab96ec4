// Liquids: trade relations and composition, salts by formula, and what recipes may say of them.
#include <catch2/catch.hpp>

#include "answer/salts.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

double volumes(const std::string& liquid, double t, const std::string& pressure) {
  const auto r = answered("[liquid]\n" + liquid + "[contact]\ntemperature = \"" +
                          std::to_string(t) + " degC\"\npressure = \"" + pressure + "\"\n");
  return si_value(r.answer.gases[0].volumes.value);
}

const std::string kSoda = "[liquid]\nlike = \"soft drink\"\nbrix = \"10.5 %\"\n";
const std::string kWish =
    "[contact]\ntemperature = \"4 degC\"\naltitude = \"350 m\"\n[target]\nCO2 = \"3.70 vol\"\n";

}  // namespace

TEST_CASE("a soft drink needs 1.62 bar gauge as tested and 1.88 true") {
  // An independent calculation at 10.5 °Brix, 3.70 vol, 4 °C, 350 m; within 1 %.
  const auto r = answered(kSoda + kWish);
  CHECK(within_relative(si_value(r.answer.saturation[0].pressure_gauge.value) / 1e5, 1.62, 0.01));
  REQUIRE(r.second_opinion.size() == 1);
  CHECK(r.second_opinion[0].relation == "composition");
  CHECK(within_relative(r.second_opinion[0].value / 100, 1.88, 0.01));
  const auto truly = answered(kSoda + "basis = \"true\"\n" + kWish);
  CHECK(within_relative(si_value(truly.answer.saturation[0].pressure_gauge.value) / 1e5,
                        r.second_opinion[0].value / 100, 1e-12));
}

TEST_CASE("as tested, a soft drink is read like water") {
  for (const double t : {0.5, 4.0, 12.0, 25.0}) {
    const double water = volumes("", t, "2.6 bar abs");
    CHECK(within_relative(volumes("like = \"soft drink\"\nbrix = \"10.5 %\"\n", t, "2.6 bar abs"),
                          water, 1e-9));
  }
}

TEST_CASE("as tested, only the instruments are in doubt") {
  const auto r = answered(kSoda +
                          "[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1.62 bar "
                          "gauge ± 0.05 bar\"\naltitude = \"350 m\"\n");
  // 0.047 vol from ± 0.3 K and ± 0.05 bar; what the records add is the volume of a mole.
  CHECK(std::abs(si_value(r.answer.gases[0].volumes.u) - 0.047) <= 0.0005);
  const auto truly = answered(kSoda +
                              "basis = \"true\"\n[contact]\ntemperature = \"4 degC ± 0.3 K\"\n"
                              "pressure = \"1.62 bar gauge ± 0.05 bar\"\naltitude = \"350 m\"\n");
  CHECK(si_value(truly.answer.gases[0].volumes.u) > 0.06);
}

TEST_CASE("beer is read by ASBC, to its printed digits") {
  // 40 °F, 15 psig at sea level: 2.760 vol; 50 °F, 10 psig: 1.912 vol (regression of the table).
  CHECK(std::abs(volumes("like = \"beer\"\n", (40 - 32) / 1.8, "29.695 psi abs") - 2.760) <=
        0.0006);
  CHECK(std::abs(volumes("like = \"beer\"\n", 10, "24.695 psi abs") - 1.912) <= 0.0006);
}

TEST_CASE("beer by MEBAK and wine by OIV, to their printed digits") {
  const auto mebak = answered(
      "[liquid]\nlike = \"beer\"\nrelation = \"MEBAK\"\n[contact]\ntemperature = \"6 degC\"\n"
      "pressure = \"2 bar abs\"\n");
  CHECK(std::abs(si_value(mebak.answer.gases[0].mass_fraction.value) * 1e3 - 2 * 2.5610) <= 2e-4);
  const auto oiv = answered(
      "[liquid]\nlike = \"sparkling wine\"\nethanol = \"12.5 % v/v\"\nsucrose = \"10 g/L\"\n"
      "[contact]\ntemperature = \"20 degC\"\npressure = \"1 bar abs\"\n");
  CHECK(std::abs(si_value(oiv.answer.gases[0].mass_concentration.value) - 1.4133) <= 1e-4);
}

TEST_CASE("composition lies beside the trade's relations by the known gap") {
  // Found here for the standard beer and a dry wine at 0 to 25 °C and 2.2 bar: 3.6 to 7.6 % below
  // ASBC, 6.2 to 8.7 % below MEBAK, −1.8 to +10.6 % from OIV (whose enthalpy from memory, 24.8
  // kJ/mol, is steeper than any in water). Half a per cent of room for other pressures.
  const auto beer = [](double t, const std::string& more) {
    return volumes("like = \"beer\"\n" + more, t, "2.2 bar abs");
  };
  for (const double t : {0.0, 6.0, 12.0, 20.0, 25.0}) {
    const double by_composition = beer(t, "basis = \"true\"\n");
    const double asbc = by_composition / beer(t, "") - 1;
    const double mebak = by_composition / beer(t, "relation = \"MEBAK\"\n") - 1;
    INFO(t << " degC: " << asbc << " of ASBC, " << mebak << " of MEBAK");
    CHECK(asbc <= -0.031);
    CHECK(asbc >= -0.081);
    CHECK(mebak <= -0.057);
    CHECK(mebak >= -0.092);
    const std::string wine =
        "like = \"sparkling wine\"\nethanol = \"12.5 % v/v\"\nsucrose = \"8 g/L\"\n";
    const double oiv =
        volumes(wine + "basis = \"true\"\n", t, "2.2 bar abs") / volumes(wine, t, "2.2 bar abs") -
        1;
    INFO("wine " << oiv);
    CHECK(oiv >= -0.023);
    CHECK(oiv <= 0.111);
  }
}

TEST_CASE("outside its range a relation is carried on from the edge, and said so") {
  const auto at = [](double t) {
    return answered("[liquid]\nlike = \"beer\"\n[contact]\ntemperature = \"" + std::to_string(t) +
                    " degC\"\npressure = \"2 bar abs\"\n");
  };
  const auto factor = [&](double t) {
    const auto r = at(t);
    for (const auto& o : r.second_opinion) {
      if (o.relation == "composition") {
        return si_value(r.answer.gases[0].volumes.value) / o.value;
      }
    }
    return 0.0;
  };
  CHECK(within_relative(factor(60), factor(25), 1e-9));
  CHECK(at(20).cautions.empty());
  REQUIRE(at(60).cautions.size() >= 1);
  bool said = false;
  for (const auto& c : at(60).cautions) said = said || c.message.find("relation.asbc") == 0;
  CHECK(said);
}

TEST_CASE("true content of a fermented drink has a u of at least 4 %") {
  const auto r = answered(
      "[liquid]\nlike = \"beer\"\nbasis = \"true\"\n[contact]\ntemperature = \"6 degC\"\n"
      "pressure = \"2 bar abs\"\n");
  const auto& f = r.answer.gases[0].volumes;
  CHECK(si_value(f.u) >= 0.04 * si_value(f.value));
}

TEST_CASE("salts split into ions and weigh what they should") {
  const auto& library = built_in_library();
  // Molar masses from atomic weights, g/mol; last printed digit.
  const std::vector<std::tuple<std::string, double, double>> salts{
      {"NaCl", 58.443, 2},    {"NaHCO3", 84.007, 2},    {"CaCl2", 110.98, 3},
      {"MgSO4", 120.366, 2},  {"Ca(HCO3)2", 162.11, 3}, {"(NH4)2SO4", 132.14, 3},
      {"KH2PO4", 136.086, 2}, {"Na2CO3", 105.988, 3},   {"Mg(NO3)2", 148.31, 3}};
  for (const auto& [formula, mass, pieces] : salts) {
    const auto salt = answer_detail::read_salt(library, formula);
    INFO(formula);
    REQUIRE(salt.ions.size() == 2);
    CHECK(std::abs(salt.molar_mass * 1e3 - mass) <= 0.01);
    CHECK(salt.ions[0].count + salt.ions[1].count == pieces);
    double charge = 0;
    for (const auto& ion : salt.ions) charge += ion.count * ion.ion->values[1].value;
    CHECK(charge == 0);
  }
  CHECK(answer_detail::read_salt(library, "NaSO4").neutral == "Na2SO4");
  CHECK(answer_detail::read_salt(library, "Unobtainium").ions.empty());
  std::size_t ions = 0;
  for (const auto& record : library.records()) {
    if (record.key.starts_with("ion.")) ++ions;
  }
  CHECK(ions >= 50);
}

TEST_CASE("1 mol/L of sodium chloride salts CO2 out by its Sechenov constant") {
  const auto c = binding(
                     "[liquid]\nsalts = { NaCl = \"1 mol/L\" }\n[contact]\n"
                     "temperature = \"25 degC\"\npressure = \"2 bar abs\"\n")
                     .problem;
  const auto s = salting_exponent(c.medium.liquid, liquid_of(c.medium), c.medium.gases[0].salting,
                                  true, celsius(25));
  // 0.1143 + 0.0318 − 2 × 0.0172 (Weisenberger & Schumpe 1996).
  CHECK(std::abs(s.value() - 0.1117) < 1e-9);
}

TEST_CASE("seawater by its ions agrees with Weiss within its doubt") {
  const auto r = answered(
      "[liquid]\nlike = \"seawater\"\n[contact]\ntemperature = \"20 degC\"\n"
      "pressure = \"1.0363 bar abs\"\n");
  const auto& f = r.answer.gases[0].mass_fraction;
  // Table III: 0.03241 mol/(kg atm) at S = 35, 20 °C; 1.0363 bar is 1 atm and the vapour, φ 0.9948.
  const double weiss = 0.03241 * 0.9948 * 44.0095e-3;
  CHECK(std::abs(si_value(f.value) - weiss) <= 2 * si_value(f.u));
}

TEST_CASE("what liquids may not say") {
  const std::string contact = "[contact]\ntemperature = \"4 degC\"\npressure = \"2 bar abs\"\n";
  const auto code = [&](const std::string& liquid) {
    const auto codes = refusals("[liquid]\n" + liquid + contact);
    REQUIRE(codes.size() == 1);
    return codes[0];
  };
  CHECK(code("like = \"beeer\"\n") == "unknown-liquid");
  CHECK(code("basis = \"tested\"\n") == "unknown-basis");
  CHECK(code("basis = \"as tested\"\n") == "no-relation");
  CHECK(code("like = \"beer\"\nrelation = \"DIN\"\n") == "unknown-relation");
  CHECK(code("volume_basis = \"normal\"\n") == "unknown-volume-basis");
  CHECK(code("brix = \"10 %\"\nsucrose = \"5 g/L\"\n") == "brix-and-sugar");
  CHECK(code("ethanol = \"5 %\"\n") == "unit-wrong-kind");
  CHECK(code("salts = { NaSO4 = \"1 g/L\" }\n") == "salt-not-neutral");
  CHECK(code("salts = { Salt = \"1 g/L\" }\n") == "unknown-salt");
  CHECK(code("salts = \"NaCl\"\n") == "not-a-section");
}

TEST_CASE("an ideal volume is 0.7 % larger than a real one") {
  const double real = volumes("", 4, "2.6 bar abs");
  const double ideal = volumes("volume_basis = \"ideal\"\n", 4, "2.6 bar abs");
  CHECK(within_relative(ideal / real, 22.414 / 22.263, 1e-5));
}

TEST_CASE("reactive gases carry their caution") {
  const auto r = answered(
      "[gas]\nSO2 = \"1 %\"\nN2 = \"rest\"\n[contact]\n"
      "temperature = \"20 degC\"\npressure = \"1 bar abs\"\n");
  bool said = false;
  for (const auto& c : r.cautions) said = said || c.code == "reactive-gas";
  CHECK(said);
}
