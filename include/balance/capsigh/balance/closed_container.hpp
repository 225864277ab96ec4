// A closed package: what was filled and closed in, and its equilibrium at any temperature.
//
//   n_i = b_i m_L + y_i (p − p_v) V_H/(Z R T),   V_H = V − V_L,   V_L = m_L/ρ(T) + Σ b_i m_L v̄_i,
//   V = V_0 (1 + s p_gauge)
//
// Moles of every gas are conserved; the liquid swells with what it dissolves, the wall stretches
// with the gauge pressure. With K_i the content per partial pressure, each gas needs
//
//   p_i = n_i/(K_i m_L + V_H/(Z R T)),   p = p_v + Σ p_i:
//
// one root over p. Secant steps, the shares brought up to date at each, find it in a few rounds; a
// bracketed root (TOMS 748) stands behind them. Check: 330 mL of water of 2.6 vol in 345 mL, closed
// at 4 °C with CO2 in the headspace, stands at 0.775 bar gauge.
#pragma once

#include "capsigh/balance/contact.hpp"

namespace capsigh {

/// What a container holds: its brimful volume without pressure, and how it grows.
struct Shell {
  Volume brimful{};
  Compliance stretch{};  ///< share of the brimful volume per gauge pressure; 0: rigid
  Pressure ambient{};    ///< that gauge pressure is relative to
};

/// V = V_0 (1 + s p_gauge). A wall that yields for good (creep of PET) grows beyond that.
struct StretchedVolume {
  static constexpr LawInfo<3> info{
      "volume of the stretched container", "V = V0 (1 + s p_g)", {"V0", "s", "p_g"}, "V"};
  Volume operator()(Volume brimful, Compliance stretch, GaugePressure p) const {
    return brimful * (1.0 + (stretch * p.above_ambient()).value());
  }
};
Volume stretched(Trace* trace, const Shell& shell, Pressure p);

/// What is inside, for good.
struct Filling {
  Shell shell;
  Mass liquid{};           ///< degassed
  PerGas<Amount> amounts;  ///< dissolved and gaseous together
};

/// How a package is filled and closed.
struct Closing {
  Temperature temperature;
  Pressure pressure{};  ///< absolute, of the headspace
  Shares headspace;     ///< dry composition over the liquid
  Contents contents;    ///< of the liquid
  Volume fill{};        ///< carbonated liquid at the closing temperature, or ...
  Mass fill_mass{};     ///< carbonated liquid by mass, where above zero
  Shell shell;
  Amount nitrogen_dose{};  ///< liquid nitrogen present at closing, all of it counted
  std::size_t nitrogen = kMaxGases;
};

/// Volume of carbonated liquid at closing, however it was given.
Volume liquid_volume(const Medium& medium, const AtTemperature& at, const Closing& closing);

/// Fills and closes; `at` is the closing temperature.
Filling close(const Medium& medium, const AtTemperature& at, const Closing& closing);
Filling close(const Medium& medium, const Liquid& liquid, const Closing& closing);

/// The package at equilibrium.
struct ClosedState {
  AtTemperature at;
  Pressure pressure{};
  GasMixture mixture;  ///< of the headspace
  Contents contents;
  Volume headspace{};
  Fraction z{};
};

/// The state at T. Refused where the liquid fills the whole container (its state then has no upper
/// bound of pressure), or where the pressure is beyond the gas law.
OrRefusal<ClosedState> equilibrium(const Medium& medium, const Liquid& liquid,
                                   const Filling& filling, Temperature t);

/// The same where the laws at T are known already; `near` is a state to start from.
OrRefusal<ClosedState> equilibrium(const Medium& medium, const Filling& filling,
                                   const AtTemperature& at, const ClosedState* near = nullptr);

/// The temperature above `from` and up to `to` from which on the liquid fills the whole container;
/// nullopt where it does not. nullopt also where the gas law ends before.
std::optional<Temperature> liquid_full_temperature(const Medium& medium, const Liquid& liquid,
                                                   const Filling& filling, Temperature from,
                                                   Temperature to);

/// Amount of dry gas over the liquid at the state's composition under `p`.
Amount gas_in_headspace(Trace* trace, const Medium& medium, const ClosedState& state, Pressure p);

}  // namespace capsigh
