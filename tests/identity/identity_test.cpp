// What must hold whatever the coefficients say.
#include <catch2/catch.hpp>

#include <random>

#include "capsigh/balance/closed_container.hpp"
#include "capsigh/balance/opening.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

const std::string kBlend = "CO2 = \"60 %\"\nN2 = \"25 %\"\nair = \"rest\"";

}  // namespace

TEST_CASE("content, pressure and temperature give each other back") {
  const Medium m = medium(kBlend);
  const Shares shares =
      contact_shares(binding("[gas]\n" + kBlend +
                             "\n[contact]\ntemperature = \"10 degC\"\npressure = \"2 bar abs\"\n")
                         .problem);
  for (const double t : {0.5, 4.0, 20.0, 33.0, 50.0, 70.0}) {
    for (const double p : {1.0, 2.7, 6.0}) {
      for (std::size_t gas = 0; gas < m.size(); ++gas) {
        const auto at = at_temperature(m, liquid_of(m), celsius(t));
        const auto mixture = mix(m, at, shares);
        const auto b = content(nullptr, m, at, mixture, bar(p), gas);
        const auto back = pressure_for(m, at, mixture, gas, b);
        REQUIRE(std::holds_alternative<Pressure>(back));
        // The root's own tolerance.
        CHECK(within_relative(std::get<Pressure>(back).value(), p * 1e5, 1e-12));
        if (m.gases[gas].name != "CO2") continue;  // others may have two temperatures
        const auto cold = temperature_for(m, liquid_of(m), shares, bar(p), gas, b);
        REQUIRE(std::holds_alternative<Temperature>(cold));
        CHECK(std::abs(std::get<Temperature>(cold).kelvin() - (t + 273.15)) < 1e-9);
      }
    }
  }
}

TEST_CASE("more pressure never dissolves less, more warmth never dissolves more") {
  const Medium m = medium(kBlend);
  for (std::size_t gas = 0; gas < m.size(); ++gas) {
    Shares pure(m.size(), Fraction(0.0));
    pure[gas] = 1.0;
    for (double t = 0; t <= 60; t += 2.5) {
      const auto at = at_temperature(m, liquid_of(m), celsius(t));
      const auto mixture = mix(m, at, pure);
      Molality before{};
      for (double p = 1; p <= 20; p += 0.5) {
        const auto b = content(nullptr, m, at, mixture, bar(p), gas);
        CHECK(b > before);
        before = b;
      }
    }
    // CO2, O2 and Ar: no minimum below 60 °C. N2 has its own near 75 °C.
    Molality warmer{};
    for (double t = 60; t >= 0; t -= 0.5) {
      const auto at = at_temperature(m, liquid_of(m), celsius(t));
      const auto b = content(nullptr, m, at, mix(m, at, pure), bar(2), gas);
      CHECK(b > warmer);
      warmer = b;
    }
  }
}

TEST_CASE("k and its slope are continuous where one record takes over, for every gas") {
  std::size_t overlaps = 0;
  for (const auto& name : gas_names(built_in_library())) {
    if (built_in_library().find("selection.henry." + name) == nullptr) continue;
    const Medium m = medium(name + " = \"100 %\"");
    const auto ln_k = [&](double kelvin) {
      return std::log(at_temperature(m, liquid_of(m), from_si<Temperature>(kelvin)).k[0].value());
    };
    for (const auto& overlap : m.gases[0].henry.overlaps) {
      ++overlaps;
      for (const double edge : {overlap.low, overlap.high}) {
        constexpr double h = 1e-3;
        const double left = (ln_k(edge) - ln_k(edge - h)) / h;
        const double right = (ln_k(edge + h) - ln_k(edge)) / h;
        INFO(name << " at " << edge);
        // Slopes are about -0.02 per K; a jump by another record's slope would be 1e-3 and more.
        CHECK(std::abs(left - right) < 2e-5);
      }
    }
  }
  CHECK(overlaps >= 12);
}

TEST_CASE("every gas dissolves, in range, with a finite width") {
  std::size_t gases = 0;
  for (const auto& name : gas_names(built_in_library())) {
    const auto r = answered("[gas]\n\"" + name +
                            "\" = \"100 %\"\n[contact]\ntemperature = \"20 degC\"\n"
                            "pressure = \"1 bar abs\"\n");
    const auto& g = r.answer.gases[0].mass_concentration;
    CHECK(si_value(g.value) > 0);
    CHECK(si_value(g.u) > 0);
    CHECK(si_value(g.u) < 0.5 * si_value(g.value));
    ++gases;
  }
  CHECK(gases >= 17);
}

TEST_CASE("without a solute the Sechenov factor is one") {
  const auto content = [](const std::string& liquid) {
    return si_value(
        answered(liquid + "[contact]\ntemperature = \"10 degC\"\npressure = \"2 bar abs\"\n")
            .answer.gases[0]
            .mass_fraction.value);
  };
  const double water = content("");
  CHECK(within_relative(content("[liquid]\nsucrose = \"0 g/L\"\n"), water, 1e-12));
  CHECK(within_relative(content("[liquid]\nethanol = \"0 % v/v\"\n"), water, 1e-12));
  CHECK(within_relative(content("[liquid]\nsalts = { NaCl = \"0 g/L\" }\n"), water, 1e-12));
  CHECK(content("[liquid]\nsucrose = \"100 g/L\"\n") < water);
}

TEST_CASE("every mole of every gas is found again in the closed package") {
  const auto c = binding("[gas]\n" + kBlend +
                         "\n[contact]\ntemperature = \"10 degC\"\npressure = \"2 bar abs\"\n")
                     .problem;
  const Medium& m = c.medium;
  const Shares shares = contact_shares(c);
  std::mt19937 random(7);
  std::uniform_real_distribution<double> any(0, 1);
  for (int package = 0; package < 200; ++package) {
    const double t = 1 + 20 * any(random);
    const auto at = at_temperature(m, liquid_of(m), celsius(t));
    const auto mixture = mix(m, at, shares);
    const double air = any(random);
    Shares headspace;
    for (std::size_t i = 0; i < m.size(); ++i) {
      headspace.push_back(c.air[i] * air + shares[i] * (1 - air));
    }
    const double brimful = 0.2e-3 + any(random) * 2e-3;
    Closing closing;
    closing.temperature = celsius(t);
    closing.pressure = bar(1 + any(random));
    closing.headspace = headspace;
    closing.contents = contents(m, at, mixture, bar(1 + 3 * any(random)));
    closing.fill = from_si<Volume>(brimful * (0.5 + 0.45 * any(random)));
    closing.shell.brimful = from_si<Volume>(brimful);
    const auto filling = close(m, liquid_of(m), closing);
    const auto result = equilibrium(m, liquid_of(m), filling, celsius(t + 30 * any(random)));
    REQUIRE(std::holds_alternative<ClosedState>(result));
    const auto& state = std::get<ClosedState>(result);
    const auto gas = gas_in_headspace(nullptr, m, state, state.pressure);
    double shares_sum = 0;
    for (std::size_t i = 0; i < m.size(); ++i) {
      const Amount found = state.contents[i] * filling.liquid + state.mixture.shares[i] * gas;
      CHECK(within_relative(found.value(), filling.amounts[i].value(), 1e-10));
      shares_sum += state.mixture.shares[i].value();
    }
    CHECK(std::abs(shares_sum - 1) < 1e-12);
  }
}

TEST_CASE("partial pressures and vapour add up to the total") {
  const auto a = answered("[gas]\n" + kBlend +
                          "\n[contact]\ntemperature = \"10 degC\"\npressure = \"2 bar abs\"\n")
                     .answer;
  double sum = si_value(a.vapour.value);
  for (const auto& g : a.gases) sum += si_value(g.partial_pressure.value);
  CHECK(within_relative(sum, 2e5, 1e-12));
}

TEST_CASE("headspace loss, fizz and flat never exceed the gas in the package") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"2.6 vol\" }\n[container]\n"
      "brimful = \"345 mL\"\nfill = \"330 mL\"\n[opening]\n");
  const auto& loss = r.answer.opening.at(0);
  const double lost = si_value(loss.headspace_loss.value) + si_value(loss.fizz_loss.value) +
                      si_value(loss.flat_loss.value);
  // 330 mL of 5.14 g/L and 15 mL of gas at 1.96 g/L.
  CHECK(lost < 0.330e-3 * 5.14 + 15e-6 * 1.97);
  CHECK(lost > 0.99 * (0.3287e-3 / 1.0018 * 5.139 + 15e-6 * 1.9));
}
