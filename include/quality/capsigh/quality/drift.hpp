// Drift: the slope of a straight line through values over time, by least squares.
//
//   b = Sxy/Sxx,   s² = (Syy − b Sxy)/(n − 2),   u(b) = s/√Sxx
//
// NIST/SEMATECH e-Handbook 4.4.3; 95 % by Student's t, n − 2 degrees of freedom. u(b) holds the
// scatter of the values about the line; a fault common to all of them (a gauge that reads high all
// day) leaves the slope alone. Worked value: (0, 1), (1, 3), (2, 4), (3, 4) at one hour's distance:
// b = 1, u(b) = √0.1.
#pragma once

#include <cstdint>
#include <limits>
#include <optional>

#include "capsigh/quality/exact_sum.hpp"

namespace capsigh {

struct Drift {
  double slope = 0;  ///< per second
  double u = 0;      ///< standard uncertainty of the slope
  double low = 0;    ///< 95 % interval of the slope
  double high = 0;
  double at_end = 0;  ///< value of the line at the last time
};

/// Sums of a line through values over time (s since any epoch, the same for all).
struct TimeSums {
  std::uint64_t count = 0;
  ExactSum t;
  ExactSum tt;
  ExactSum x;
  ExactSum xx;
  ExactSum tx;
  double first = std::numeric_limits<double>::infinity();
  double last = -std::numeric_limits<double>::infinity();

  void add(double seconds, double value) {
    ++count;
    t.add(seconds);
    tt.add_product(seconds, seconds);
    x.add(value);
    xx.add_product(value, value);
    tx.add_product(seconds, value);
    if (seconds < first) first = seconds;
    if (seconds > last) last = seconds;
  }

  void merge(const TimeSums& other);

  /// nullopt below three values, or where all times are the same.
  [[nodiscard]] std::optional<Drift> drift() const;
};

/// Seconds from the last time until the line of a drift reaches an end of the limits; nullopt where
/// the drift is not different from none (its 95 % interval holds zero), where it leads away from
/// every limit, or where the line is already outside.
std::optional<double> time_to_limit(const Drift& drift, double low, double high);

}  // namespace capsigh
