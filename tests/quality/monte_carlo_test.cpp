#include "capsigh/quality/monte_carlo.hpp"

#include <catch2/catch.hpp>

#include <limits>

#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

// The sum of four inputs with these standard uncertainties.
std::vector<SampledFigure> additive(const std::vector<Shape>& shapes, const std::vector<double>& u,
                                    const SamplingPlan& plan) {
  const ModelMaker make = [&u] {
    return [&u](std::span<const double> z, std::span<double> y) {
      y[0] = 0;
      for (std::size_t i = 0; i < u.size(); ++i) y[0] += u[i] * z[i];
    };
  };
  return sample(make, shapes, 1, plan);
}

const std::vector<Shape> kNormal(4, Shape::normal);
const std::vector<Shape> kRectangular(4, Shape::rectangular);

}  // namespace

TEST_CASE("additive models of JCGM 101, 9.2") {
  const SamplingPlan plan{1'000'000, 1, 2, 0.95, {}};
  // Printed to 0.01 (to 0.1 in 9.2.4). The ends of an interval scatter by sqrt(p(1 - p)/M)/density:
  // 0.005 to 0.01 at a million draws, added to half a digit.
  const auto close = [](double a, double b, double printed) {
    return std::abs(a - b) <= 0.5 * printed + 0.01;
  };
  const auto normal = additive(kNormal, {1, 1, 1, 1}, plan)[0];  // table 2
  CHECK(close(normal.mean, 0, 0.01));
  CHECK(close(normal.u, 2.0, 0.01));
  CHECK(close(normal.low, -3.92, 0.01));
  CHECK(close(normal.high, 3.92, 0.01));
  const auto rectangular = additive(kRectangular, {1, 1, 1, 1}, plan)[0];  // table 3
  CHECK(close(rectangular.u, 2.0, 0.01));
  CHECK(close(rectangular.low, -3.88, 0.01));
  CHECK(close(rectangular.high, 3.88, 0.01));
  const auto unequal = additive(kRectangular, {1, 1, 1, 10}, plan)[0];  // table 4
  CHECK(close(unequal.u, 10.1, 0.1));
  CHECK(close(unequal.low, -17.0, 0.1));
  CHECK(close(unequal.high, 17.0, 0.1));
}

TEST_CASE("mass calibration of JCGM 101, 9.3, where first order falls short") {
  // Standards of 100 g in mg, densities in kg/m3. Table 8 (from memory): 1.234, u 0.0754, shortest
  // interval 1.0834 to 1.3825. The symmetric interval, and the others again, by an independent
  // sample of ten million draws: 1.2340, 0.0755, 1.0846 to 1.3836.
  const ModelMaker make = [] {
    return [](std::span<const double> z, std::span<double> y) {
      const double standard = 100000.0 + 0.050 * z[0];
      const double difference = 1.234 + 0.020 * z[1];
      const auto in = [&](double low, double high, double score) {
        return 0.5 * (low + high) + 0.5 * (high - low) * score / std::sqrt(3.0);
      };
      const double air = in(1.10, 1.30, z[2]);
      const double weight = in(7000, 9000, z[3]);
      const double reference = in(7950, 8050, z[4]);
      y[0] = (standard + difference) * (1 + (air - 1.2) * (1 / weight - 1 / reference)) - 100000.0;
    };
  };
  const std::vector<Shape> shapes{Shape::normal, Shape::normal, Shape::rectangular,
                                  Shape::rectangular, Shape::rectangular};
  const auto y = sample(make, shapes, 1, {1'000'000, 7, 2, 0.95, {}})[0];
  // Scatter at a million draws: 0.0003 at an end of the interval, 0.0001 in u.
  CHECK(std::abs(y.mean - 1.234) <= 0.0005);
  CHECK(std::abs(y.u - 0.0754) <= 0.0002);
  CHECK(std::abs(y.low - 1.0846) <= 0.001);
  CHECK(std::abs(y.high - 1.3836) <= 0.001);
  CHECK(std::abs((y.high - y.low) - (1.3825 - 1.0834)) <= 0.001);
  // First order sees only the two masses: 0.0539.
  CHECK(y.u > 1.3 * std::hypot(0.050, 0.020));
}

TEST_CASE("the draws depend on the seed, not on the threads") {
  const auto with = [](std::uint64_t seed, unsigned threads) {
    return additive(kNormal, {1, 2, 3, 4}, {10'001, seed, threads, 0.95, {}})[0];
  };
  const auto one = with(5, 1);
  for (const unsigned threads : {2U, 3U, 8U}) {
    const auto many = with(5, threads);
    CHECK(one.answered == many.answered);
    CHECK(one.mean == many.mean);
    CHECK(one.u == many.u);
    CHECK(one.low == many.low);
    CHECK(one.high == many.high);
  }
  CHECK(with(6, 1).mean != one.mean);
}

TEST_CASE("draws without an answer are left out and counted") {
  const ModelMaker make = [] {
    return [](std::span<const double> z, std::span<double> y) {
      y[0] = z[0] < 0 ? std::numeric_limits<double>::quiet_NaN() : z[0];
    };
  };
  const std::vector<Shape> shapes{Shape::normal};
  const auto y = sample(make, shapes, 1, {100'000, 1, 2, 0.95, {}})[0];
  // Half of them, with the scatter of counting: 4 sqrt(N)/2.
  CHECK(std::abs(static_cast<double>(y.answered) - 50'000) <= 633);
  // Half-normal: mean sqrt(2/pi); its 2.5 % quantile is 0.0313.
  CHECK(std::abs(y.mean - std::sqrt(2 / std::acos(-1.0))) <= 0.012);
  CHECK(std::abs(y.low - 0.0313) <= 0.004);
}
