// Henry's constants of a gas in pure water, k(T): amount dissolved per volume of water at T and per
// fugacity of the gas, mol/(m³ Pa), at infinite dilution. One type a published form.
//
// Every form takes the water's own state at T explicitly, because the printed constants refer to
// mass, mole fraction or vapour pressure: WaterAt{T, density, vapour pressure}.
#pragma once

#include <array>
#include <variant>

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// ln K0 = A1 + A2 (100 K/T) + A3 ln(T/100 K), K0 in mol/(kg atm); k = K0 ρ_w.
/// Source: Weiss 1974 (CO2). Worked value: 0 °C gives K0 = 0.07758 mol/(kg atm).
struct ThreeTermHenry {
  std::array<double, 3> a{};
  double factor = 1;  ///< SI value of 1 mol/(kg atm)

  static constexpr LawInfo<3> info{"Henry's constant, three-term",
                                   "k = rho_w exp(A1 + A2 (100/T) + A3 ln(T/100))",
                                   {"T", "rho_w", "p_v*"},
                                   "k"};
  HenryConstant operator()(Temperature t, MassDensity water, Pressure vapour) const;
  /// K0 itself, for tables per kilogram.
  [[nodiscard]] MolalHenryConstant per_mass(Temperature t) const;
};

/// What salinity S (g/kg) adds to ln K0 of the three-term form: S (B1 + B2 T/100 + B3 (T/100)²).
/// Source: Weiss 1974 (CO2 in seawater, record henry.CO2.weiss1974_salinity), S 0–40. Worked value:
/// S = 35, 20 °C: K0 goes from 0.03916 to 0.03241 mol/(kg atm).
struct SalinityOnHenry {
  std::array<double, 3> b{};
  /// Change of ln K0; S in grams per kilogram.
  [[nodiscard]] double ln_change(Temperature t, double salinity) const {
    const double hundreds = t.kelvin() / 100.0;
    return salinity * (b[0] + (b[1] + b[2] * hundreds) * hundreds);
  }
};

/// ln(kH/Pa) = a0 + a1/T + a2/T², kH fugacity per mole fraction; k = ρ_w/(M_w kH).
/// Source: Rettich, Battino & Wilhelm (N2, O2, Ar). Worked value: N2 at 298.15 K, kH = 8.60514 GPa.
struct InversePowersHenry {
  std::array<double, 3> a{};
  double factor = 1;  ///< SI value of the printed unit of kH
  MolarMass water_molar_mass{};

  static constexpr LawInfo<3> info{"Henry's constant, inverse powers of T",
                                   "k = rho_w / (M_w exp(a0 + a1/T + a2/T^2))",
                                   {"T", "rho_w", "p_v*"},
                                   "k"};
  HenryConstant operator()(Temperature t, MassDensity water, Pressure vapour) const;
  [[nodiscard]] Pressure per_mole_fraction(Temperature t) const;
};

/// ln(kH/p1*) = A/Tr + B τ^0.355/Tr + C Tr^−0.41 e^τ, Tr = T/Tc, τ = 1 − Tr, p1* the vapour
/// pressure of water; k = ρ_w/(M_w kH). Source: IAPWS G7-04. Worked value: He at 300 K, ln(kH/GPa)
/// = 2.6576.
struct HighTemperatureHenry {
  std::array<double, 3> a{};
  Temperature critical_temperature;
  MolarMass water_molar_mass{};

  static constexpr LawInfo<3> info{
      "Henry's constant, high-temperature form",
      "k = rho_w / (M_w p_v* exp(A/Tr + B tau^0.355/Tr + C Tr^-0.41 exp(tau)))",
      {"T", "rho_w", "p_v*"},
      "k"};
  HenryConstant operator()(Temperature t, MassDensity water, Pressure vapour) const;
  [[nodiscard]] Pressure per_mole_fraction(Temperature t, Pressure vapour) const;
};

/// ln x1 = A + B/θ + C ln θ + D θ, x1 the mole fraction dissolved under 101.325 kPa of the gas's
/// partial pressure, θ = T/100 K (IUPAC, CRC) or T/K (the CO and H2S sets); k = ρ_w x1/((1 − x1)
/// M_w · 101.325 kPa), per *partial pressure*. Worked value: He at 298.15 K, x1 = 6.997e−6.
struct MoleFractionHenry {
  std::array<double, 4> a{};
  double theta = 100;  ///< K, the unit in which the form counts T
  MolarMass water_molar_mass{};
  Pressure partial_pressure{};  ///< 101.325 kPa

  static constexpr LawInfo<3> info{
      "Henry's constant, mole fraction at 1 atm",
      "k = rho_w x/((1 - x) M_w 1 atm), ln x = A + B/theta + C ln theta + D theta",
      {"T", "rho_w", "p_v*"},
      "k"};
  HenryConstant operator()(Temperature t, MassDensity water, Pressure vapour) const;
  [[nodiscard]] double mole_fraction(Temperature t) const;
};

/// k = k° exp(D (1/T − 1/298.15 K)): van 't Hoff with a constant enthalpy of solution −D R. Source:
/// Sander's compilation. `scale` makes it meet a better record where it takes over from one.
struct TwoTermHenry {
  double k0 = 0;  ///< in the printed unit
  double d = 0;   ///< K
  double factor = 1;
  double scale = 1;
  static constexpr double reference_temperature = 298.15;  ///< K, part of the form

  static constexpr LawInfo<3> info{"Henry's constant, two-term van 't Hoff",
                                   "k = k0 exp(D (1/T - 1/298.15))",
                                   {"T", "rho_w", "p_v*"},
                                   "k"};
  HenryConstant operator()(Temperature t, MassDensity water, Pressure vapour) const;
};

using HenryForm = std::variant<ThreeTermHenry, InversePowersHenry, HighTemperatureHenry,
                               MoleFractionHenry, TwoTermHenry>;

/// A constant per partial pressure as one per fugacity: k = k_p/φ, φ at the pressure it was taken
/// at.
struct PartialToFugacity {
  static constexpr LawInfo<2> info{
      "Henry's constant per fugacity", "k = k_p / phi(1 atm)", {"k_p", "phi"}, "k"};
  HenryConstant operator()(HenryConstant per_partial, Fraction phi) const {
    return per_partial / phi;
  }
};

/// Enthalpy of solution: ΔH = −R d ln k/d(1/T), J/mol, from two temperatures close to each other.
struct EnthalpyOfSolution {
  GasConstant r{};
  MolarEnergy operator()(HenryConstant k_cold, Temperature cold, HenryConstant k_warm,
                         Temperature warm) const;
};

/// The total pressure at which a Henry's constant was taken.
enum class HenryReference { one_atmosphere, vapour_pressure };

/// Smoothstep s²(3 − 2s) of where x lies between from and to: 0 below, 1 above. Its slope is zero
/// at both ends, so that an enthalpy of solution does not jump where one record takes over.
double smoothstep(double x, double from, double to);

/// Two neighbours' constants joined: k = k1^(1−w) k2^w. An identity; w by smoothstep of T.
struct JoinedHenry {
  static constexpr LawInfo<3> info{"Henry's constant between two records",
                                   "ln k = (1 - w) ln k1 + w ln k2",
                                   {"k1", "k2", "w"},
                                   "k"};
  HenryConstant operator()(HenryConstant first, HenryConstant second, Fraction weight) const;
};

/// k moved from its reference pressure to p: k(T, p) = k(T) exp(−v̄ (p − p_ref)/(R T)), v̄ the
/// partial molar volume of the dissolved gas (Krichevsky & Kasarnovsky).
struct PressureOnHenry {
  GasConstant r{};

  static constexpr LawInfo<5> info{"pressure on Henry's constant",
                                   "k(p) = k exp(-v (p - p_ref)/(R T))",
                                   {"k", "v", "p", "p_ref", "T"},
                                   "k"};
  HenryConstant operator()(HenryConstant k, MolarVolume v, Pressure p, Pressure reference,
                           Temperature t) const;
};

/// Henry's law: b = k f/ρ, amount dissolved per mass of degassed liquid of density ρ at T.
struct HenrysLaw {
  static constexpr LawInfo<3> info{"Henry's law", "b = k f / rho", {"k", "f", "rho"}, "b"};
  Molality operator()(HenryConstant k, Pressure fugacity, MassDensity liquid) const {
    return k * fugacity / liquid;
  }
};

}  // namespace capsigh
