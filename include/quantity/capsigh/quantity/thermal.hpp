// Quantities of heat, surfaces and transfer: what opening and supplying a drink compute with.
#pragma once

#include <boost/units/systems/si/surface_tension.hpp>
#include <boost/units/systems/si/velocity.hpp>

#include "capsigh/quantity/flows.hpp"

namespace capsigh {

using Velocity = Quantity<si::velocity>;               ///< m/s
using SurfaceTension = Quantity<si::surface_tension>;  ///< N/m
/// J/(kg K)
using SpecificHeat = Quantity<detail::Per<si::energy, detail::Times<si::mass, si::temperature>>>;

template <>
inline constexpr std::string_view si_symbol<Velocity> = "m/s";
template <>
inline constexpr std::string_view si_symbol<SurfaceTension> = "N/m";
template <>
inline constexpr std::string_view si_symbol<SpecificHeat> = "J/(kg K)";

}  // namespace capsigh
