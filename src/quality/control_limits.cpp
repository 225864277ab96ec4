#include "capsigh/quality/control_limits.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {
namespace {

constexpr double kSigmas = 3;  // from the centre to a control limit

ControlLimits around(double centre, double half) { return {centre - half, centre, centre + half}; }

}  // namespace

double unbiasing(std::size_t size, const ControlConstants& table) {
  if (size <= kLargestTabled) return table.c4[size];
  const auto n = static_cast<double>(size);
  return 4.0 * (n - 1.0) / (4.0 * n - 3.0);
}

ChartLimits limits_from_data(ChartKind kind, std::size_t size, double mean, double mean_spread,
                             const ControlConstants& table) {
  ChartLimits l;
  const bool by_deviation = kind == ChartKind::mean_deviation;
  l.sigma = mean_spread / (by_deviation ? table.c4[size] : table.d2[size]);
  switch (kind) {
    case ChartKind::individuals: l.location = around(mean, kSigmas * l.sigma); break;
    case ChartKind::mean_range: l.location = around(mean, table.a2[size] * mean_spread); break;
    case ChartKind::mean_deviation: l.location = around(mean, table.a3[size] * mean_spread); break;
  }
  const double low = by_deviation ? table.b3[size] : table.d3_limit[size];
  const double high = by_deviation ? table.b4[size] : table.d4_limit[size];
  l.spread = {low * mean_spread, mean_spread, high * mean_spread};
  return l;
}

ChartLimits limits_from_sigma(ChartKind kind, std::size_t size, double centre, double sigma,
                              const ControlConstants& table) {
  ChartLimits l;
  l.sigma = sigma;
  const double n = kind == ChartKind::individuals ? 1.0 : static_cast<double>(size);
  l.location = around(centre, kSigmas * sigma / std::sqrt(n));
  if (kind != ChartKind::mean_deviation) {
    if (size > kLargestTabled) return l;
    const double spread = table.d2[size] * sigma;
    l.spread = {table.d3_limit[size] * spread, spread, table.d4_limit[size] * spread};
    return l;
  }
  const double c4 = unbiasing(size, table);
  const double half = kSigmas * sigma * std::sqrt(1.0 - c4 * c4);
  l.spread = {std::max(0.0, c4 * sigma - half), c4 * sigma, c4 * sigma + half};
  if (size <= kLargestTabled) {
    l.spread.low = table.b3[size] * l.spread.centre;
    l.spread.high = table.b4[size] * l.spread.centre;
  }
  return l;
}

ChartLimits limits_established(ChartKind kind, std::size_t size, const Established& known,
                               const ControlConstants& table) {
  return limits_from_sigma(kind, size, known.centre, known.sigma, table);
}

}  // namespace capsigh
