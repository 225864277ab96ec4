#include "capsigh/balance/supply.hpp"

namespace capsigh {

MolarEnergy enthalpy_of_solution(Trace* trace, const Medium& m, const Liquid& liquid, Temperature t,
                                 std::size_t gas, const RecordDoubt& spread) {
  // Half a kelvin to either side: the curvature of ln k costs less than 1e-5 of the slope.
  const auto step = from_si<TemperatureDifference>(0.5);
  const auto cold = at_temperature(m, liquid, t - step);
  const auto warm = at_temperature(m, liquid, t + step);
  return apply(trace, spread, VanTHoffEnthalpy{m.r}, cold.k[gas] / cold.density, cold.t,
               warm.k[gas] / warm.density, warm.t);
}

SpecificHeat heat_capacity(Trace* trace, const Liquid& liquid, const HeatCapacities& parts) {
  const Fraction pair(liquid.pair_mass / liquid.density.value());
  const Fraction ethanol = pair * liquid.ethanol_in_pair;
  const auto mixed = DrinkHeatCapacity{pair - ethanol, ethanol, Fraction(1.0) - pair};
  // A part that is not there brings neither heat nor doubt.
  const auto of = [&](const CitedConstant<SpecificHeat>& part, Fraction share) {
    constexpr double nothing = 1e-9;  // rounding of a sum of masses
    return part.at(share.value() > nothing ? trace : nullptr);
  };
  return apply(trace, mixed, of(parts.water, mixed.water), of(parts.ethanol, mixed.ethanol),
               of(parts.solids, mixed.solids));
}

}  // namespace capsigh
