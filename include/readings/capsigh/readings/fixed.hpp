// Numbers with a fixed count of decimals, the same digits as fmt's "{:.Nf}" several times faster.
#pragma once

#include <cstddef>

namespace capsigh {

/// Writes numbers with `decimals` (0 to 9) decimals. The digits are those of the correctly rounded
/// decimal: near a tie, where scaling could round the wrong way, and beyond 1e8 the slow and exact
/// formatter decides. Never "-0".
class FixedPoint {
 public:
  explicit FixedPoint(int decimals, char point = '.');

  /// Writes to `out`, which has room for kMost characters, and returns one past the last.
  char* write(char* out, double value) const;

  static constexpr std::size_t kMost = 330;  ///< 309 digits, sign, point, 9 decimals

  [[nodiscard]] int decimals() const { return decimals_; }

 private:
  char* exactly(char* out, double value) const;

  int decimals_;
  char point_;
  double scale_;
};

}  // namespace capsigh
