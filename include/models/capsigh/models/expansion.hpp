// The cold of sudden expansion: gas over a drink at the moment its package is opened.
#pragma once

#include <array>

#include "capsigh/constants/cited.hpp"

namespace capsigh {

/// γ of a mixture of ideal gases from the sum of c_p,i/R = γ_i/(γ_i − 1) by amount: γ = c/(c − 1).
struct MixtureHeatRatio {
  static constexpr LawInfo<1> info{"ratio of heat capacities of the gas",
                                   "gamma = c/(c - 1), c = sum y_i gamma_i/(gamma_i - 1)",
                                   {"c"},
                                   "gamma"};
  Fraction operator()(Fraction heat_capacity) const {
    return heat_capacity / (heat_capacity - Fraction(1.0));
  }
};

/// Reversible adiabatic expansion of an ideal gas: T2 = T1 (p2/p1)^((γ − 1)/γ). The coldest a
/// headspace can become; walls and condensing water keep it warmer. p2 above p1: nothing expands,
/// T2 = T1. Source: any text on thermodynamics; applied to sparkling wine by Liger-Belair et al.
/// 2017. Worked value: CO2 (γ 1.30) of 279 K from 4.7 to 1 bar: 195.2 K.
struct AdiabaticExpansion {
  static constexpr LawInfo<4> info{"cold of expansion, reversible and adiabatic",
                                   "T2 = T1 min(p2/p1, 1)^((gamma - 1)/gamma)",
                                   {"T1", "p1", "p2", "gamma"},
                                   "T2"};
  Temperature operator()(Temperature t, Pressure before, Pressure after, Fraction gamma) const;
};

/// Pressure of CO2 gas over dry ice: ln(p/pt) = (Tt/T)(a1 θ + a2 θ^1.9 + a3 θ^2.9), θ = 1 − T/Tt.
/// Source: Span & Wagner 1996, equation 3.12 (record sublimation_pressure.CO2), 154 K to the triple
/// point 216.592 K; above it there is no dry ice, and the result stays at the triple point's.
/// Worked value: 194.686 K: 101.3 kPa.
struct SublimationPressure {
  std::array<double, 3> a{};
  Temperature triple_temperature;
  Pressure triple_pressure{};

  static constexpr LawInfo<1> info{
      "pressure of CO2 over dry ice", "p = pt exp((Tt/T) sum a_i theta^n_i)", {"T"}, "p_s"};
  static SublimationPressure from(const Record& record);
  Pressure operator()(Temperature t) const;
};

}  // namespace capsigh
