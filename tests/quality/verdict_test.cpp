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
  CHECK(judge(0, 0.047, {-0.1, 0.1}, {true, 0.05}).verdict == Verdict::inside);
  CHECK(judge(0.05, 0.047, {-0.1, 0.1}, {true, 0.05}).verdict == Verdict::undecided);
  CHECK(judge(0.3, 0.047, {-0.1, 0.1}, {true, 0.05}).verdict == Verdict::outside);
}

TEST_CASE("acceptance zones") {
  const JudgingRule rule{true, 0.05};
  constexpr double open = std::numeric_limits<double>::infinity();
  // One limit: the guard band is 1.645 u (JCGM 106, 8.3.3; the normal quantile).
  const auto below = acceptance_zone(0.05, {-open, 10}, rule);
  CHECK(std::abs(below.guard_band - 1.6448536 * 0.05) <= 1e-7);
  CHECK(std::abs(below.values.high - (10 - below.guard_band)) <= 1e-12);
  // Two: at its edges the probability is 95 %, rounding of the root aside.
  const auto both = acceptance_zone(0.047, {-0.1, 0.1}, rule);
  CHECK_FALSE(both.empty);
  CHECK(std::abs(conformity(both.values.high, 0.047, {-0.1, 0.1}) - 0.95) <= 1e-9);
  CHECK(std::abs(both.values.low + both.values.high) <= 1e-12);
  const auto none = acceptance_zone(0.07, {-0.1, 0.1}, rule);
  CHECK(none.empty);
  CHECK(acceptance_zone(none.u_to_open * 0.999, {-0.1, 0.1}, rule).empty == false);
  CHECK(acceptance_zone(none.u_to_open * 1.001, {-0.1, 0.1}, rule).empty);
  CHECK(acceptance_zone(0.07, {-0.1, 0.1}, {false, 0.05}).guard_band == 0);
  CHECK(acceptance_zone(0, {-0.1, 0.1}, rule).guard_band == 0);
}

TEST_CASE("the doubt that decides") {
  const JudgingRule rule{true, 0.05};
  const Interval limits{-0.1, 0.1};
  for (const double y : {0.08, 0.12, -0.095}) {
    const auto u = u_to_decide(y, 0.047, limits, rule);
    REQUIRE(u);
    CHECK(judge(y, *u * 0.999, limits, rule).verdict != Verdict::undecided);
    CHECK(judge(y, *u * 1.001, limits, rule).verdict == Verdict::undecided);
  }
  CHECK_FALSE(u_to_decide(0.1, 0.047, limits, rule));
  CHECK(judge(0.09, 0.047, limits, {false, 0.05}).verdict == Verdict::inside);
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
