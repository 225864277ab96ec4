#include "capsigh/quality/capability.hpp"

#include <algorithm>
#include <boost/math/distributions/chi_squared.hpp>
#include <boost/math/distributions/normal.hpp>
#include <cmath>

namespace capsigh {
namespace {

constexpr double kTail = 0.025;  // of a 95 % interval, on either side

Index spread_index(double cp, double degrees) {
  const boost::math::chi_squared_distribution<double> chi(degrees);
  const auto edge = [&](double p) {
    return cp * std::sqrt(boost::math::quantile(chi, p) / degrees);
  };
  return {cp, edge(kTail), edge(1.0 - kTail)};
}

Index centred_index(double cpk, double count, double degrees) {
  const boost::math::normal_distribution<double> normal;
  const double z = boost::math::quantile(normal, 1.0 - kTail);
  constexpr double ninth = 1.0 / 9.0;
  const double half = z * std::sqrt(ninth / count + cpk * cpk / (2.0 * degrees));
  return {cpk, cpk - half, cpk + half};
}

}  // namespace

std::optional<Capability> capability(double count, double mean, double deviation,
                                     const Interval& limits) {
  if (count < 2 || !(deviation > 0) || !limits.bounded()) return std::nullopt;
  const double degrees = count - 1.0;
  Capability c;
  if (std::isfinite(limits.width()))
    c.cp = spread_index(limits.width() / (6.0 * deviation), degrees);
  const double nearest = std::min(limits.high - mean, mean - limits.low);
  c.cpk = centred_index(nearest / (3.0 * deviation), count, degrees);
  return c;
}

std::optional<Capability> capability(const Moments& moments, const Interval& limits) {
  const auto mean = moments.mean();
  const auto deviation = moments.deviation();
  if (!mean || !deviation) return std::nullopt;
  return capability(static_cast<double>(moments.count), *mean, *deviation, limits);
}

}  // namespace capsigh
