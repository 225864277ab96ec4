#include <catch2/catch.hpp>

#include "capsigh/quality/verdict.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

TEST_CASE("conformity by the worked values of JCGM 106") {
  constexpr double open = std::numeric_limits<double>::infinity();
  // Half of the last printed digit.
  CHECK(std::abs(conformity(-5.47, 0.05, {-open, -5.40}) - 0.919) <= 0.0005);
  CHECK(std::abs(conformity(13.6, 1.8, {12.5, 16.3}) - 0.66) <= 0.005);
  CHECK(conformity(1, 0, {0, 2}) == 1);
  CHECK(conformity(3, 0, {0, 2}) == 0);
}

TEST_CASE("guarded at five per cent") {
  CHECK(judge(0, 0.047, {-0.1, 0.1}, 0.05).verdict == Verdict::inside);
  CHECK(judge(0.05, 0.047, {-0.1, 0.1}, 0.05).verdict == Verdict::undecided);
  CHECK(judge(0.3, 0.047, {-0.1, 0.1}, 0.05).verdict == Verdict::outside);
}

TEST_CASE("a report judges its targets and limits") {
  const std::string contact = "[contact]\ntemperature = \"4 degC ± 0.3 K\"\naltitude = \"350 m\"\n";
  const auto verdict = [&](const std::string& pressure, const std::string& target) {
    const auto r = answered("[liquid]\nlike = \"soft drink\"\n" + contact + "pressure = \"" +
                            pressure + " bar gauge ± 0.05 bar\"\n[target]\nCO2 = " + target + "\n");
    REQUIRE(r.judged.size() == 1);
    return r.judged[0];
  };
  // ± 0.3 K and ± 0.05 bar at ± 0.10 vol: probability 0.966 at the centre (independent
  // calculation).
  const auto centre = verdict("1.6210", "\"3.70 vol ± 0.10 vol\"");
  CHECK(centre.verdict == Verdict::inside);
  CHECK(std::abs(centre.probability - 0.966) <= 0.002);
  CHECK(verdict("1.68", "\"3.70 vol ± 0.10 vol\"").verdict == Verdict::undecided);
  CHECK(verdict("2.2", "\"3.70 vol ± 0.10 vol\"").verdict == Verdict::outside);
  CHECK(verdict("2.2", "{ max = \"3.8 vol\" }").verdict == Verdict::outside);
  CHECK(verdict("1.2", "{ max = \"3.8 vol\" }").verdict == Verdict::inside);
  CHECK(verdict("1.2", "{ min = \"7 g/L\" }").verdict == Verdict::outside);
  CHECK_FALSE(
      answered("[contact]\ntemperature = \"4 degC\"\npressure = \"2.2 bar gauge\"\n[target]\n"
               "CO2 = { max = \"3.8 vol\" }\n")
          .limits_met);
}
