// Sums that do not depend on how they were split: a number and the rounding error of it (106 bits
// together), so that summaries of parts add up to the summary of the whole.
//
// T. J. Dekker, Numerische Mathematik 18 (1971) 224, and D. E. Knuth, The Art of Computer
// Programming 2, 4.2.2: the error of a floating-point sum or product is itself a number.
#pragma once

#include <cmath>

namespace capsigh {

/// A sum of doubles, exact to about n · 1e-32 of the largest partial sum. Merging is addition.
class ExactSum {
 public:
  constexpr ExactSum() = default;
  constexpr ExactSum(double high, double low) : high_(high), low_(low) {}

  void add(double x) {
    const double sum = high_ + x;
    const double part = sum - high_;
    const double error = (high_ - (sum - part)) + (x - part);
    settle(sum, low_ + error);
  }

  /// Adds a · b without rounding the product. |a|, |b| < 1e150.
  void add_product(double a, double b) {
    const double product = a * b;
    const double a_high = upper_half(a);
    const double b_high = upper_half(b);
    const double a_low = a - a_high;
    const double b_low = b - b_high;
    const double error =
        ((a_high * b_high - product) + a_high * b_low + a_low * b_high) + a_low * b_low;
    add(product);
    settle(high_, low_ + error);
  }

  void merge(const ExactSum& other) {
    add(other.high_);
    settle(high_, low_ + other.low_);
  }

  void subtract(const ExactSum& other) { merge({-other.high_, -other.low_}); }

  [[nodiscard]] double value() const { return high_ + low_; }
  [[nodiscard]] double high() const { return high_; }
  [[nodiscard]] double low() const { return low_; }

  /// this · n − a · b, each kept in full: the numerator of a variance.
  [[nodiscard]] ExactSum times_less(double n, const ExactSum& a, const ExactSum& b) const {
    ExactSum r;
    r.add_product(n, high_);
    r.add_product(-a.high_, b.high_);
    r.add(n * low_);
    r.add(-a.high_ * b.low_);
    r.add(-a.low_ * b.high_);
    return r;
  }

 private:
  void settle(double high, double low) {
    high_ = high + low;
    low_ = low - (high_ - high);
  }

  static double upper_half(double x) {
    constexpr double split = 134217729.0;  // 2^27 + 1
    const double scaled = split * x;
    return scaled - (scaled - x);
  }

  double high_ = 0;
  double low_ = 0;
};

}  // namespace capsigh
