// A range of validity as data, with its predicate. Ranges are unions of boxes in temperature and
// absolute pressure, because a law may reach further in pressure when it is warm.
#pragma once

#include <algorithm>
#include <limits>
#include <optional>
#include <span>

#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// A closed interval in SI units; unbounded unless given.
struct Interval {
  double low = -std::numeric_limits<double>::infinity();
  double high = std::numeric_limits<double>::infinity();

  [[nodiscard]] constexpr bool contains(double x) const { return x >= low && x <= high; }
  [[nodiscard]] constexpr bool bounded() const {
    return low > -std::numeric_limits<double>::infinity() ||
           high < std::numeric_limits<double>::infinity();
  }
  [[nodiscard]] constexpr double width() const { return high - low; }
  [[nodiscard]] constexpr double distance(double x) const {
    return std::max({0.0, low - x, x - high});
  }
};

/// The conditions a law was used at; what the law does not depend on is absent.
struct Conditions {
  std::optional<Temperature> temperature;
  std::optional<Pressure> pressure;
};

struct ValidityBox {
  Interval temperature;  ///< K
  Interval pressure;     ///< Pa

  [[nodiscard]] constexpr bool contains(const Conditions& c) const {
    return (!c.temperature || temperature.contains(c.temperature->kelvin())) &&
           (!c.pressure || pressure.contains(c.pressure->value()));
  }
};

/// True if any box holds the conditions; a record without boxes is valid everywhere.
constexpr bool within(std::span<const ValidityBox> range, const Conditions& c) {
  return range.empty() ||
         std::any_of(range.begin(), range.end(), [&](const auto& box) { return box.contains(c); });
}

/// How far outside the conditions are, in widths of the nearest box (0 inside). Intervals without
/// two ends have no width: there the distance counts in units of the bound itself.
double widths_outside(std::span<const ValidityBox> range, const Conditions& c);

/// The box nearest to the conditions, for messages. The range must not be empty.
const ValidityBox& nearest_box(std::span<const ValidityBox> range, const Conditions& c);

}  // namespace capsigh
