#include "capsigh/quality/moments.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {

void Moments::merge(const Moments& other) {
  count += other.count;
  sum.merge(other.sum);
  squares.merge(other.squares);
  least = std::min(least, other.least);
  greatest = std::max(greatest, other.greatest);
}

std::optional<double> Moments::mean() const {
  if (count == 0) return std::nullopt;
  return sum.value() / static_cast<double>(count);
}

std::optional<double> Moments::deviation() const {
  if (count < 2) return std::nullopt;
  const auto n = static_cast<double>(count);
  const double numerator = squares.times_less(n, sum, sum).value();
  if (least == greatest) return 0.0;
  return std::sqrt(std::max(numerator, 0.0) / (n * (n - 1.0)));
}

}  // namespace capsigh
