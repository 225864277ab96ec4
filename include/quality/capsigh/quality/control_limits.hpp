// Limits of Shewhart control charts by ISO 7870-2, from its tabled constants.
//
//   individuals    x̄ ± 3 R̄m/d2(2)            moving range  D3(2) R̄m … D4(2) R̄m
//   X̄–R            X̿ ± A2 R̄                  range         D3 R̄ … D4 R̄
//   X̄–s            X̿ ± A3 s̄                  deviation     B3 s̄ … B4 s̄
//
// and with a centre μ and a standard deviation σ already established: μ ± 3 σ/√n; the spread as
// above with R̄ = d2 σ, s̄ = c4 σ. Worked value (NIST/SEMATECH e-Handbook 6.3.2.2): ten flow rates of
// mean 50.81, mean moving range 1.8778: 45.8159 to 55.8041.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <optional>

namespace capsigh {

inline constexpr std::size_t kLargestTabled = 25;  ///< values in a subgroup

/// The tabled constants by the number of values in a subgroup, 2 to kLargestTabled.
struct ControlConstants {
  using BySize = std::array<double, kLargestTabled + 1>;
  BySize d2{}, c4{}, a2{}, a3{}, b3{}, b4{}, d3_limit{}, d4_limit{};
};

/// A centre line with its control limits.
struct ControlLimits {
  double low = 0;
  double centre = 0;
  double high = 0;
};

/// What a process in control is known to do: its centre, and the standard deviation of its single
/// values.
struct Established {
  double centre = 0;
  double sigma = 0;
};

enum class ChartKind : std::uint8_t { individuals, mean_range, mean_deviation };

/// Both charts of a pair, and the standard deviation within subgroups behind them.
struct ChartLimits {
  ControlLimits location;
  ControlLimits spread;
  double sigma = 0;  ///< of single values

  /// Standard deviations of a point from the centre; control limits are at ± 3.
  [[nodiscard]] double z(double value) const {
    return 3.0 * (value - location.centre) / (location.high - location.centre);
  }
};

/// From the mean of all points and the mean spread (moving range, range or standard deviation) of
/// subgroups of `size` values (individuals: 2, of the moving range).
ChartLimits limits_from_data(ChartKind kind, std::size_t size, double mean, double mean_spread,
                             const ControlConstants& table);

/// From established values.
ChartLimits limits_established(ChartKind kind, std::size_t size, const Established& known,
                               const ControlConstants& table);

/// From the centre and the standard deviation of single values, for subgroups of any size: where
/// sizes vary, each point has limits of its own. Above kLargestTabled values c4 = 4(n−1)/(4n−3).
ChartLimits limits_from_sigma(ChartKind kind, std::size_t size, double centre, double sigma,
                              const ControlConstants& table);

/// c4 by the table, above it by 4(n − 1)/(4n − 3).
double unbiasing(std::size_t size, const ControlConstants& table);

}  // namespace capsigh
