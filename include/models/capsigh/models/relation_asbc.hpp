// Beer, American practice: volumes of CO2 from temperature and pressure.
//
//   vol = p_abs (a + b exp(−(t − 32)/c)) − d,  p_abs in psi, t in °F
//
// Published regression of the table of ASBC Methods of Analysis, Beer-13 (record relation.asbc,
// from memory). p is the total absolute pressure over the beer with a CO2 headspace. Range 0–25 °C,
// 0–30 psi gauge. Behind the table stands a "standard beer" of 4.22 % w/w ethanol and 5.78 °P
// (Speers & MacIntosh 2013). Worked value: 32 °F, 0 psig (14.695 psi): 1.588 vol.
#pragma once

#include "capsigh/constants/record.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

struct AsbcRelation {
  double a = 0;
  double b = 0;
  double c = 0;
  double d = 0;

  static AsbcRelation from(const Record& record);
  /// Volumes of gas per volume of beer.
  Fraction operator()(Temperature t, Pressure p) const;
};

}  // namespace capsigh
