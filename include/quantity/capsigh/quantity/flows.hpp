// Quantities per time, and areas: what vessels, rooms and lines compute with.
#pragma once

#include <boost/units/systems/si/area.hpp>

#include "capsigh/quantity/units.hpp"

namespace capsigh {

using MassFlow = Quantity<detail::Per<si::mass, si::time>>;       ///< kg/s
using AmountFlow = Quantity<detail::Per<si::amount, si::time>>;   ///< mol/s
using VolumeFlow = Quantity<detail::Per<si::volume, si::time>>;   ///< m³/s
using Rate = Quantity<detail::Per<si::dimensionless, si::time>>;  ///< 1/s
using Area = Quantity<si::area>;                                  ///< m²

template <>
inline constexpr std::string_view si_symbol<MassFlow> = "kg/s";
template <>
inline constexpr std::string_view si_symbol<AmountFlow> = "mol/s";
// The symbol of VolumeFlow stands in units.hpp: Transmission is the same type.
template <>
inline constexpr std::string_view si_symbol<Rate> = "1/s";
template <>
inline constexpr std::string_view si_symbol<Area> = "m2";

}  // namespace capsigh
