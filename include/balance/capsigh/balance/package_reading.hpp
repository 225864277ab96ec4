// What a gauge reads on a pierced package, and what stood in the package before.
//
// Air in the headspace adds its own pressure; little of it dissolves:
//   p_air = p_amb (V_air + V_dead)/(V_H + V_dead + L V_L),   L the Ostwald coefficient of air
// V_air and the dead volume V_dead of the piercer at ambient pressure and the liquid's temperature.
// The dead volume also takes gas from the package; the amount is conserved:
//   b(p0) m + (p0 − p_v) V_H/(Z R T) = b(p1) m + (p1 − p_v) (V_H + V_dead)/(Z R T) − n_dead
// with p1 the pressure read less p_air and n_dead what the piercer brought of the same gas. Amounts
// are those of an ideal dissolved gas at fixed volumes: at 1 mL of air in 330 mL of water with
// 15 mL of headspace +0.05 bar. Range: that of the laws behind b; sources: their headers.
#pragma once

#include "capsigh/balance/bracketing.hpp"
#include "capsigh/balance/medium.hpp"

namespace capsigh {

/// A package at one temperature, as far as a reading needs it.
struct PackageAt {
  Temperature t;
  Pressure vapour{};
  Volume headspace{};
  Volume liquid{};         ///< volume of the carbonated liquid
  Mass degassed{};         ///< mass of the degassed liquid
  Fraction air_ostwald{};  ///< volume of air dissolved per volume of liquid at its pressure
  MolarVolume b_gas{};     ///< second virial coefficient of the gas read
  GasConstant r{};
};

/// Pressure of air in a package with that much of it, at ambient pressure, in all.
struct AirInPackage {
  static constexpr LawInfo<3> info{"pressure of air in a package",
                                   "p_air = p_amb V_air/(V_H + L V_L)",
                                   {"p_amb", "V_air", "V_H + L V_L"},
                                   "p_air"};
  Pressure operator()(Pressure ambient, Volume air, Volume room) const {
    return ambient * (air / room);
  }
};

/// Room that air finds in a package: gas volume, and what the liquid takes of it.
Volume room_for_air(const PackageAt& package, Volume dead);

/// Amount of a gas at its pressure in a volume: p V/(Z R T), Z by the second virial coefficient.
Amount gas_amount(const PackageAt& package, Pressure partial, Volume volume);

/// Amount of the gas read in liquid and gas volume together, at equilibrium at p; `content` gives b
/// at a pressure.
template <class Content>
Amount held(const PackageAt& package, Pressure p, Volume gas_volume, const Content& content) {
  return content(p) * package.degassed + gas_amount(package, p - package.vapour, gas_volume);
}

/// The pressure at which a package with that gas volume holds that amount; nullopt where none below
/// `limit` does.
template <class Content>
std::optional<Pressure> holds(const PackageAt& package, Volume gas_volume, Amount all,
                              Pressure limit, const Content& content) {
  const auto residual = [&](double pascal) {
    return (held(package, from_si<Pressure>(pascal), gas_volume, content) - all).value();
  };
  // At the vapour pressure itself there is no gas.
  const double low = package.vapour.value() * (1.0 + 1e-9);
  const auto root = root_between(residual, low, limit.value());
  if (!root) return std::nullopt;
  return from_si<Pressure>(*root);
}

/// p0 from p1: the pressure at which the package stood before it was pierced. `dead` is the dead
/// volume, `brought` what it held of the gas read.
template <class Content>
std::optional<Pressure> before_piercing(const PackageAt& package, Pressure pierced, Volume dead,
                                        Amount brought, Pressure limit, const Content& content) {
  const Amount all = held(package, pierced, package.headspace + dead, content) - brought;
  return holds(package, package.headspace, all, limit, content);
}

/// p1 from p0, the other way round.
template <class Content>
std::optional<Pressure> after_piercing(const PackageAt& package, Pressure closed, Volume dead,
                                       Amount brought, Pressure limit, const Content& content) {
  const Amount all = held(package, closed, package.headspace, content) + brought;
  return holds(package, package.headspace + dead, all, limit, content);
}

}  // namespace capsigh
