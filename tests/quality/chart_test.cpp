// Control charts against published examples and constants.
#include <boost/math/distributions/normal.hpp>
#include <boost/math/quadrature/gauss_kronrod.hpp>
#include <boost/math/special_functions/gamma.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <functional>

#include "plan.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

RowCharts fed(const std::vector<double>& values, const ChartPlan& plan) {
  RowCharts rows;
  std::uint64_t row = 0;
  for (const double v : values) rows.add({v, ++row, {}}, plan);
  return rows;
}

double integral(const std::function<double(double)>& f, double a, double b) {
  // To about 1e-12: smooth integrands that have decayed at the ends.
  return boost::math::quadrature::gauss_kronrod<double, 61>::integrate(f, a, b, 8, 1e-13);
}

double phi(double x) { return boost::math::cdf(boost::math::normal_distribution<double>(), x); }

// Mean and variance of the range of n normal values (order statistics).
std::pair<double, double> range_of_normal(int n) {
  constexpr double end = 9;
  const auto p = [&](double x) { return std::pow(x, n); };
  const double mean = integral([&](double x) { return 1 - p(1 - phi(x)) - p(phi(x)); }, -end, end);
  const double square =
      2 * integral(
              [&](double y) {
                return integral(
                    [&](double x) { return 1 - p(phi(y)) - p(1 - phi(x)) + p(phi(y) - phi(x)); },
                    -end, y);
              },
              -end, end);
  return {mean, square - mean * mean};
}

}  // namespace

TEST_CASE("individuals chart of the NIST/SEMATECH e-Handbook, 6.3.2.2") {
  const std::vector<double> flow{49.6, 47.6, 49.9, 51.3, 47.8, 51.2, 52.6, 52.4, 53.6, 52.1};
  const auto plan = chart_plan();
  const auto found = charts(fed(flow, plan), plan);
  REQUIRE(found.size() == 1);
  const auto& limits = found[0].limits;
  // Half of the last printed digit.
  CHECK(std::abs(limits.location.centre - 50.81) <= 1e-9);
  CHECK(std::abs(limits.spread.centre - 1.8778) <= 0.00005);
  CHECK(std::abs(limits.location.high - 55.8041) <= 0.00005);
  CHECK(std::abs(limits.location.low - 45.8159) <= 0.00005);
  for (const auto& s : found[0].signals) CHECK(s.count == 0);
  CHECK(found[0].spread_signals.count == 0);
}

TEST_CASE("the tabled constants of ISO 7870-2 are those of the normal distribution") {
  const auto table = control_constants(built_in_library());
  constexpr double three = 0.00051;  // half of the third decimal, and the printed tables' habit of
                                     // rounding a tie either way
  for (const int n : {2, 3, 4, 5, 6, 7, 10, 15, 20, 25}) {
    INFO("n = " << n);
    const auto at = static_cast<std::size_t>(n);
    const auto [d2, variance] = range_of_normal(n);
    const double ratio = 3 * std::sqrt(variance) / d2;
    CHECK(std::abs(table.d2[at] - d2) <= three);
    CHECK(std::abs(table.a2[at] - 3 / (d2 * std::sqrt(n))) <= three);
    CHECK(std::abs(table.d3_limit[at] - std::max(0.0, 1 - ratio)) <= three);
    CHECK(std::abs(table.d4_limit[at] - (1 + ratio)) <= three);
  }
  for (int n = 2; n <= 25; ++n) {
    INFO("n = " << n);
    const auto at = static_cast<std::size_t>(n);
    const double c = std::sqrt(2.0 / (n - 1)) / boost::math::tgamma_delta_ratio((n - 1) / 2.0, 0.5);
    CHECK(std::abs(table.c4[at] - c) <= 0.00005);
    CHECK(std::abs(table.a3[at] - 3 / (c * std::sqrt(n))) <= three);
    const double spread = 3 * std::sqrt(1 - c * c) / c;
    CHECK(std::abs(table.b3[at] - std::max(0.0, 1 - spread)) <= three);
    CHECK(std::abs(table.b4[at] - (1 + spread)) <= three);
  }
  // The formula that takes over above the table meets it.
  CHECK(std::abs(unbiasing(26, table) - 0.9901) <= 0.0001);
}

TEST_CASE("means and ranges, means and deviations by hand") {
  // Three subgroups of four: means 2.5, 3.5, 4.5; ranges 3, 3, 3; s = 1.290994.
  const std::vector<double> values{1, 2, 3, 4, 2, 3, 4, 5, 3, 4, 5, 6, 99};
  const auto plan = chart_plan(4);
  const auto found = charts(fed(values, plan), plan);
  REQUIRE(found.size() == 2);
  CHECK(found[0].points == 3);  // the last value begins a subgroup that is not complete
  CHECK(std::abs(found[0].limits.location.centre - 3.5) <= 1e-12);
  CHECK(std::abs(found[0].limits.location.high - (3.5 + 0.729 * 3)) <= 1e-12);
  CHECK(std::abs(found[0].limits.spread.high - 2.282 * 3) <= 1e-12);
  CHECK(std::abs(found[0].limits.sigma - 3 / 2.059) <= 1e-12);
  const double s = std::sqrt(5.0 / 3.0);
  CHECK(std::abs(found[1].limits.location.low - (3.5 - 1.628 * s)) <= 1e-12);
  CHECK(std::abs(found[1].limits.spread.high - 2.266 * s) <= 1e-12);
}

TEST_CASE("each pattern signals where it is complete, and not before") {
  const auto rules = runs_rules(built_in_library());
  const auto first_signal = [&](RunsTest test, const std::vector<double>& z) {
    Runs runs;
    std::uint64_t row = 0;
    for (const double v : z) runs.add({v, v, ++row, {}}, rules);
    const auto& s = runs.signals[static_cast<std::size_t>(test)];
    return s.first.empty() ? 0U : s.first.front().row;
  };
  CHECK(first_signal(RunsTest::beyond_limits, {0, 3, -3, 3.1}) == 4);
  CHECK(first_signal(RunsTest::one_side, std::vector<double>(9, 0.2)) == 9);
  CHECK(first_signal(RunsTest::one_side, {.2, .2, .2, .2, 0, .2, .2, .2, .2, .2}) == 0);
  CHECK(first_signal(RunsTest::trend, {.9, -.5, -.4, -.3, -.2, -.1, 0}) == 7);
  CHECK(first_signal(RunsTest::trend, {.5, .4, .3, .3, .2, .1, 0, -.1}) == 0);
  CHECK(first_signal(RunsTest::alternating,
                     {.1, -.1, .1, -.1, .1, -.1, .1, -.1, .1, -.1, .1, -.1, .1, -.1}) == 14);
  CHECK(first_signal(RunsTest::two_of_three, {2.1, 0, 2.2}) == 3);
  CHECK(first_signal(RunsTest::two_of_three, {2.1, -2.1, 0, 0}) == 0);
  CHECK(first_signal(RunsTest::two_of_three, {2.1, 0, 0, 2.1}) == 0);
  CHECK(first_signal(RunsTest::four_of_five, {-1.1, -1.2, 0, -1.3, -1.4}) == 5);
  CHECK(first_signal(RunsTest::four_of_five, {1.1, 1.1, 1.1, 0, 0, 1.1}) == 0);
  CHECK(first_signal(RunsTest::within_one_sigma, std::vector<double>(15, 0.9)) == 15);
  CHECK(first_signal(RunsTest::within_one_sigma, std::vector<double>(14, 0.9)) == 0);
  CHECK(first_signal(RunsTest::outside_one_sigma, {1.1, -1.1, 1.1, -1.1, 1.1, -1.1, 1.1, -1.1}) ==
        8);
}

TEST_CASE("established limits stand as given") {
  auto plan = chart_plan(5);
  plan.established = Established{3.70, 0.05};
  std::vector<double> values(25, 3.70);
  for (std::size_t i = 10; i < 15; ++i) values[i] = 3.80;
  const auto found = charts(fed(values, plan), plan);
  REQUIRE(found.size() == 2);
  CHECK(found[0].established);
  CHECK(std::abs(found[0].limits.location.high - (3.70 + 3 * 0.05 / std::sqrt(5.0))) <= 1e-12);
  // ISO 7870-2: D2 σ with D2 = d2 D4.
  CHECK(std::abs(found[0].limits.spread.high - 2.326 * 2.114 * 0.05) <= 1e-12);
  const auto& beyond = found[0].signals[0];
  REQUIRE(beyond.count == 1);
  CHECK(beyond.first[0].row == 15);
}

TEST_CASE("subgroups by label may vary in size") {
  auto plan = chart_plan();
  plan.by_label = true;
  LabelCharts labels;
  std::uint64_t row = 0;
  for (const double v : {1.0, 3.0}) labels.add("a", {v, ++row, {}}, plan);
  for (const double v : {2.0, 3.0, 4.0}) labels.add("b", {v, ++row, {}}, plan);
  for (const double v : {1.0, 2.0}) labels.add("c", {v, ++row, {}}, plan);
  const double mean = 16.0 / 7.0;
  const auto found = charts(labels, plan, mean);
  REQUIRE(found.size() == 2);
  CHECK(found[0].points == 3);
  CHECK(found[0].size == 0);
  const double sigma = (2 / 1.128 + 2 / 1.693 + 1 / 1.128) / 3;
  CHECK(std::abs(found[0].limits.sigma - sigma) <= 1e-12);
  CHECK(std::abs(found[0].limits.location.high - (mean + 3 * sigma / std::sqrt(2.0))) <= 1e-12);
}

TEST_CASE("equal values have limits without width and no signals") {
  for (const std::size_t subgroup : {1U, 5U}) {
    const auto plan = chart_plan(subgroup);
    for (const auto& chart : charts(fed(std::vector<double>(40, 3.7), plan), plan)) {
      CHECK(std::abs(chart.limits.location.high - 3.7) <= 1e-12);
      for (const auto& s : chart.signals) CHECK(s.count == 0);
    }
  }
}
