// Moments, drift and capability against published examples.
#include <catch2/catch.hpp>
#include <cmath>

#include "plan.hpp"

using namespace capsigh;

namespace {

Moments moments_of(const std::vector<double>& values) {
  Moments m;
  for (const double v : values) m.add(v);
  return m;
}

}  // namespace

TEST_CASE("moments of NIST StRD NumAcc3 and NumAcc4") {
  // NIST Statistical Reference Datasets (from memory): 1001 values, 1000000.2 (10000000.2), then
  // .1 and .3 in turn; certified mean 1000000.2 (10000000.2), standard deviation 0.1 exactly.
  for (const double base : {1000000.0, 10000000.0}) {
    Moments m;
    m.add(base + 0.2);
    for (int i = 0; i < 500; ++i) {
      m.add(base + 0.1);
      m.add(base + 0.3);
    }
    CHECK(std::abs(*m.mean() - (base + 0.2)) <= 1e-15 * base);
    // The data are not exact in binary: base + 0.1 is off by up to 1e-9.
    CHECK(std::abs(*m.deviation() - 0.1) <= base * 1.2e-16);
  }
}

TEST_CASE("moments of few values") {
  CHECK_FALSE(moments_of({}).mean());
  CHECK_FALSE(moments_of({1}).deviation());
  const auto m = moments_of({2, 4, 4, 4, 5, 5, 7, 9});
  CHECK(*m.mean() == 5);
  CHECK(std::abs(*m.deviation() - std::sqrt(32.0 / 7.0)) <= 1e-15);
  CHECK(m.least == 2);
  CHECK(m.greatest == 9);
  CHECK(*moments_of({0.1, 0.1, 0.1}).deviation() == 0);
}

TEST_CASE("capability of the NIST/SEMATECH e-Handbook, 6.1.6") {
  // L 8, U 20, mean 16, s 2.
  const auto c = capability(50, 16, 2, {8, 20});
  REQUIRE(c);
  CHECK(std::abs(c->cp->value - 1.0) <= 1e-15);
  CHECK(std::abs(c->cpk.value - 0.6667) <= 0.00005);
  // Interval of Cp: √(χ²(49)/49), χ² = 31.555 and 70.222 (printed tables).
  CHECK(std::abs(c->cp->low - std::sqrt(31.555 / 49)) <= 0.0001);
  CHECK(std::abs(c->cp->high - std::sqrt(70.222 / 49)) <= 0.0001);
  // Cpk 1.33 with n = 50: 1.05 to 1.61 (from memory, recomputed).
  const auto d = capability(50, 4.0, 1.0, {4.0 - 3.99, 100});
  CHECK(std::abs(d->cpk.value - 1.33) <= 1e-12);
  CHECK(std::abs(d->cpk.low - 1.05) <= 0.005);
  CHECK(std::abs(d->cpk.high - 1.61) <= 0.005);
}

TEST_CASE("capability against one limit, or none") {
  constexpr double open = std::numeric_limits<double>::infinity();
  const auto c = capability(30, 1, 0.5, {-open, 4});
  REQUIRE(c);
  CHECK_FALSE(c->cp);
  CHECK(std::abs(c->cpk.value - 2.0) <= 1e-15);
  CHECK_FALSE(capability(30, 1, 0.5, {}));
  CHECK_FALSE(capability(30, 1, 0.0, {0, 2}));
  CHECK_FALSE(capability(1, 1, 0.5, {0, 2}));
}

TEST_CASE("drift of four values by hand") {
  TimeSums sums;
  // Seconds since 1970, so that the sums have to carry what a naive one would lose.
  const double start = 1.764e9;
  sums.add(start, 1);
  sums.add(start + 3600, 3);
  sums.add(start + 7200, 4);
  sums.add(start + 10800, 4);
  const auto d = sums.drift();
  REQUIRE(d);
  // Sxx = 5 h², Sxy = 5 h, Syy = 6: b = 1 per hour, s² = (6 − 5)/2, u = √0.1 per hour.
  CHECK(std::abs(d->slope * 3600 - 1.0) <= 1e-12);
  CHECK(std::abs(d->u * 3600 - std::sqrt(0.1)) <= 1e-12);
  // Student's t for 2 degrees of freedom, 95 %: 4.303 (printed tables).
  CHECK(std::abs((d->high - d->slope) * 3600 - 4.303 * std::sqrt(0.1)) <= 0.0005);
  CHECK(std::abs(d->at_end - 4.5) <= 1e-12);
}

TEST_CASE("a drift that is none leads to no limit") {
  TimeSums sums;
  for (int i = 0; i < 100; ++i) sums.add(60.0 * i, 3.7 + (i % 2 == 0 ? 0.01 : -0.01));
  REQUIRE(sums.drift());
  CHECK_FALSE(time_to_limit(*sums.drift(), 3.6, 3.8));
  TimeSums rising;
  for (int i = 0; i < 100; ++i) rising.add(60.0 * i, 3.7 + 0.0005 * i + (i % 2 == 0 ? 0.001 : 0));
  const auto d = rising.drift();
  const auto left = time_to_limit(*d, 3.6, 3.8);
  REQUIRE(left);
  // 3.75 to 3.8 at 0.0005 a minute: 100 minutes.
  CHECK(std::abs(*left / 60 - 100) <= 3);
  CHECK_FALSE(time_to_limit(*d, 3.6, std::numeric_limits<double>::infinity()));
  TimeSums together;
  for (int i = 0; i < 5; ++i) together.add(60.0, i);
  CHECK_FALSE(together.drift());
}
