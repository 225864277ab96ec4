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
