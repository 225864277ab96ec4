// Ambient pressure from altitude: the standard troposphere.
//
//   p = p0 (1 − L h/T0)^(g/(R_air L))
//
// Source: ISO 2533 (record atmosphere.iso2533), a definition and therefore exact; the weather is
// not. Range −2 to 11 km; at and above T0/L = 44.3 km the result is zero. Worked value: 1000 m
// gives 898.7 hPa.
#pragma once

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

struct StandardAtmosphere {
  Pressure sea_level{};
  double temperature = 0;  ///< T0, K
  double lapse_rate = 0;   ///< L, K/m
  double exponent = 0;     ///< g/(R_air L)

  static constexpr LawInfo<1> info{
      "standard atmosphere (ISO 2533)", "p = p0 (1 - L h/T0)^(g/(R L))", {"h"}, "p_amb"};
  static StandardAtmosphere from(const Record& record);
  Pressure operator()(Length altitude) const;
};

/// A gauge reading as an absolute pressure. An identity.
struct GaugeToAbsolute {
  static constexpr LawInfo<2> info{
      "gauge to absolute pressure", "p = p_gauge + p_amb", {"p_gauge", "p_amb"}, "p"};
  Pressure operator()(GaugePressure reading, Pressure ambient) const {
    return absolute(reading, ambient);
  }
};

/// An absolute pressure as a gauge would read it. An identity.
struct AbsoluteToGauge {
  static constexpr LawInfo<2> info{
      "absolute to gauge pressure", "p_gauge = p - p_amb", {"p", "p_amb"}, "p_gauge"};
  GaugePressure operator()(Pressure pressure, Pressure ambient) const {
    return gauge(pressure, ambient);
  }
};

}  // namespace capsigh
