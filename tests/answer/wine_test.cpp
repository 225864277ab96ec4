#include <catch2/catch.hpp>

#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

TEST_CASE("the gauge pressure of a wine at 20 degC") {
  const std::string wine =
      "[liquid]\nlike = \"sparkling wine\"\n[contact]\nambient = \"1013.25 hPa\"\n";
  // Measured at 20 degC, it is the reading itself; a root's tolerance.
  const auto warm = answered(wine + "temperature = \"20 degC\"\npressure = \"5.1 bar gauge\"\n");
  CHECK(within_relative(si_value(warm.answer.wine_gauge.value), 5.1e5, 1e-10));
  // At another temperature: what the same content needs at 20 degC.
  const auto cold = answered(wine + "temperature = \"8 degC\"\npressure = \"3.2 bar gauge\"\n");
  const auto content = si_value(cold.answer.gases[0].mass_concentration.value);
  const auto back = answered(wine + "temperature = \"20 degC\"\ndissolved = { CO2 = \"" +
                             std::to_string(content) + " g/L\" }\n");
  // The content is written to six decimals.
  CHECK(within_relative(si_value(cold.answer.wine_gauge.value),
                        si_value(back.answer.pressure_gauge.value), 1e-6));
  // OIV, Reg. 2676/90 ch. 37, worked by hand: 12 % vol, 10 g/L sugar, 6.114 bar abs at 20 degC
  // is 1.951e-5 x 611325 x 0.74 x 0.9856 = 8.699 g/L; printed coefficients, four digits.
  CHECK(within_relative(si_value(warm.answer.gases[0].mass_concentration.value), 8.699, 5e-4));
  CHECK_FALSE(answered("[contact]\ntemperature = \"4 degC\"\npressure = \"1 bar gauge\"\n")
                  .answer.wine_gauge.asked);
}

TEST_CASE("with a bottle it is the bottle's") {
  const auto r = answered(
      "[liquid]\nlike = \"sparkling wine\"\n[contact]\ntemperature = \"8 degC\"\n"
      "pressure = \"3.2 bar gauge\"\n[container]\nbrimful = \"775 mL\"\nfill = \"750 mL\"\n"
      "closed_at = { temperature = \"20 degC\" }\n");
  REQUIRE(r.answer.package.at.size() == 1);
  CHECK(within_relative(si_value(r.answer.wine_gauge.value),
                        si_value(r.answer.package.at[0].pressure_gauge.value), 1e-10));
}

TEST_CASE("where 20 degC would be beyond the model, the rest of the answer stands") {
  const auto r = answered(
      "[liquid]\nlike = \"sparkling wine\"\n[contact]\ntemperature = \"0 degC\"\n"
      "pressure = \"14 bar abs\"\n");
  CHECK(r.answer.gases[0].volumes.asked);
  CHECK_FALSE(r.answer.wine_gauge.asked);
}
