// Carbonation by fermentation: sugar to ethanol and CO2 (Gay-Lussac).
//
//   C12H22O11 + H2O → 4 C2H5OH + 4 CO2        C6H12O6 → 2 C2H5OH + 2 CO2
//
// Per gram: sucrose and maltose 0.5143, glucose and fructose 0.4886, glucose monohydrate 0.4442.
#pragma once

#include "capsigh/constants/cited.hpp"

namespace capsigh {

/// Mass of CO2 per mass of sugar as it is weighed in: n M_CO2/(M_sugar + w M_water), n molecules of
/// CO2 from one formula unit (record conditioning.*), w its water of crystallisation.
struct CarbonDioxideOfSugar {
  double carbon_dioxide = 0;  ///< n
  double water = 0;           ///< w

  static constexpr LawInfo<3> info{
      "CO2 of a gram of sugar", "s = n M/(M_sugar + w M_water)", {"M", "M_sugar", "M_water"}, "s"};
  Fraction operator()(MolarMass gas, MolarMass sugar, MolarMass water_mass) const {
    return carbon_dioxide * gas / (sugar + water * water_mass);
  }
};

/// CO2 produced by a dose of sugar, both per degassed litre at 20 °C. An identity.
struct ProducedCarbonDioxide {
  static constexpr LawInfo<3> info{
      "CO2 produced", "gamma_p = dose s yield", {"dose", "s", "yield"}, "gamma_p"};
  MassConcentration operator()(MassConcentration dose, Fraction per_sugar, Fraction yield) const {
    return dose * per_sugar * yield;
  }
};

/// The dose that produces that much. An identity.
struct DoseOfSugar {
  static constexpr LawInfo<3> info{
      "dose of sugar", "dose = gamma_p/(s yield)", {"gamma_p", "s", "yield"}, "dose"};
  MassConcentration operator()(MassConcentration produced, Fraction per_sugar,
                               Fraction yield) const {
    return produced / (per_sugar * yield);
  }
};

/// Ethanol that comes with the CO2, as a share of volume at 20 °C: molecule for molecule.
struct EthanolAdded {
  static constexpr LawInfo<4> info{
      "alcohol added", "phi = gamma_p (M_e/M)/rho_e", {"gamma_p", "M_e", "M", "rho_e"}, "phi"};
  Fraction operator()(MassConcentration produced, MolarMass ethanol, MolarMass gas,
                      MassDensity density) const {
    return produced * (ethanol / gas) / density;
  }
};

}  // namespace capsigh
