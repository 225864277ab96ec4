#include "capsigh/quality/drift.hpp"

#include <algorithm>
#include <boost/math/distributions/students_t.hpp>
#include <cmath>

namespace capsigh {

void TimeSums::merge(const TimeSums& other) {
  count += other.count;
  t.merge(other.t);
  tt.merge(other.tt);
  x.merge(other.x);
  xx.merge(other.xx);
  tx.merge(other.tx);
  first = std::min(first, other.first);
  last = std::max(last, other.last);
}

std::optional<Drift> TimeSums::drift() const {
  if (count < 3 || !(last > first)) return std::nullopt;
  const auto n = static_cast<double>(count);
  const double sxx = tt.times_less(n, t, t).value() / n;
  const double sxy = tx.times_less(n, t, x).value() / n;
  const double syy = xx.times_less(n, x, x).value() / n;
  if (!(sxx > 0)) return std::nullopt;
  Drift d;
  d.slope = sxy / sxx;
  const double residual = std::max(syy - d.slope * sxy, 0.0);
  d.u = std::sqrt(residual / (n - 2.0) / sxx);
  constexpr double both_tails = 0.975;
  const boost::math::students_t_distribution<double> student(n - 2.0);
  const double half = boost::math::quantile(student, both_tails) * d.u;
  d.low = d.slope - half;
  d.high = d.slope + half;
  d.at_end = x.value() / n + d.slope * (last - t.value() / n);
  return d;
}

std::optional<double> time_to_limit(const Drift& drift, double low, double high) {
  if (drift.low <= 0 && drift.high >= 0) return std::nullopt;
  const double limit = drift.slope > 0 ? high : low;
  if (std::isinf(limit)) return std::nullopt;
  const double seconds = (limit - drift.at_end) / drift.slope;
  if (seconds < 0) return std::nullopt;
  return seconds;
}

}  // namespace capsigh
