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

/// Vapour pressure of pure ethanol: log10(p/Pa) = A − B/(T + C). Source: Antoine constants of the
/// record vapour.ethanol, 276–370 K. Worked value: 20 °C gives 5861 Pa.
struct EthanolVapourPressure {
  double a = 0;
  double b = 0;
  double c = 0;
  double factor = 1;

  static constexpr LawInfo<1> info{
      "vapour pressure of ethanol", "log10(p_e*) = A - B/(T + C)", {"T"}, "p_e*"};
  Pressure operator()(Temperature t) const;
};

/// Activity coefficients of ethanol–water, van Laar:
///   ln γ_e = A12/(1 + A12 x_e/(A21 x_w))²,  ln γ_w = A21/(1 + A21 x_w/(A12 x_e))²
/// x of the pair alone. Source: Perry's, fitted at 78–100 °C (about 0.3 kPa high when cold). At
/// x_e = 0, γ_w is 1.
struct VanLaar {
  double a12 = 0;
  double a21 = 0;
  [[nodiscard]] double water(double x_ethanol) const;
  [[nodiscard]] double ethanol(double x_ethanol) const;
};

/// Raoult's law with activity: p = x γ p*. An identity; γ is 1 in sugar and salt solutions.
struct RaoultsLaw {
  static constexpr LawInfo<3> info{"Raoult's law", "p = x gamma p*", {"x", "gamma", "p*"}, "p"};
  Pressure operator()(Fraction x, Fraction gamma, Pressure pure) const { return x * gamma * pure; }
};

/// Pressure at which pure CO2 condenses: ln(p/pc) = (Tc/T) Σ a_i τ^n_i, n = 1, 1.5, 2, 4. Source:
/// Span & Wagner 1996, auxiliary equation (record vapour.CO2). Defined below Tc; at and above it
/// nothing condenses and the result is infinite. Worked value: 20 °C gives 57.29 bar.
struct CarbonDioxideVapourPressure {
  std::array<double, 4> a{};
  Temperature critical_temperature;
  Pressure critical_pressure{};
  Pressure operator()(Temperature t) const;
};

}  // namespace capsigh
