#include "capsigh/quality/verdict.hpp"

#include <boost/math/distributions/normal.hpp>
#include <cmath>

namespace capsigh {

double conformity(double y, double u, const Interval& limits) {
  if (!(u > 0)) return limits.contains(y) ? 1.0 : 0.0;
  const boost::math::normal_distribution<double> standard;
  const auto below = [&](double limit) {
    if (std::isinf(limit)) return limit > 0 ? 1.0 : 0.0;
    return boost::math::cdf(standard, (limit - y) / u);
  };
  return below(limits.high) - below(limits.low);
}

Judgement judge(double y, double u, const Interval& limits, double risk) {
  const double p = conformity(y, u, limits);
  if (p >= 1.0 - risk) return {Verdict::inside, p};
  if (p <= risk) return {Verdict::outside, p};
  return {Verdict::undecided, p};
}

}  // namespace capsigh
