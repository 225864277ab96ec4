// Wine, cider, perry: CO2 from the pressure in the bottle, official formula at 20 °C.
//
//   c = k p_abs (a − b A)(1 − s S),  c in g/L, p in Pa, A in % vol, S in g/L of sugar
//
// Source: Reg. (EEC) 2676/90, annex ch. 37 = OIV-MA-AS314 (record relation.oiv). Other temperatures
// by van 't Hoff with ΔH of the same record (from memory). Range 0–25 °C, A 0–20 % vol, S 0–150
// g/L. Worked value: 12.5 % vol, dry, 20 °C, 1 bar: 1.434 g/L.
#pragma once

#include "capsigh/constants/record.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

struct OivRelation {
  double k = 0;
  double a = 0;
  double b = 0;
  double s = 0;
  double enthalpy = 0;               ///< J/mol
  double reference_temperature = 0;  ///< K
  GasConstant r{};

  static OivRelation from(const Record& record, GasConstant r);
  /// Mass of CO2 per volume of wine.
  MassConcentration operator()(Temperature t, Pressure p, Fraction ethanol_by_volume,
                               MassConcentration sugar) const;
};

}  // namespace capsigh
