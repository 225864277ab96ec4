// The gas side: second virial coefficients, fugacity and compressibility of a mixture.
//
//   ln φ_i = (2 Σ_j y_j B_ij − B_mix) p/(R T),   B_mix = ΣΣ y_i y_j B_ij,   Z = 1 + B_mix p/(R T)
//   B_12 = (B_11 + B_22)/2 + δ
//
// Sums run over the dry composition at the total pressure. Sources: Weiss 1974 (CO2, and CO2 with
// air), CRC Handbook (other gases). Range: record real_gas.second_virial (8 bar cold, 10 bar from
// 15 °C, flagged to 20 bar, refused beyond). Worked value: CO2 at 0 °C, B = −150.2 cm³/mol; at
// 101.325 kPa Z = 0.9933 and V_m = 22.263 L/mol.
#pragma once

#include <array>
#include <variant>

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// B = Σ c_i T^i, T in K (Weiss 1974).
struct PowerSeriesVirial {
  std::array<double, 4> c{};
  double factor = 1;  ///< SI value of the printed unit

  static constexpr LawInfo<1> info{
      "second virial coefficient", "B = c0 + c1 T + c2 T^2 + c3 T^3", {"T"}, "B"};
  MolarVolume operator()(Temperature t) const;
};

/// B = Σ a_i (298.15 K/T − 1)^(i−1) (CRC Handbook).
struct InverseTemperatureVirial {
  std::array<double, 5> a{};
  double factor = 1;
  static constexpr double reference_temperature = 298.15;  ///< K, part of the form

  static constexpr LawInfo<1> info{
      "second virial coefficient", "B = sum a_i (298.15/T - 1)^(i-1)", {"T"}, "B"};
  MolarVolume operator()(Temperature t) const;
};

/// B = (R Tc/pc) (f0 + ω f1), Tr = T/Tc (corresponding states):
///   f0 = a0 + a1/Tr + a2/Tr² + a3/Tr³ + a8/Tr⁸,   f1 = b0 + b2/Tr² + b3/Tr³ + b8/Tr⁸
/// Source: Tsonopoulos 1974, for non-polar gases (record virial_form.tsonopoulos). Worked value: Xe
/// at 298.15 K about −130 cm³/mol.
struct TsonopoulosVirial {
  Temperature critical_temperature;
  Pressure critical_pressure{};
  double acentric_factor = 0;
  GasConstant r{};
  std::array<double, 5> f0{};  ///< powers 0, 1, 2, 3, 8 of 1/Tr
  std::array<double, 4> f1{};  ///< powers 0, 2, 3, 8

  static constexpr LawInfo<1> info{"second virial coefficient, corresponding states",
                                   "B = (R Tc/pc) (f0(Tr) + omega f1(Tr))",
                                   {"T"},
                                   "B"};
  MolarVolume operator()(Temperature t) const;
};

using VirialForm = std::variant<PowerSeriesVirial, InverseTemperatureVirial, TsonopoulosVirial>;

/// δ = d0 + d1 T, what the cross coefficient exceeds the mean of its two gases by.
struct CrossVirialExcess {
  double d0 = 0;
  double d1 = 0;
  double factor = 1;

  static constexpr LawInfo<1> info{
      "excess of the cross virial coefficient", "delta = d0 + d1 T", {"T"}, "delta"};
  MolarVolume operator()(Temperature t) const;
};

/// φ_i from B_i* = 2 Σ_j y_j B_ij − B_mix.
struct FugacityCoefficient {
  GasConstant r{};

  static constexpr LawInfo<3> info{"fugacity coefficient",
                                   "phi = exp(B* p/(R T)), B* = 2 sum y_j B_ij - B_mix",
                                   {"B*", "p", "T"},
                                   "phi"};
  Fraction operator()(MolarVolume b_star, Pressure p, Temperature t) const;
};

/// Z = 1 + B_mix p/(R T).
struct Compressibility {
  GasConstant r{};

  static constexpr LawInfo<3> info{
      "compressibility", "Z = 1 + B_mix p/(R T)", {"B_mix", "p", "T"}, "Z"};
  Fraction operator()(MolarVolume b_mix, Pressure p, Temperature t) const;
};

/// V_m = Z R T/p, the volume of one mole.
struct MolarVolumeOfGas {
  GasConstant r{};

  static constexpr LawInfo<3> info{
      "molar volume of the gas", "V_m = Z R T/p", {"Z", "p", "T"}, "V_m"};
  MolarVolume operator()(Fraction z, Pressure p, Temperature t) const;
};

/// Dalton's law under vapour: p_i = y_i (p − p_v), y_i the share of the dry gas.
struct DaltonsLaw {
  static constexpr LawInfo<3> info{
      "Dalton's law over a vapour", "p_i = y_i (p - p_v)", {"y_i", "p", "p_v"}, "p_i"};
  Pressure operator()(Fraction share, Pressure p, Pressure vapour) const {
    return share * (p - vapour);
  }
};

/// f = φ p_i.
struct Fugacity {
  static constexpr LawInfo<2> info{"fugacity", "f = phi p_i", {"phi", "p_i"}, "f"};
  Pressure operator()(Fraction phi, Pressure partial) const { return phi * partial; }
};

/// n = (p − p_v) V/(Z R T), the amount of dry gas in a headspace.
struct GasInHeadspace {
  GasConstant r{};

  static constexpr LawInfo<5> info{
      "gas in the headspace", "n = (p - p_v) V_H/(Z R T)", {"p", "p_v", "V_H", "Z", "T"}, "n"};
  Amount operator()(Pressure p, Pressure vapour, Volume v, Fraction z, Temperature t) const;
};

}  // namespace capsigh
