#include "capsigh/quality/verdict.hpp"

#include <boost/math/distributions/normal.hpp>
#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>
#include <cstdint>

namespace capsigh {
namespace {

const boost::math::normal_distribution<double> kStandard;

double quantile(double p) { return boost::math::quantile(kStandard, p); }

// The root of a monotone f between low and high, where it changes sign.
template <class F>
double root(F&& f, double low, double high) {
  constexpr int bits = 48;
  std::uintmax_t evaluations = 200;
  const auto [a, b] = boost::math::tools::toms748_solve(
      f, low, high, boost::math::tools::eps_tolerance<double>(bits), evaluations);
  return 0.5 * (a + b);
}

bool two_sided(const Interval& limits) {
  return std::isfinite(limits.low) && std::isfinite(limits.high);
}

}  // namespace

double conformity(double y, double u, const Interval& limits) {
  if (!(u > 0)) return limits.contains(y) ? 1.0 : 0.0;
  const auto below = [&](double limit) {
    if (std::isinf(limit)) return limit > 0 ? 1.0 : 0.0;
    return boost::math::cdf(kStandard, (limit - y) / u);
  };
  return below(limits.high) - below(limits.low);
}

Judgement judge(double y, double u, const Interval& limits, const JudgingRule& rule) {
  const double p = conformity(y, u, limits);
  if (!rule.guarded) return {limits.contains(y) ? Verdict::inside : Verdict::outside, p};
  if (p >= 1.0 - rule.risk) return {Verdict::inside, p};
  if (p <= rule.risk) return {Verdict::outside, p};
  return {Verdict::undecided, p};
}

AcceptanceZone acceptance_zone(double u, const Interval& limits, const JudgingRule& rule) {
  AcceptanceZone zone;
  zone.values = limits;
  const double centre = 0.5 * (limits.low + limits.high);
  const double half = 0.5 * (limits.high - limits.low);
  if (two_sided(limits)) zone.best_probability = conformity(centre, u, limits);
  if (!rule.guarded || !(u > 0)) return zone;
  if (!two_sided(limits)) {
    zone.guard_band = quantile(1.0 - rule.risk) * u;
    zone.values.high -= zone.guard_band;
    zone.values.low += zone.guard_band;
    return zone;
  }
  if (zone.best_probability < 1.0 - rule.risk) {
    zone.empty = true;
    // At the centre P = 2 Φ(T/u) − 1 = 1 − risk.
    zone.u_to_open = half / quantile(1.0 - 0.5 * rule.risk);
    return zone;
  }
  const auto lacking = [&](double guard) {
    return conformity(limits.high - guard, u, limits) - (1.0 - rule.risk);
  };
  // At the limit itself less than half is inside; at the centre enough.
  zone.guard_band = lacking(half) == 0 ? half : root(lacking, 0.0, half);
  zone.values = {limits.low + zone.guard_band, limits.high - zone.guard_band};
  return zone;
}

std::optional<double> u_to_decide(double y, double u, const Interval& limits,
                                  const JudgingRule& rule) {
  if (judge(y, u, limits, rule).verdict != Verdict::undecided) return u;
  const bool inside = limits.contains(y);
  const auto short_of = [&](double trial) {
    const double p = conformity(y, trial, limits);
    return inside ? p - (1.0 - rule.risk) : p - rule.risk;
  };
  // Without doubt it is decided, unless it stands on a limit, where half is inside for ever.
  const double least = 1e-9 * u;
  if (judge(y, least, limits, rule).verdict == Verdict::undecided) return std::nullopt;
  return root(short_of, least, u);
}

}  // namespace capsigh
