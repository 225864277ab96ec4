// Merging: the summary of parts is that of the whole.
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "plan.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

struct Row {
  double value;
  std::optional<double> time;
  std::string group;
  std::string label;
  bool rejected;
};

// A process that wanders, with groups, labels, rejected rows and equal values.
std::vector<Row> process(std::mt19937_64& random, std::size_t n) {
  std::normal_distribution<double> noise(0, 0.03);
  std::uniform_int_distribution<int> valve(1, 3);
  std::vector<Row> rows;
  double level = 3.7;
  for (std::size_t i = 0; i < n; ++i) {
    if (i % 97 == 0) level = 3.7 + noise(random);
    const double value = std::round((level + noise(random)) * 1000) / 1000;
    const auto time = i % 11 == 0 ? std::optional<double>() : 1.764e9 + 60.0 * double(i);
    rows.push_back(
        {value, time, std::to_string(valve(random)), std::to_string(i / 7 + i / 31), i % 41 == 5});
  }
  return rows;
}

void feed(Summary& s, const Row& row) {
  if (row.rejected) {
    s.reject();
    return;
  }
  const auto verdict = row.value > 3.8   ? Verdict::outside
                       : row.value > 3.7 ? Verdict::undecided
                                         : Verdict::inside;
  s.add({row.value, row.time, verdict, row.group, row.label});
}

Summary empty_like(const SummaryPlan& plan) {
  Summary s;
  s.plan = plan;
  return s;
}

void check_same(const Signals& a, const Signals& b) {
  CHECK(a.count == b.count);
  CHECK(a.first == b.first);
}

void check_close(double a, double b, double scale) {
  // Moments to 1e-12 of the values' size.
  CHECK(std::abs(a - b) <= 1e-12 * scale);
}

void check_same(const StreamFigures& a, const StreamFigures& b) {
  CHECK(a.count == b.count);
  CHECK(a.verdicts.inside == b.verdicts.inside);
  CHECK(a.verdicts.outside == b.verdicts.outside);
  CHECK(a.verdicts.undecided == b.verdicts.undecided);
  CHECK(a.least == b.least);
  CHECK(a.greatest == b.greatest);
  REQUIRE(a.mean.has_value() == b.mean.has_value());
  if (a.mean) check_close(*a.mean, *b.mean, 1);
  REQUIRE(a.deviation.has_value() == b.deviation.has_value());
  if (a.deviation) check_close(*a.deviation, *b.deviation, *b.deviation);
  REQUIRE(a.drift.has_value() == b.drift.has_value());
  if (a.drift) {
    check_close(a.drift->slope, b.drift->slope, b.drift->u);
    check_close(a.drift->u, b.drift->u, b.drift->u);
  }
  REQUIRE(a.charts.size() == b.charts.size());
  for (std::size_t i = 0; i < a.charts.size(); ++i) {
    const auto& x = a.charts[i];
    const auto& y = b.charts[i];
    CHECK(x.points == y.points);
    CHECK(x.tested == y.tested);
    check_close(x.limits.location.high, y.limits.location.high, 1);
    check_close(x.limits.spread.centre, y.limits.spread.centre, 1);
    for (std::size_t t = 0; t < kRunsTests; ++t) {
      INFO("test " << t);
      check_same(x.signals[t], y.signals[t]);
    }
    check_same(x.spread_signals, y.spread_signals);
  }
}

void check_splits(SummaryPlan plan, std::uint64_t seed) {
  std::mt19937_64 random(seed);
  std::uniform_int_distribution<std::size_t> length(0, 600);
  const auto rows = process(random, length(random));
  Summary whole = empty_like(plan);
  for (const auto& row : rows) feed(whole, row);
  std::uniform_int_distribution<std::size_t> parts(1, 9);
  std::uniform_int_distribution<std::size_t> cut(0, rows.size());
  std::vector<std::size_t> cuts{0, rows.size()};
  for (std::size_t i = parts(random); i-- > 0;) {
    cuts.push_back(cut(random));
    // Short parts are where seams go wrong.
    cuts.push_back(std::min(cuts.back() + cut(random) % 4, rows.size()));
  }
  std::sort(cuts.begin(), cuts.end());
  std::vector<Summary> pieces;
  for (std::size_t i = 0; i + 1 < cuts.size(); ++i) {
    pieces.push_back(empty_like(plan));
    for (std::size_t r = cuts[i]; r < cuts[i + 1]; ++r) feed(pieces.back(), rows[r]);
  }
  // Joined in any order of neighbours.
  while (pieces.size() > 1) {
    const std::size_t at = std::uniform_int_distribution<std::size_t>(0, pieces.size() - 2)(random);
    pieces[at].append(pieces[at + 1]);
    pieces.erase(pieces.begin() + static_cast<std::ptrdiff_t>(at) + 1);
  }
  const Summary& merged = pieces.front();
  INFO("seed " << seed << ", rows " << rows.size());
  CHECK(merged.rows == whole.rows);
  CHECK(merged.rejected == whole.rejected);
  check_same(figures(merged.overall, plan), figures(whole.overall, plan));
  REQUIRE(merged.groups.size() == whole.groups.size());
  for (const auto& [group, stream] : whole.groups) {
    check_same(figures(merged.groups.find(group)->second, plan), figures(stream, plan));
  }
}

}  // namespace

TEST_CASE("merged summaries are the summary of the whole, on random splits") {
  for (const bool established : {false, true}) {
    for (const std::size_t subgroup : {1U, 2U, 5U, 25U, 0U}) {
      SummaryPlan plan;
      plan.limits = {3.6, 3.8};
      plan.group_by = {"valve"};
      plan.chart = chart_plan(subgroup == 0 ? 1 : subgroup);
      plan.chart.by_label = subgroup == 0;
      if (established) plan.chart.established = Established{3.7, 0.03};
      INFO("subgroup " << subgroup << ", established " << established);
      for (std::uint64_t seed = 1; seed <= 60; ++seed) check_splits(plan, seed * 1000 + subgroup);
    }
  }
}

TEST_CASE("more rows than the window merge alike") {
  SummaryPlan plan;
  plan.limits = {3.6, 3.8};
  plan.chart = chart_plan(5);
  std::mt19937_64 random(7);
  const auto rows = process(random, kWindow * 2 + 1234);
  Summary whole = empty_like(plan);
  Summary a = empty_like(plan);
  Summary b = empty_like(plan);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    feed(whole, rows[i]);
    feed(i < kWindow + 3 ? a : b, rows[i]);
  }
  a.append(b);
  check_same(figures(a.overall, plan), figures(whole.overall, plan));
}

TEST_CASE("summaries of different plans do not belong together") {
  SummaryPlan a;
  SummaryPlan b;
  CHECK(mismatch(a, b).empty());
  b.recipe_digest = "sha1:1";
  CHECK_FALSE(mismatch(a, b).empty());
  b = a;
  b.chart.subgroup = 5;
  CHECK_FALSE(mismatch(a, b).empty());
  b = a;
  b.unit = "g/L";
  CHECK_FALSE(mismatch(a, b).empty());
}
