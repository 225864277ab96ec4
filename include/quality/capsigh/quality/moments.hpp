// Count, mean, standard deviation and extremes of a stream of values, in constant memory.
//
//   s² = (n Σx² − (Σx)²)/(n (n − 1))
//
// The sums carry 106 bits, so that the difference keeps its digits (NIST StRD NumAcc4: mean 1e7,
// s 0.1) and the moments of parts merge into those of the whole.
#pragma once

#include <cstdint>
#include <limits>
#include <optional>

#include "capsigh/quality/exact_sum.hpp"

namespace capsigh {

struct Moments {
  std::uint64_t count = 0;
  ExactSum sum;
  ExactSum squares;
  double least = std::numeric_limits<double>::infinity();
  double greatest = -std::numeric_limits<double>::infinity();

  /// Takes in one finite value.
  void add(double x) {
    ++count;
    sum.add(x);
    squares.add_product(x, x);
    if (x < least) least = x;
    if (x > greatest) greatest = x;
  }

  /// The moments of both sets together; order does not matter.
  void merge(const Moments& other);

  /// nullopt without a value.
  [[nodiscard]] std::optional<double> mean() const;
  /// Sample standard deviation, n − 1 in the denominator; nullopt below two values.
  [[nodiscard]] std::optional<double> deviation() const;
  [[nodiscard]] double range() const { return count > 0 ? greatest - least : 0.0; }
};

}  // namespace capsigh
