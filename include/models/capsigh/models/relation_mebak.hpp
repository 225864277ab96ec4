// Beer, Central European practice (manometric): CO2 in % by mass.
//
//   w = p_abs exp(a + b/T),  p_abs in bar, w in %
//
// Source: relation quoted with the MEBAK manometric method (record relation.mebak, from memory). p
// is the total absolute pressure. Range 0–25 °C. Worked value: 0 °C, 1 bar: 0.31467 %.
#pragma once

#include "capsigh/constants/record.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

struct MebakRelation {
  double a = 0;
  double b = 0;

  static MebakRelation from(const Record& record);
  /// Mass of CO2 per mass of beer.
  Fraction operator()(Temperature t, Pressure p) const;
};

}  // namespace capsigh
