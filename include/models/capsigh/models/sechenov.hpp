// Salting out: what dissolved salts and organics take from a gas's solubility.
//
//   log10(k_w/k) = Σ_ions (h_i + h_G,0 + h_T (T − 298.15 K)) c_i + Σ_organics K_o c_o
//
// k per volume of solution at T, c in mol per litre of solution at 20 °C. Sources: Weisenberger &
// Schumpe 1996 for ions; see the records sechenov.* and organic.* for the rest. Range 0–90 °C, ions
// to about 2 mol/L; the uncertainty grows with c. With no solute the factor is 1. Worked value: CO2
// in 1 mol/L NaCl at 298.15 K: 0.1143 + 0.0318 − 2·0.0172 = 0.1117, factor 0.773.
#pragma once

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// h_G(T) = h_G,0 + h_T (T − 298.15 K), the gas's part of an ion's Sechenov constant, m³/mol.
struct GasSalting {
  double h0 = 0;                                           ///< in the printed unit
  double slope = 0;                                        ///< per K
  double factor = 1;                                       ///< SI value of the printed unit
  static constexpr double reference_temperature = 298.15;  ///< K, part of the form

  static constexpr LawInfo<1> info{
      "Sechenov parameter of the gas", "h_G = h_G,0 + h_T (T - 298.15)", {"T"}, "h_G"};
  MolarVolume operator()(Temperature t) const {
    return from_si<MolarVolume>(factor * (h0 + slope * (t.kelvin() - reference_temperature)));
  }
};

/// K(T) = K20 + K' (T − 293.15 K), Sechenov constant of an organic solute, m³/mol.
struct OrganicSalting {
  double k20 = 0;
  double slope = 0;
  double factor = 1;
  static constexpr double reference_temperature = 293.15;  ///< K, part of the form

  static constexpr LawInfo<1> info{
      "Sechenov constant of an organic solute", "K = K20 + K' (T - 293.15)", {"T"}, "K"};
  MolarVolume operator()(Temperature t) const {
    return from_si<MolarVolume>(factor * (k20 + slope * (t.kelvin() - reference_temperature)));
  }
};

/// The exponent as one term: (h_i + h_G) c, or K c. An identity.
struct IonTerm {
  static constexpr LawInfo<3> info{
      "salting out by an ion", "s = (h_i + h_G) c", {"h_i", "h_G", "c"}, "s"};
  Fraction operator()(MolarVolume h_ion, MolarVolume h_gas, AmountConcentration c) const {
    return (h_ion + h_gas) * c;
  }
};
struct OrganicTerm {
  static constexpr LawInfo<2> info{"salting out by an organic", "s = K c", {"K", "c"}, "s"};
  Fraction operator()(MolarVolume k, AmountConcentration c) const { return k * c; }
};

/// Organics take from other gases what they take from CO2 until a source says more. An assumption
/// with its own doubt.
struct OrganicsOfOtherGas {
  static constexpr LawInfo<1> info{
      "organics on a gas other than CO2", "s = s of CO2", {"s_CO2"}, "s"};
  Fraction operator()(Fraction of_co2) const { return of_co2; }
};

/// k = k_w 10^(−Σ s).
struct SechenovEquation {
  static constexpr LawInfo<2> info{
      "Sechenov equation", "k = k_w 10^(-sum s)", {"k_w", "sum s"}, "k"};
  HenryConstant operator()(HenryConstant in_water, Fraction exponent) const;
};

}  // namespace capsigh
