// A closed package: what was filled and closed in, and its equilibrium at any temperature.
//
//   n_i = b_i m_L + y_i (p − p_v) V_H/(Z R T),   V_H = V − V_L,   V_L = m_L/ρ(T) + Σ b_i m_L v̄_i
//
// Moles of every gas are conserved; the liquid swells with what it dissolves. One bracketed root
// over p with the shares inside. Check: 330 mL of water of 2.6 vol in 345 mL, closed at 4 °C with
// CO2 in the headspace, stands at 0.775 bar gauge.
#pragma once

#include "capsigh/balance/contact.hpp"

namespace capsigh {

/// What is inside, for good.
struct Filling {
  Volume brimful{};
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
  Volume brimful{};
  Amount nitrogen_dose{};  ///< liquid nitrogen present at closing, all of it counted
  std::size_t nitrogen = kMaxGases;
};

/// Volume of carbonated liquid at closing, however it was given.
Volume liquid_volume(const Medium& medium, const AtTemperature& at, const Closing& closing);

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

OrRefusal<ClosedState> equilibrium(const Medium& medium, const Liquid& liquid,
                                   const Filling& filling, Temperature t);

/// Amount of dry gas over the liquid at the state's composition under `p`.
Amount gas_in_headspace(Trace* trace, const Medium& medium, const ClosedState& state, Pressure p);

}  // namespace capsigh
