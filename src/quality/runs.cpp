#include "capsigh/quality/runs.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {
namespace {

constexpr int kMost = static_cast<int>(kLookback);

constexpr unsigned bit(RunsTest test) { return 1U << static_cast<unsigned>(test); }

int longer(int run) { return std::min(run + 1, kMost); }

int ones(unsigned bits) {
  int n = 0;
  for (; bits != 0; bits &= bits - 1) ++n;
  return n;
}

// The newest point is in the zone, and `wanted` of the last `of` are.
bool among(std::uint8_t bits, int wanted, unsigned of) {
  return (bits & 1U) != 0 && ones(bits & ((1U << of) - 1U)) >= wanted;
}

void remember(std::uint8_t& bits, bool newest) {
  bits = static_cast<std::uint8_t>((static_cast<unsigned>(bits) << 1U) | (newest ? 1U : 0U));
}

void cut(std::vector<Violation>& list) {
  if (list.size() > kListed) list.resize(kListed);
}

}  // namespace

void Signals::add(const ChartPoint& point) {
  ++count;
  if (first.size() < kListed) first.push_back({point.row, point.time, point.value});
}

void Signals::shift_rows(std::uint64_t rows) {
  for (auto& v : first) v.row += rows;
}

void Signals::append(const Signals& later) {
  count += later.count;
  first.insert(first.end(), later.first.begin(), later.first.end());
  cut(first);
}

unsigned RunsState::step(const ChartPoint& point, const RunsRules& rules) {
  const int step = !last ? 0 : point.value > *last ? 1 : point.value < *last ? -1 : 0;
  if (step == 0) {
    trend = 1;
    alternating = 1;
  } else {
    trend = step == direction ? longer(trend) : 2;
    alternating = step == -direction ? longer(alternating) : 2;
  }
  direction = step;
  last = point.value;
  const int now = point.z > 0 ? 1 : point.z < 0 ? -1 : 0;
  side = now == 0 ? 0 : (side > 0) == (now > 0) ? now * longer(std::abs(side)) : now;
  const bool far = std::abs(point.z) > 1;
  within = far ? 0 : longer(within);
  outside = far ? longer(outside) : 0;
  remember(above_two, point.z > 2);
  remember(below_two, point.z < -2);
  remember(above_one, point.z > 1);
  remember(below_one, point.z < -1);

  unsigned signals = 0;
  const auto signal = [&](RunsTest test, bool is) { signals |= is ? bit(test) : 0U; };
  signal(RunsTest::beyond_limits, std::abs(point.z) > rules.limit);
  signal(RunsTest::one_side, std::abs(side) >= rules.one_side);
  signal(RunsTest::trend, trend >= rules.trend);
  signal(RunsTest::alternating, alternating >= rules.alternating);
  signal(RunsTest::two_of_three, among(above_two, 2, 3) || among(below_two, 2, 3));
  signal(RunsTest::four_of_five, among(above_one, 4, 5) || among(below_one, 4, 5));
  signal(RunsTest::within_one_sigma, within >= rules.within);
  signal(RunsTest::outside_one_sigma, outside >= rules.outside);
  return signals;
}

void Runs::add(const ChartPoint& point, const RunsRules& rules) {
  ++count;
  if (head.size() < kLookback) head.push_back(point);
  const unsigned fired = state.step(point, rules);
  if (fired == 0) return;
  for (std::size_t i = 0; i < kRunsTests; ++i) {
    if ((fired >> i & 1U) != 0) signals[i].add(point);
  }
}

void Runs::shift_rows(std::uint64_t rows) {
  for (auto& point : head) point.row += rows;
  for (auto& s : signals) s.shift_rows(rows);
}

void Runs::append(const Runs& later, const RunsRules& rules) {
  if (later.count <= later.head.size()) {
    for (const auto& point : later.head) add(point, rules);
    return;
  }
  // What its first points signal depends on the points before them: they are added here once more,
  // and what they signalled on their own is left out.
  Runs alone;
  for (const auto& point : later.head) {
    add(point, rules);
    alone.add(point, rules);
  }
  for (std::size_t i = 0; i < kRunsTests; ++i) {
    Signals rest = later.signals[i];
    rest.count -= alone.signals[i].count;
    const auto kept = static_cast<std::ptrdiff_t>(alone.signals[i].first.size());
    rest.first.erase(rest.first.begin(), rest.first.begin() + kept);
    signals[i].append(rest);
  }
  count += later.count - later.head.size();
  state = later.state;
}

}  // namespace capsigh
