// Keys of a recipe and what they do to the answer.
#include <catch2/catch.hpp>

#include "capsigh/render/render.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

const std::string kContact = "[contact]\ntemperature = \"4 degC\"\npressure = \"1.6 bar gauge\"\n";
const std::string kCan = "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\n";

double vol(const Report& r) { return si_value(r.answer.gases.at(0).volumes.value); }
double package(const Report& r) {
  return si_value(r.answer.package.at.at(0).pressure_gauge.value) / 1e5;
}

}  // namespace

TEST_CASE("depth adds the weight of the liquid") {
  const auto shallow = answered(kContact);
  const auto deep = answered(kContact + "depth = \"3 m\"\n");
  // ρ g h = 999.97 · 9.80665 · 3 = 0.29419 bar: the same as that much more on the gauge.
  const auto same =
      answered("[contact]\ntemperature = \"4 degC\"\npressure = \"1.894190 bar gauge\"\n");
  CHECK(vol(deep) > vol(shallow));
  CHECK(within_relative(vol(deep), vol(same), 1e-5));
  // The headspace stays what its gauge says.
  CHECK(si_value(deep.answer.pressure_gauge.value) ==
        si_value(shallow.answer.pressure_gauge.value));
}

TEST_CASE("approach is a share of saturation") {
  const auto all = answered(kContact);
  const auto most = answered(kContact + "approach = \"95 %\"\n");
  CHECK(within_relative(vol(most), 0.95 * vol(all), 1e-12));
  // And the saturation figure includes it: its pressure brings the target, not more.
  const std::string wish =
      "[contact]\ntemperature = \"4 degC\"\napproach = \"95 %\"\ndepth = \"2 m\"\n[target]\nCO2 = "
      "\"3.7 vol\"\n";
  CHECK(within_relative(vol(answered(wish)), 3.7, 1e-10));
}

TEST_CASE("a blend is found, holds its target, and is refused with what would") {
  const std::string head =
      "[gas]\nCO2 = \"find\"\nN2 = \"rest\"\n[contact]\ntemperature = \"6 degC\"\n";
  const auto r = answered(head + "pressure = \"2.2 bar gauge\"\n[target]\nCO2 = \"1.2 vol\"\n");
  REQUIRE(r.answer.blend.size() == 1);
  const double share = si_value(r.answer.blend[0].share.value);
  CHECK(share > 0.2);
  CHECK(share < 0.3);
  CHECK(within_relative(vol(r), 1.2, 1e-10));
  CHECK(si_value(r.answer.blend[0].share.u) > 0);
  CHECK(refusals(head + "pressure = \"0.2 bar gauge\"\n[target]\nCO2 = \"2.6 vol\"\n") ==
        std::vector<std::string>{"no-blend-holds"});
  CHECK(refusals(head + "[target]\nCO2 = \"2.6 vol\"\n") == std::vector<std::string>{"find-needs"});
}

TEST_CASE("a target at the package is held by the package") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC\"\n[target]\nCO2 = \"3.7 vol\"\n"
      "at = \"package\"\n" +
      kCan);
  CHECK(within_relative(si_value(r.answer.package.at.at(0).gases.at(0).volumes.value), 3.7, 1e-9));
  CHECK(vol(r) > 3.7);
}

TEST_CASE("fill by mass and by volume are the same can") {
  const auto by_volume = answered(kContact + kCan);
  // Mass of the carbonated liquid: degassed water and its gas.
  const double content = si_value(by_volume.answer.gases[0].mass_fraction.value);
  const double b = content / 44.0095e-3;
  const double mass = 330e-6 / (1 / 999.972 + b * 33e-6) * (1 + content);
  const auto by_mass = answered(kContact + "[container]\nbrimful = \"345 mL\"\nfill_mass = \"" +
                                fmt::format("{:.9f}", mass * 1e3) + " g\"\n");
  CHECK(
      within_relative(package(by_mass), package(by_volume), 1e-5));  // the density above is rounded
}

TEST_CASE("air as a volume and as a share are the same air") {
  const auto by_volume = answered(kContact + kCan + "closed_at = { air = \"4.5 mL\" }\n");
  // 4.5 mL of dry air of 15 mL: (p V_air/Z_air)/((p − p_v) V_H/Z).
  const auto m = medium("CO2 = \"70 %\"\nair = \"rest\"");
  const auto at = at_temperature(m, liquid_of(m), celsius(4));
  const auto z = [&](double air) {
    Shares shares;
    for (const auto& gas : m.gases) {
      const std::map<std::string_view, double> of_air{
          {"N2", 0.7808}, {"O2", 0.2095}, {"Ar", 0.0093}, {"CO2", 0.0004}};
      shares.emplace_back(of_air.at(gas.name) * air + (gas.name == "CO2" ? 1 - air : 0));
    }
    return Compressibility{m.r}(mix(m, at, shares).b_mix, bar(1.01325), at.t).value();
  };
  double share = 0.3;
  for (int i = 0; i < 6; ++i) share = 101325 * 4.5 / ((101325 - 813.513) * 15) * z(share) / z(1);
  const auto by_share = answered(kContact + kCan + "closed_at = { air = \"" +
                                 fmt::format("{:.9f}", 100 * share) + " %\" }\n");
  CHECK(within_relative(package(by_volume), package(by_share), 1e-9));
  CHECK(refusals(kContact + kCan + "closed_at = { air = \"40 mL\" }\n") ==
        std::vector<std::string>{"air-exceeds-headspace"});
}

TEST_CASE("filling loss, dissolved oxygen and nitrogen dose enter the package") {
  const auto plain = answered(kContact + kCan);
  const auto lost = answered(kContact + kCan + "filling_loss = { CO2 = \"0.5 vol\" }\n");
  CHECK(package(lost) < package(plain) - 0.1);
  const auto oxygen =
      answered(kContact + kCan + "closed_at = { dissolved_oxygen = \"30 ug/L\" }\n");
  double found = 0;
  for (const auto& g : oxygen.answer.package.at[0].gases) {
    if (g.gas == "O2") found = si_value(g.mass_concentration.value);
  }
  CHECK(found > 0);
  CHECK(found < 30e-6);  // some of it is in the headspace now
  const auto dosed = answered(kContact + kCan + "nitrogen_dose = \"20 mg\"\n");
  // 20 mg of N2 is 0.714 mmol: 1.10 bar in 15 mL at 4 °C, and the 330 mL of water (Ostwald
  // coefficient 0.022) count as 7.4 mL more: 0.73 bar.
  CHECK(std::abs(package(dosed) - package(plain) - 0.74) < 0.03);
}

TEST_CASE("a package closed warmer than its contact") {
  const auto r = answered(kContact + kCan + "closed_at = { temperature = \"12 degC\" }\n");
  CHECK(si_value(r.answer.package.at[0].temperature.value) == 285.15);
  CHECK(package(r) > package(answered(kContact + kCan)));
}

TEST_CASE("a rating below the package is an answer, and said first") {
  const auto good = answered(kContact + kCan + "rated = \"6.2 bar gauge\"\n");
  CHECK(good.limits_met);
  CHECK(si_value(good.answer.package.at[0].margin.value) > 0);
  const auto bad = answered(kContact + kCan + "rated = \"1 bar gauge\"\n");
  CHECK_FALSE(bad.limits_met);
  REQUIRE(!bad.cautions.empty());
  CHECK(bad.cautions[0].code == "over-rating");
}

TEST_CASE("a target may be a limit") {
  const auto r = answered("[gas]\nCO2 = \"99.5 %\"\nair = \"rest\"\n" + kContact +
                          "[target]\nCO2 = \"3.7 vol\"\nO2 = { max = \"1 mg/L\" }\n");
  CHECK(r.targets.size() == 1);
  REQUIRE(r.limits.size() == 1);
  CHECK(r.limits[0].second == "max 1 mg/L");
  CHECK(r.answer.saturation.size() == 1);
}

TEST_CASE("tables are laid over each other key by key") {
  auto base = *parse_document("[contact]\naltitude = \"350 m\"\ntemperature = \"4 degC\"\n", "a");
  overlay(base,
          *parse_document("[contact]\ntemperature = \"6 degC\"\n[target]\nCO2 = \"3 vol\"\n", "b"));
  CHECK(base.find("contact")->value.find("altitude")->value.text == "350 m");
  CHECK(base.find("contact")->value.find("temperature")->value.text == "6 degC");
  CHECK(base.find("target") != nullptr);
}

TEST_CASE("an assignment is text unless it reads as another type") {
  const auto value = [](const std::string& argument) {
    const auto document = parse_assignment(argument);
    REQUIRE(document);
    return document->members.at(0).value;
  };
  CHECK(value("a=39 degF").kind == Node::Kind::text);
  CHECK(value("a=39 degF").text == "39 degF");
  CHECK(value("a=0.7").kind == Node::Kind::real);
  CHECK(value("a=5").kind == Node::Kind::integer);
  CHECK(value("a=true").kind == Node::Kind::boolean);
  CHECK(value("a=[\"4 degC\", \"20 degC\"]").kind == Node::Kind::array);
  CHECK(value("a={ CO2 = \"3.7 vol\" }").kind == Node::Kind::table);
  CHECK(value("contact.temperature=4 degC").members.at(0).value.text == "4 degC");
  CHECK(value("a=he said \"x\"").text == "he said \"x\"");
  CHECK_FALSE(parse_assignment("a"));
  CHECK_FALSE(parse_assignment("=4"));
}

TEST_CASE("a row of CSV for each report") {
  const auto r = answered("title = \"a, b\"\n" + kContact);
  const auto csv = csv_reports({{"x.toml", r}, {"y.toml", answered(kContact + kCan)}});
  CHECK(std::count(csv.begin(), csv.end(), '\n') == 3);
  CHECK(csv.find("x.toml,\"a, b\",composition,") != std::string::npos);
  CHECK(csv.find("container.at.0.pressure_gauge [kPa]") != std::string::npos);
}

TEST_CASE("units of the plant are shown as asked") {
  const auto r = answered(kContact);
  TextOptions options;
  options.units = {find_unit("psi", Dimension::pressure), find_unit("bar", Dimension::pressure),
                   find_unit("degF", Dimension::temperature)};
  const auto text = text_report(r, options);
  CHECK(text.find("23.21 psi gauge = 1.600 bar gauge") != std::string::npos);
  CHECK(text.find("39.20 degF") != std::string::npos);
}
