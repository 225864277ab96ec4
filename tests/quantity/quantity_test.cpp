#include <catch2/catch.hpp>

#include "capsigh/quantity/finding.hpp"
#include "capsigh/quantity/uncertain.hpp"
#include "capsigh/quantity/validity.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

TEST_CASE("an uncertain input moves by z standard uncertainties") {
  Uncertain<Temperature> t{celsius(4), from_si<TemperatureDifference>(0.3), Shape::rectangular, 0};
  CHECK(t.now() == celsius(4));
  t.z = -2;
  CHECK(std::abs(t.now().kelvin() - 276.55) < 1e-12);  // rounding
}

TEST_CASE("gauge and absolute pressure meet only over an ambient") {
  const auto ambient = bar(0.978);
  const auto p = absolute(GaugePressure(bar(1.62)), ambient);
  CHECK(within_relative(p.value(), 2.598e5, 1e-15));
  CHECK(within_relative(gauge(p, ambient).above_ambient().value(), 1.62e5, 1e-15));
}

TEST_CASE("a range is a union of boxes") {
  const std::array<ValidityBox, 2> range{ValidityBox{{271, 288}, {0, 8e5}},
                                         ValidityBox{{288, 373}, {0, 10e5}}};
  CHECK(within(range, {celsius(4), bar(8)}));
  CHECK_FALSE(within(range, {celsius(4), bar(9)}));
  CHECK(within(range, {celsius(20), bar(9)}));
  CHECK(widths_outside(range, {celsius(4), bar(8)}) == 0);
  CHECK(within_relative(widths_outside(range, {celsius(4), bar(8.8)}), 0.1, 1e-9));  // rounding
  CHECK(within({}, {celsius(4), bar(900)}));
}

TEST_CASE("the nearest name is a slip of the pen, not a guess") {
  CHECK(nearest_name("presure", {"temperature", "pressure"}) == "pressure");
  CHECK(nearest_name("tempreature", {"temperature", "pressure"}) == "temperature");
  CHECK_FALSE(nearest_name("colour", {"temperature", "pressure"}));
  CHECK_FALSE(nearest_name(std::string(1000, 'x'), {"temperature"}));
}
