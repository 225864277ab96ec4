// Where liquid and gas meet: content from temperature and pressure, pressure from temperature and
// content, temperature from pressure and content, all over the one residual content(T, p) − b.
#pragma once

#include <optional>

#include "capsigh/balance/medium.hpp"
#include "capsigh/balance/refusal.hpp"

namespace capsigh {

/// Content of one gas at equilibrium, mol per kg of degassed liquid: Dalton, fugacity, pressure on
/// Henry's constant, Henry; CO2 by the medium's convention where one is in force. Source of each
/// law: its header. `p` is the total absolute pressure.
Molality content(Trace* trace, const Medium& medium, const AtTemperature& at,
                 const GasMixture& mixture, Pressure p, std::size_t gas);

/// Contents of all gases.
Contents contents(const Medium& medium, const AtTemperature& at, const GasMixture& mixture,
                  Pressure p);

/// Liquid above the point of contact; its weight adds ρ g h to the pressure of the headspace.
struct LiquidColumn {
  Length depth{};
  Acceleration gravity{};
};

/// Δp = ρ g h.
struct HydrostaticHead {
  static constexpr LawInfo<2> info{
      "weight of the liquid above", "dp = rho g h", {"rho", "h"}, "dp"};
  Acceleration gravity{};
  Pressure operator()(MassDensity rho, Length depth) const { return rho * gravity * depth; }
};

/// p at depth = p + Δp. An identity.
struct PressureAtDepth {
  static constexpr LawInfo<2> info{
      "pressure at the point of contact", "p = p_head + dp", {"p_head", "dp"}, "p"};
  Pressure operator()(Pressure headspace, Pressure head) const { return headspace + head; }
};

/// Content reached = share of saturation × content at saturation. An identity.
struct ApproachToSaturation {
  static constexpr LawInfo<2> info{"content reached", "b = a b_sat", {"a", "b_sat"}, "b"};
  Molality operator()(Fraction approach, Molality saturated) const { return approach * saturated; }
};

/// The total pressure at which a headspace of this composition holds that content of `gas`.
OrRefusal<Pressure> pressure_for(const Medium& medium, const AtTemperature& at,
                                 const GasMixture& mixture, std::size_t gas, Molality content);

/// The temperature at which it does under that pressure; the coldest where there are two.
OrRefusal<Temperature> temperature_for(const Medium& medium, const Liquid& liquid,
                                       const Shares& shares, Pressure p, std::size_t gas,
                                       Molality content, const LiquidColumn& column = {});

/// A root as a step of a trace: what was solved for, from what. Found by bracketing (TOMS 748).
struct SolvedPressure {
  Pressure root{};
  static constexpr LawInfo<2> info{
      "pressure at which the content is held", "p: b(T, p) = b", {"b", "T"}, "p"};
  Pressure operator()(Molality, Temperature) const { return root; }
};
struct SolvedTemperature {
  Temperature root;
  static constexpr LawInfo<2> info{
      "temperature at which the content is held", "T: b(T, p) = b", {"b", "p"}, "T"};
  Temperature operator()(Molality, Pressure) const { return root; }
};

/// Refuses a pressure at which the liquid boils, CO2 condenses or the gas law has no meaning;
/// nullopt is well.
std::optional<Refusal> pressure_refusal(const Medium& medium, const AtTemperature& at,
                                        const Shares& shares, Pressure p);

}  // namespace capsigh
