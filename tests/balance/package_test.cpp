#include <catch2/catch.hpp>

#include "capsigh/balance/closed_container.hpp"
#include "capsigh/balance/opening.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

std::string can(const std::string& closed_at, const std::string& opening = "[opening]\n") {
  return "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"2.6 vol\" }\n"
         "ambient = \"1013.25 hPa\"\n[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\n" +
         closed_at + opening;
}

double grams(const Figure<Mass>& m) { return si_value(m.value) * 1e3; }

}  // namespace

TEST_CASE("the reference can, closed at 4 degC") {
  // An independent calculation: 330 mL of water of 2.6 vol in a rigid 345 mL; within 1 %.
  const auto pure = answered(can("")).answer;
  REQUIRE(pure.package.at.size() == 1);
  CHECK(within_relative(si_value(pure.package.at[0].pressure_gauge.value) / 1e5, 0.775, 0.01));
  const auto air = answered(can("closed_at = { air = \"30 %\" }\n")).answer;
  CHECK(within_relative(si_value(air.package.at[0].pressure_gauge.value) / 1e5, 0.960, 0.01));
}

namespace {

// The reference can filled and closed at 4 °C and 1013.25 hPa, with air in its headspace.
struct ReferenceCan {
  Case c = binding(can("")).problem;
  Filling filling;

  explicit ReferenceCan(double air) {
    const Medium& m = c.medium;
    const auto at = at_temperature(m, liquid_of(m), celsius(4));
    const auto mixture = mix(m, at, contact_shares(c));
    const double vol = 2.6;
    const auto b = from_si<Molality>(vol / volume_basis(m, c.medium.co2, false).value() /
                                     m.liquid.water_density.law(m.content_temperature).value());
    const auto p = std::get<Pressure>(pressure_for(m, at, mixture, c.medium.co2, b));
    Shares headspace;
    for (std::size_t i = 0; i < m.size(); ++i) {
      headspace.push_back(c.air[i] * air + contact_shares(c)[i] * (1 - air));
    }
    Closing closing;
    closing.temperature = celsius(4);
    closing.pressure = m.atmosphere;
    closing.headspace = headspace;
    closing.contents = contents(m, at, mixture, p);
    closing.fill = from_si<Volume>(330e-6);
    closing.shell.brimful = from_si<Volume>(345e-6);
    filling = close(m, liquid_of(m), closing);
  }

  [[nodiscard]] ClosedState at(double t) const {
    return std::get<ClosedState>(equilibrium(c.medium, liquid_of(c.medium), filling, celsius(t)));
  }
};

}  // namespace

TEST_CASE("the reference can at any temperature") {
  // An independent calculation at 4 / 20 / 25 / 40 / 60 °C; within 1 %.
  const std::vector<double> temperatures{4, 20, 25, 40, 60};
  const std::map<double, std::vector<double>> expected{{0.0, {0.775, 2.002, 2.448, 3.905, 6.10}},
                                                       {0.3, {0.960, 2.217, 2.674, 4.170, 6.45}}};
  for (const auto& [air, gauges] : expected) {
    const ReferenceCan reference(air);
    for (std::size_t i = 0; i < gauges.size(); ++i) {
      const double gauge_bar = (reference.at(temperatures[i]).pressure.value() - 101325) / 1e5;
      INFO(temperatures[i] << " degC, air " << air);
      CHECK(within_relative(gauge_bar, gauges[i], 0.01));
    }
  }
}

TEST_CASE("the reference can, opened") {
  const auto a = answered(can("")).answer;
  const auto& loss = a.opening.at(0);
  CHECK(loss.gas.empty());
  // An independent calculation; within 1 % (half of the last digit where that is more).
  CHECK(std::abs(grams(loss.headspace_loss) - 0.023) <= 0.0005);
  CHECK(within_relative(grams(loss.fizz_loss), 0.722, 0.01));
  CHECK(within_relative(grams(loss.flat_loss), 0.977, 0.01));
}

TEST_CASE("of the flat loss, 0.029 g is headspace gas that stayed") {
  const ReferenceCan reference(0);
  const auto& c = reference.c;
  const auto opened =
      open_package(c.medium, reference.filling, reference.at(4), c.medium.atmosphere, c.air);
  // Half of the last digit.
  CHECK(std::abs(opened.stays[c.medium.co2].value() * 44.0095 - 0.029) <= 0.0005);
}

TEST_CASE("losses per litre without a container have no headspace") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"2.6 vol\" }\n[opening]\n");
  const auto& loss = r.answer.opening.at(0);
  CHECK(grams(loss.headspace_loss) == 0);
  // Fizz and flat together are the content less what air keeps (0.04 % of about 3.3 g/L).
  const double content = si_value(r.answer.gases[0].mass_concentration.value);
  const double kept = content - grams(loss.fizz_loss) - grams(loss.flat_loss);
  CHECK(kept > 0.0010);
  CHECK(kept < 0.0016);
}

TEST_CASE("a flat liquid has no fizz to lose, and no loss is negative") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"0.5 vol\" }\n"
      "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\nclosed_at = { air = \"100 %\" }\n"
      "[opening]\n");
  for (const auto& loss : r.answer.opening) {
    CHECK(grams(loss.headspace_loss) >= 0);
    CHECK(grams(loss.fizz_loss) >= 0);
    CHECK(grams(loss.flat_loss) >= 0);
  }
  CHECK(grams(r.answer.opening.at(0).fizz_loss) == 0);
}
