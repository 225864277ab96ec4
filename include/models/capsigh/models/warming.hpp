// Heat that gas brings to a liquid when it dissolves.
#pragma once

#include "capsigh/models/henry.hpp"
#include "capsigh/quantity/thermal.hpp"

namespace capsigh {

/// Enthalpy of solution by van 't Hoff, ΔH = −R d ln(k/ρ)/d(1/T), from the Henry's constant in
/// force at two temperatures to either side of T. Worked value: CO2 in water, 25 °C: −19.8 kJ/mol.
struct VanTHoffEnthalpy {
  GasConstant r{};
  static constexpr LawInfo<4> info{"enthalpy of solution (van 't Hoff)",
                                   "dH = -R ln(K1/K2)/(1/T1 - 1/T2), K = k/rho",
                                   {"K1", "T1", "K2", "T2"},
                                   "dH"};
  MolarEnergy operator()(MolalHenryConstant cold_k, Temperature cold, MolalHenryConstant warm_k,
                         Temperature warm) const;
};

/// Heat capacity of a drink, parts by mass: c = w_w c_w + w_e c_e + w_s c_s.
struct DrinkHeatCapacity {
  Fraction water{};
  Fraction ethanol{};
  Fraction solids{};
  static constexpr LawInfo<3> info{
      "heat capacity of the liquid", "c = w_w c_w + w_e c_e + w_s c_s", {"c_w", "c_e", "c_s"}, "c"};
  SpecificHeat operator()(SpecificHeat of_water, SpecificHeat of_ethanol,
                          SpecificHeat of_solids) const {
    return water * of_water + ethanol * of_ethanol + solids * of_solids;
  }
};

/// Warming of the liquid by what it takes up, without cooling: ΔT = −ΔH (b − b_in)/c. Worked value:
/// 5.5 g/L of CO2 in water, −19.8 kJ/mol: 0.59 K.
struct WarmingOfLiquid {
  static constexpr LawInfo<4> info{
      "warming by dissolving gas", "dT = -dH (b - b_in)/c", {"dH", "b", "b_in", "c"}, "dT"};
  TemperatureDifference operator()(MolarEnergy enthalpy, Molality b, Molality incoming,
                                   SpecificHeat c) const {
    return -enthalpy * (b - incoming) / c;
  }
};

}  // namespace capsigh
