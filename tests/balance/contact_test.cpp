#include <catch2/catch.hpp>

#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

std::string water(const std::string& t, const std::string& target) {
  return "[contact]\ntemperature = \"" + t + "\"\nambient = \"1013.25 hPa\"\n[target]\nCO2 = \"" +
         target + "\"\n";
}

double bar_gauge(const Figure<GaugePressure>& f) { return si_value(f.value) / 1e5; }

}  // namespace

TEST_CASE("saturation pressures of sparkling water at 1013.25 hPa") {
  // An independent calculation of the same laws, within 0.3 %.
  struct Check {
    std::string t, content;
    double gauge;
  };
  for (const auto& c : {Check{"4 degC", "3.70 vol", 1.579}, Check{"4 degC", "2.60 vol", 0.800},
                        Check{"8 degC", "4.00 vol", 2.241}, Check{"20 degC", "2.50 vol", 1.974}}) {
    const auto answer = answered(water(c.t, c.content)).answer;
    INFO(c.t << " " << c.content);
    REQUIRE(answer.saturation.size() == 1);
    CHECK(within_relative(bar_gauge(answer.saturation[0].pressure_gauge), c.gauge, 0.003));
    CHECK(within_relative(bar_gauge(answer.pressure_gauge), c.gauge, 0.003));
  }
}

TEST_CASE("a content may be given in any measure") {
  const auto vol = answered(water("4 degC", "3.70 vol")).answer;
  const auto& g = vol.gases[0];
  const double gl = si_value(g.mass_concentration.value);
  const double moll = si_value(g.amount_concentration.value) / 1e3;
  const double ww = si_value(g.mass_fraction.value) * 100;
  for (const auto& text :
       {fmt::format("{} g/L", gl), fmt::format("{} mg/L", gl * 1e3), fmt::format("{} mol/L", moll),
        fmt::format("{} % w/w", ww), fmt::format("{} mmol/kg", ww * 10 / 44.0095e-3 * 1e-0)}) {
    const auto same = answered(water("4 degC", text)).answer;
    INFO(text);
    // Rounding of the printed number and the root, nothing else.
    CHECK(within_relative(si_value(same.pressure_absolute.value),
                          si_value(vol.pressure_absolute.value), 1e-9));
  }
}

TEST_CASE("what cannot be answered is refused with its reason") {
  const auto only = [](const std::string& contact) {
    const auto codes = refusals("[contact]\n" + contact);
    REQUIRE(codes.size() == 1);
    return codes[0];
  };
  CHECK(only("temperature = \"99 degC\"\npressure = \"0.9 bar abs\"\n") == "boils");
  CHECK(only("temperature = \"4 degC\"\npressure = \"30 bar gauge\"\n") == "pressure-beyond-model");
  CHECK(only("temperature = \"4 degC\"\ndissolved = { CO2 = \"40 vol\" }\n") ==
        "no-pressure-holds");
  CHECK(only("pressure = \"1 bar abs\"\ndissolved = { CO2 = \"15 vol\" }\n") ==
        "no-temperature-holds");
  CHECK(only("pressure = \"4 bar gauge\"\ndissolved = { CO2 = \"0.001 vol\" }\n") ==
        "too-little-everywhere");
  CHECK(only("temperature = \"1 K\"\npressure = \"2 bar gauge\"\n") == "temperature-beyond-model");
  CHECK(only("temperature = \"-40 degC\"\npressure = \"15 bar abs\"\n") ==
        "temperature-beyond-model");
  CHECK(only("temperature = \"95 degC\"\npressure = \"1 bar gauge\"\naltitude = \"3000 m\"\n"
             "[container]\nbrimful = \"1000 mL\"\nfill = \"500 mL\"\n") == "boils");
  CHECK(only("temperature = \"4 degC\"\npressure = \"2 bar gauge ± 40 bar\"\n") ==
        "doubt-too-wide");
  CHECK(only("temperature = \"4 degC\"\npressure = \"2 bar gauge\"\naltitude = \"15000 m\"\n") ==
        "impossible-value");
}

TEST_CASE("outside a range there is a caution with value and bounds, and a wider doubt") {
  const auto inside = answered("[contact]\ntemperature = \"4 degC\"\npressure = \"6 bar gauge\"\n");
  const auto outside =
      answered("[contact]\ntemperature = \"4 degC\"\npressure = \"12 bar gauge\"\n");
  CHECK(inside.cautions.empty());
  REQUIRE(outside.cautions.size() == 1);
  CHECK(outside.cautions[0].code == "out-of-range");
  CHECK(outside.cautions[0].message.find("13.01 bar abs") != std::string::npos);
  CHECK(outside.cautions[0].message.find("8.000 bar abs") != std::string::npos);
  const auto relative = [](const Report& r) {
    const auto& f = r.answer.gases[0].mass_concentration;
    return si_value(f.u) / si_value(f.value);
  };
  CHECK(relative(outside) > relative(inside));
}

TEST_CASE("strict turns a caution into a refusal") {
  const std::string text = "[contact]\ntemperature = \"4 degC\"\npressure = \"12 bar gauge\"\n";
  const auto document = parse_document(text, "t.toml");
  const auto strict =
      report(read_recipe(*document, "t.toml"), text, built_in_library(), {true, {}});
  CHECK_FALSE(strict);
  REQUIRE(strict.findings.size() == 1);
  CHECK(strict.findings[0].severity == Severity::error);
}

TEST_CASE("an ambient reduced to sea level is questioned beside its altitude") {
  const std::string contact =
      "[contact]\ntemperature = \"4 degC\"\npressure = \"1 bar gauge\"\naltitude = \"1600 m\"\n";
  const auto r = answered(contact + "ambient = \"1013 hPa\"\n");
  REQUIRE(r.cautions.size() == 1);
  CHECK(r.cautions[0].code == "ambient-against-altitude");
  CHECK(si_value(r.answer.ambient.value) == 101300);
  CHECK(answered(contact + "ambient = \"838 hPa\"\n").cautions.empty());
}

TEST_CASE("ranges are judged wherever a law is used") {
  const auto says = [](const std::string& text, const std::string& record) {
    bool said = false;
    for (const auto& c : answered(text).cautions) said = said || c.message.find(record) == 0;
    return said;
  };
  // A saturation temperature beyond the virials.
  CHECK(
      says("[contact]\npressure = \"6 bar gauge\"\ndissolved = { CO2 = \"8 g/L\" }\n"
           "[target]\nCO2 = \"1 vol\"\n",
           "virial.CO2"));
  // Air that only the closed package brings in.
  const std::string can = "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\n";
  CHECK(says("[contact]\ntemperature = \"-1 degC\"\npressure = \"1 bar gauge\"\n" + can +
                 "closed_at = { air = \"30 %\" }\n",
             "henry.O2.rettich2000"));
  // A package that is hot when it is opened.
  CHECK(says("[contact]\ntemperature = \"4 degC\"\npressure = \"1.6 bar gauge\"\n" + can +
                 "[opening]\ntemperature = \"70 degC\"\n",
             "real_gas.second_virial"));
}

TEST_CASE("nitrogen has two temperatures of one content; the colder is found") {
  const auto r = answered(
      "[gas]\nN2 = \"100 %\"\n[contact]\npressure = \"18 bar gauge\"\n"
      "dissolved = { N2 = \"300 mg/L\" }\n");
  CHECK(si_value(r.answer.temperature.value) < 273.15 + 50);
}

TEST_CASE("a target out of reach is a caution where it only judges") {
  const auto r = answered(
      "[gas]\nCO2 = \"99.9 %\"\nair = \"rest\"\n[contact]\ntemperature = \"4 degC\"\n"
      "pressure = \"1 bar gauge\"\n[target]\nCO2 = \"3.7 vol\"\nO2 = \"8 mg/L\"\n");
  bool said = false;
  for (const auto& c : r.cautions) said = said || c.code == "target-unreachable";
  CHECK(said);
  CHECK(r.answer.saturation[0].pressure_gauge.asked);
  CHECK_FALSE(r.answer.saturation[1].pressure_gauge.asked);
}
