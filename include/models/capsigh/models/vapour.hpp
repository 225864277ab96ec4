// Vapour pressure of pure water.
//
//   ln(p/pc) = (Tc/T) (a1 τ + a2 τ^1.5 + a3 τ³ + a4 τ^3.5 + a5 τ⁴ + a6 τ^7.5),  τ = 1 − T/Tc
//
// Source: Wagner & Pruss 2002, eq. 2.5 (record vapour.water). Range 273.15 K to the critical point;
// below, the supercooled liquid is extrapolated (flagged by the record's range). Above Tc the
// result stays at pc. Worked value: 293.15 K gives 2339.194 Pa.
#pragma once

#include <array>

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

struct WaterVapourPressure {
  std::array<double, 6> a{};
  Temperature critical_temperature;
  Pressure critical_pressure;

  static constexpr LawInfo<1> info{
      "vapour pressure of water", "p_v = pc exp((Tc/T) sum a_i tau^n_i)", {"T"}, "p_v"};
  static WaterVapourPressure from(const Record& record);
  Pressure operator()(Temperature t) const;
};

}  // namespace capsigh
