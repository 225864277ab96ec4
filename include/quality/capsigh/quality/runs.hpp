// Tests for assignable causes on the points of a control chart: the eight pattern tests of ISO
// 8258:1991, which ISO 7870-2 carries on in an informative annex (from memory; L. S. Nelson,
// Journal of Quality Technology 16 (1984) 237).
//
// A point signals a test where the points up to it show the pattern. What a point signals depends
// on it and at most kLookback − 1 points before it, so that the runs of two stretches merge at
// their seam into exactly those of the whole.
#pragma once

#include <array>
#include <boost/container/static_vector.hpp>
#include <cstdint>
#include <optional>
#include <vector>

#include "capsigh/quantity/validity.hpp"

namespace capsigh {

inline constexpr std::size_t kLookback = 15;  ///< points, of the longest pattern
inline constexpr std::size_t kListed = 100;   ///< violations of a test that are kept, the first

enum class RunsTest : std::uint8_t {
  beyond_limits,      ///< one point beyond three sigma
  one_side,           ///< nine in a row on one side of the centre
  trend,              ///< six in a row steadily rising or falling
  alternating,        ///< fourteen in a row alternating up and down
  two_of_three,       ///< two of three beyond two sigma on the same side
  four_of_five,       ///< four of five beyond one sigma on the same side
  within_one_sigma,   ///< fifteen in a row within one sigma
  outside_one_sigma,  ///< eight in a row outside one sigma, on either side
};
inline constexpr std::size_t kRunsTests = 8;

/// How many points make each pattern; at most kLookback.
struct RunsRules {
  double limit = 3;  ///< standard deviations from the centre to a control limit
  int one_side = 9;
  int trend = 6;
  int alternating = 14;
  int within = 15;
  int outside = 8;
};

/// One point of a chart. z counts its standard deviations from the centre.
struct ChartPoint {
  double value = 0;
  double z = 0;
  std::uint64_t row = 0;  ///< of the last value in it, from 1
  std::optional<double> time;
};

/// A signal: at the point that completes the pattern.
struct Violation {
  std::uint64_t row = 0;
  std::optional<double> time;
  double value = 0;

  friend bool operator==(const Violation&, const Violation&) = default;
};

/// The signals of one test.
struct Signals {
  std::uint64_t count = 0;
  std::vector<Violation> first;  ///< the first kListed, by row

  void add(const ChartPoint& point);
  void shift_rows(std::uint64_t rows);
  /// Appends what came later.
  void append(const Signals& later);
};

/// Lengths of the patterns that end at the last point; none counts beyond kLookback.
struct RunsState {
  std::optional<double> last;
  int direction = 0;  ///< of the last step: −1, 0, 1
  int side = 0;       ///< points on one side; the sign tells which
  int trend = 0;
  int alternating = 0;
  int within = 0;
  int outside = 0;
  std::uint8_t above_two = 0;  ///< the last points as bits, the newest lowest
  std::uint8_t below_two = 0;
  std::uint8_t above_one = 0;
  std::uint8_t below_one = 0;

  /// Takes in a point and returns the tests it signals, bit i for test i.
  unsigned step(const ChartPoint& point, const RunsRules& rules);
};

/// The tests on a stretch of points.
struct Runs {
  std::uint64_t count = 0;
  RunsState state;
  boost::container::static_vector<ChartPoint, kLookback> head;
  std::array<Signals, kRunsTests> signals;

  void add(const ChartPoint& point, const RunsRules& rules);
  void shift_rows(std::uint64_t rows);
  /// Joins the points that came later, rows already shifted: as if each had been added here.
  void append(const Runs& later, const RunsRules& rules);
};

}  // namespace capsigh
