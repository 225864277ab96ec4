// Heat of dissolving gas in a liquid, from the same Henry's constants as its content.
#pragma once

#include "capsigh/balance/medium.hpp"
#include "capsigh/models/warming.hpp"

namespace capsigh {

/// Enthalpy of solution of a gas in the liquid at T, J/mol, negative where dissolving warms.
/// `spread` is the doubt of that derivative beside the constant's own.
MolarEnergy enthalpy_of_solution(Trace* trace, const Medium& medium, const Liquid& liquid,
                                 Temperature t, std::size_t gas, const RecordDoubt& spread);

/// Heat capacities of what a drink is made of.
struct HeatCapacities {
  CitedConstant<SpecificHeat> water;
  CitedConstant<SpecificHeat> ethanol;
  CitedConstant<SpecificHeat> solids;
};

/// Heat capacity of the degassed liquid, parts by mass.
SpecificHeat heat_capacity(Trace* trace, const Liquid& liquid, const HeatCapacities& parts);

}  // namespace capsigh
