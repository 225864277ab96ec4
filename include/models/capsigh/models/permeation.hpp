// Gas through the wall and closure of a package.
//
//   q = q_ref exp(−(E/R) (1/T − 1/T_ref)),   n' = q (p_in − p_out)/(Δp_ref V_m)
//
// q_ref gas through the whole package, as volume at 0 °C and 101.325 kPa per time, at T_ref and a
// difference Δp_ref of its partial pressure; E activation energy of permeation (Arrhenius); V_m the
// volume of a mole at 0 °C and 101.325 kPa.
// Source: solution and diffusion in polymers (Fick, Henry), e.g. Crank & Park, Diffusion in
// Polymers, 1968. Range: below the glass transition of the polymer (PET: about 70 °C).
// Check: E = 30 kJ/mol, from 23 to 38 °C: q/q_ref = 1.80.
#pragma once

#include "capsigh/constants/cited.hpp"

namespace capsigh {

/// Amount of gas per time and difference of partial pressure, mol/(s Pa).
using LeakRateUnit = detail::Per<detail::Per<si::amount, si::time>, si::pressure>;
using LeakRate = Quantity<LeakRateUnit>;
template <>
inline constexpr std::string_view si_symbol<LeakRate> = "mol/(s Pa)";

/// q = q_ref exp(−(E/R) (1/T − 1/T_ref)).
struct TransmissionAt {
  GasConstant r{};
  static constexpr LawInfo<4> info{"gas through the wall at the storage temperature (Arrhenius)",
                                   "q = q_ref exp(-(E/R) (1/T - 1/T_ref))",
                                   {"q_ref", "E", "T", "T_ref"},
                                   "q"};
  Transmission operator()(Transmission reference, MolarEnergy activation, Temperature t,
                          Temperature at) const;
};

/// w = q/(Δp_ref V_m).
struct RateThroughWall {
  static constexpr LawInfo<3> info{"gas through the wall per difference of partial pressure",
                                   "w = q/(dp_ref V_m)",
                                   {"q", "dp_ref", "V_m"},
                                   "w"};
  LeakRate operator()(Transmission q, Pressure difference, MolarVolume molar) const {
    return q / difference / molar;
  }
};

}  // namespace capsigh
