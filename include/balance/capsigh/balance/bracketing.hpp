// One bracketed root finder for every balance.
#pragma once

#include <boost/math/tools/toms748_solve.hpp>
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

}  // namespace capsigh
