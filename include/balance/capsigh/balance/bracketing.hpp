// One bracketed root finder for every balance.
#pragma once

#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>
#include <cstdint>
#include <optional>

namespace capsigh {

/// The root of f between low and high (plain numbers in f's own units), to about 1e-14 relative;
/// nullopt if f has the same sign at both ends.
template <class F>
std::optional<double> root_between(F&& f, double low, double high) {
  const double at_low = f(low);
  const double at_high = f(high);
  if (at_low == 0) return low;
  if (at_high == 0) return high;
  const bool bracketed = (at_low < 0 && at_high > 0) || (at_low > 0 && at_high < 0);
  if (!bracketed) return std::nullopt;  // also where either is no number
  constexpr int bits = 50;              // 1e-15 relative: differences at z = ±1 stay clean
  std::uintmax_t evaluations = 200;     // TOMS 748 needs about ten
  const auto [a, b] = boost::math::tools::toms748_solve(
      f, low, high, at_low, at_high, boost::math::tools::eps_tolerance<double>(bits), evaluations);
  return 0.5 * (a + b);
}

/// The same root by secant steps from two points near it, each step a fraction of what a bracket
/// costs; f gives no number (NaN) where it has none. nullopt where the steps do not come to rest
/// between low and high: then root_between decides.
template <class F>
std::optional<double> root_near(F&& f, double x0, double x1, double low, double high) {
  constexpr int most_steps = 12;
  constexpr double settled = 1e-13;  // relative: a tenth of the noise a doubt is told from
  double before = x0;
  double at_before = f(before);
  double x = x1;
  for (int i = 0; i < most_steps; ++i) {
    if (!(x > low && x < high)) return std::nullopt;
    const double at_x = f(x);
    if (at_x == 0) return x;
    const double step = -at_x * (x - before) / (at_x - at_before);
    if (!std::isfinite(step)) return std::nullopt;
    before = x;
    at_before = at_x;
    x += step;
    if (std::abs(step) <= settled * std::abs(x)) return x;
  }
  return std::nullopt;
}

}  // namespace capsigh
