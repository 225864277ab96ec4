// When bubbles form: supersaturation, and the size of the nuclei that grow.
#pragma once

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/thermal.hpp"

namespace capsigh {

/// Surface tension of water against its vapour: σ = B θ^μ (1 + b θ), θ = 1 − T/Tc. Source: IAPWS
/// R1-76 (record surface_tension.water), −25 °C (extrapolated) to the critical point. Worked value:
/// 20 °C: 72.74 mN/m.
struct WaterSurfaceTension {
  double b0 = 0;  ///< N/m
  double mu = 0;
  double b = 0;
  Temperature critical_temperature;

  static constexpr LawInfo<1> info{
      "surface tension of water", "sigma = B theta^mu (1 + b theta)", {"T"}, "sigma"};
  static WaterSurfaceTension from(const Record& record);
  SurfaceTension operator()(Temperature t) const;
};

/// S = b/b_eq: content over what the liquid holds under pure CO2 at ambient pressure.
struct Supersaturation {
  static constexpr LawInfo<2> info{"supersaturation", "S = b/b_eq", {"b", "b_eq"}, "S"};
  Fraction operator()(Molality b, Molality equilibrium) const { return b / equilibrium; }
};

/// Radius of the gas nucleus from which on it grows: r = 2σ/((S − 1)(p_amb − p_v)) (Laplace, with
/// Henry's law linear in pressure). Only where S > 1. Worked value: S 5, 72.7 mN/m, 1 bar: 0.37 µm.
struct NucleusRadius {
  static constexpr LawInfo<4> info{"radius of a nucleus that grows",
                                   "r = 2 sigma/((S - 1)(p_amb - p_v))",
                                   {"sigma", "S", "p_amb", "p_v"},
                                   "r"};
  Length operator()(SurfaceTension sigma, Fraction s, Pressure ambient, Pressure vapour) const {
    return 2.0 * sigma / ((s - Fraction(1.0)) * (ambient - vapour));
  }
};

}  // namespace capsigh
