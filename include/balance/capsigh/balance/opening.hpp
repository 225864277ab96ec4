// Opening a package: three losses, each an increment, none below zero, none counted twice.
//
//   headspace  what leaves at once: dry gas above what stays at ambient pressure (isothermal)
//   fizz       content minus equilibrium with pure CO2 at ambient: what can leave as bubbles
//   flat       from there to equilibrium with room air, and the gas that stayed in the headspace,
//              which air replaces in the end
//
// Checks: the reference can of closed_container.hpp at 4 °C loses 0.023 g, 0.722 g and 0.977 g of
// CO2, of which 0.029 g is headspace gas that stays.
#pragma once

#include <algorithm>

#include "capsigh/balance/closed_container.hpp"

namespace capsigh {

/// m = M (n − n_stay), not below zero.
struct HeadspaceLoss {
  static constexpr LawInfo<3> info{
      "headspace loss on opening", "m_head = M max(n - n_stay, 0)", {"n", "n_stay", "M"}, "m_head"};
  Mass operator()(Amount n, Amount stays, MolarMass m) const {
    return std::max(n - stays, Amount{}) * m;
  }
};

/// m = M m_L (b − b_eq), not below zero.
struct FizzLoss {
  static constexpr LawInfo<4> info{
      "fizz loss", "m_fizz = M m_L max(b - b_eq, 0)", {"b", "b_eq", "m_L", "M"}, "m_fizz"};
  Mass operator()(Molality b, Molality saturated, Mass liquid, MolarMass m) const {
    return std::max(b - saturated, Molality{}) * liquid * m;
  }
};

/// m = M (m_L max(min(b, b_eq) − b_air, 0) + max(n_stay − n_air, 0)).
struct FlatLoss {
  static constexpr LawInfo<7> info{
      "flat loss",
      "m_flat = M (m_L max(min(b, b_eq) - b_air, 0) + max(n_stay - n_air, 0))",
      {"b", "b_eq", "b_air", "m_L", "n_stay", "n_air", "M"},
      "m_flat"};
  Mass operator()(Molality b, Molality saturated, Molality with_air, Mass liquid, Amount stays,
                  Amount air, MolarMass m) const {
    const Amount from_liquid = std::max(std::min(b, saturated) - with_air, Molality{}) * liquid;
    const Amount from_headspace = std::max(stays - air, Amount{});
    return (from_liquid + from_headspace) * m;
  }
};

/// What lies open: liquid with its contents, and the headspace over it (none: no volume).
struct Opened {
  Mass liquid{};
  Contents contents;
  AtTemperature at;
  Volume headspace{};           ///< once the container has relaxed
  PerGas<Amount> in_headspace;  ///< before
  PerGas<Amount> stays;         ///< at ambient pressure, same composition
  PerGas<Amount> as_air;        ///< of each gas once air has replaced what stayed
};

/// Opens a closed package under `ambient`; `air` is the dry composition of the room.
Opened open_package(const Medium& medium, const Filling& filling, const ClosedState& state,
                    Pressure ambient, const Shares& air);

/// Liquid of known content without a container: `liquid` of it, no headspace.
Opened open_liquid(const Medium& medium, const AtTemperature& at, const Contents& contents,
                   Mass liquid);

/// The three losses of one gas. Only CO2 bubbles: it alone makes its own atmosphere in the liquid;
/// any other gas has no fizz loss and goes flat against the air from its content.
Mass headspace_loss(Trace* trace, const Medium& medium, const Opened& opened, std::size_t gas);
Mass fizz_loss(Trace* trace, const Medium& medium, const Opened& opened, Pressure ambient,
               std::size_t gas);
Mass flat_loss(Trace* trace, const Medium& medium, const Opened& opened, Pressure ambient,
               const Shares& air, std::size_t gas, bool bubbles);

}  // namespace capsigh
