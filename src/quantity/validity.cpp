#include "capsigh/quantity/validity.hpp"

#include <cmath>

namespace capsigh {
namespace {

// Relative units: distance over width; over the bound itself where the interval is half open.
double relative_distance(const Interval& interval, double x) {
  const double distance = interval.distance(x);
  if (distance == 0) return 0;
  if (std::isfinite(interval.width())) return distance / interval.width();
  const double bound = std::isfinite(interval.low) ? interval.low : interval.high;
  return distance / std::abs(bound);
}

double box_distance(const ValidityBox& box, const Conditions& c) {
  const double t =
      c.temperature ? relative_distance(box.temperature, c.temperature->kelvin()) : 0.0;
  const double p = c.pressure ? relative_distance(box.pressure, c.pressure->value()) : 0.0;
  return t + p;
}

}  // namespace

const ValidityBox& nearest_box(std::span<const ValidityBox> range, const Conditions& c) {
  return *std::min_element(range.begin(), range.end(), [&](const auto& a, const auto& b) {
    return box_distance(a, c) < box_distance(b, c);
  });
}

double widths_outside(std::span<const ValidityBox> range, const Conditions& c) {
  if (within(range, c)) return 0;
  return box_distance(nearest_box(range, c), c);
}

}  // namespace capsigh
