// Density of water, and the amount of gas behind a content.
#pragma once

#include <array>

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// Density of air-free water at 1 atm.
///
///   ρ = (n0 + n1 t + … + n5 t⁵)/(1 + d1 t),  t in °C, ρ in kg/m³
///
/// Source: Kell 1975 (record density.water). Range −2 to 150 °C; outside, the polynomial is
/// extrapolated and flagged. Worked value: 20 °C gives 998.2041 kg/m³ (998.2063 on ITS-90 water).
struct WaterDensity {
  std::array<double, 6> n{};
  double d1 = 0;
  Temperature zero_celsius;

  static constexpr LawInfo<1> info{
      "density of water", "rho = sum n_i t^i / (1 + d1 t)", {"T"}, "rho"};
  static WaterDensity from(const Record& record, Temperature zero_celsius);
  MassDensity operator()(Temperature t) const;
};

/// Density of ethanol–water of ethanol mass fraction p:
///   ρ = A1 + Σ A_k p^(k−1) + Σ B_i (t − 20)^i + ΣΣ C_i,k p^k (t − 20)^i,  t in °C
/// Source: OIML R22 (record density.ethanol_water), −20 to 40 °C; above, the line through 40 °C
/// with the slope there (flagged by the record's range). Worked value: 33.30 % by mass (40 % vol),
/// 20 °C: 948.05 kg/m³.
struct EthanolWaterDensity {
  std::array<double, 12> a{};
  std::array<double, 6> b{};
  std::array<std::array<double, 11>, 5> c{};  ///< c[i − 1][k − 1]
  Temperature zero_celsius;
  static constexpr double reference = 20;  ///< °C, part of the form
  static constexpr double highest = 40;    ///< °C, where the polynomial ends

  static constexpr LawInfo<2> info{"density of ethanol-water (OIML R22)",
                                   "rho = sum A p^k + sum B dt^i + sum C p^k dt^i",
                                   {"p", "T"},
                                   "rho"};
  static EthanolWaterDensity from(const Record& record, Temperature zero_celsius);
  MassDensity operator()(Fraction by_mass, Temperature t) const;
  /// Mass fraction of ethanol of a water-ethanol mixture of that strength by volume at 20 °C.
  [[nodiscard]] Fraction by_mass(Fraction by_volume, Temperature twenty) const;
};

/// Specific gravity 20/20 of a sucrose solution: SG = 1 + P/(258.6 − 227.1 P/258.2), P in % by
/// mass. Source: record density.sucrose_water, to 30 % (0.1 kg/m³); to 65 % it reads 4 kg/m³ high.
/// Worked value: 10 %: 1.04003.
struct SucroseGravity {
  double a = 0;
  double b = 0;
  double c = 0;

  static constexpr LawInfo<1> info{"specific gravity of a sugar solution",
                                   "SG = 1 + P/(258.6 - 227.1 P/258.2)",
                                   {"P/100"},
                                   "SG"};
  Fraction operator()(Fraction by_mass) const;
};

/// Content as amount per degassed litre at 20 °C: c20 = b ρ(20 °C). An identity.
struct AmountPerLitre {
  static constexpr LawInfo<2> info{
      "content per degassed litre at 20 degC", "c20 = b rho20", {"b", "rho20"}, "c20"};
  AmountConcentration operator()(Molality b, MassDensity rho20) const { return b * rho20; }
};

/// Content as mass per degassed litre at 20 °C: γ20 = c20 M. An identity.
struct MassPerLitre {
  static constexpr LawInfo<2> info{
      "content as mass per degassed litre at 20 degC", "gamma20 = c20 M", {"c20", "M"}, "gamma20"};
  MassConcentration operator()(AmountConcentration c20, MolarMass m) const { return c20 * m; }
};

/// Content as volumes of gas (0 °C, 1 atm) per volume of degassed liquid: vol = c20 V_m. An
/// identity; V_m is the gas's own molar volume there (real) or the ideal gas's.
struct VolumesOfGas {
  static constexpr LawInfo<2> info{
      "content as volumes of gas", "vol = c20 V_m", {"c20", "V_m"}, "vol"};
  Fraction operator()(AmountConcentration c20, MolarVolume vm) const { return c20 * vm; }
};

}  // namespace capsigh
