// The dimensions capsigh computes with: Boost.Units SI quantities under short names, so that a
// wrong dimension does not compile. Temperatures are points (class Temperature), their differences
// vectors (TemperatureDifference). Pressure is always absolute; GaugePressure is a type of its own.
#pragma once

#include <boost/units/absolute.hpp>
#include <boost/units/quantity.hpp>
#include <boost/units/systems/si/amount.hpp>
#include <boost/units/systems/si/dimensionless.hpp>
#include <boost/units/systems/si/energy.hpp>
#include <boost/units/systems/si/length.hpp>
#include <boost/units/systems/si/mass.hpp>
#include <boost/units/systems/si/mass_density.hpp>
#include <boost/units/systems/si/pressure.hpp>
#include <boost/units/systems/si/temperature.hpp>
#include <boost/units/systems/si/time.hpp>
#include <boost/units/systems/si/volume.hpp>
#include <compare>
#include <string_view>

namespace capsigh {

namespace si = boost::units::si;
namespace detail {
template <class A, class B>
using Per = typename boost::units::divide_typeof_helper<A, B>::type;
template <class A, class B>
using Times = typename boost::units::multiply_typeof_helper<A, B>::type;
}  // namespace detail

template <class Unit>
using Quantity = boost::units::quantity<Unit, double>;

using AmountConcentrationUnit = detail::Per<si::amount, si::volume>;
using MolalityUnit = detail::Per<si::amount, si::mass>;
using MolarMassUnit = detail::Per<si::mass, si::amount>;
using MolarVolumeUnit = detail::Per<si::volume, si::amount>;
using HenryUnit = detail::Per<AmountConcentrationUnit, si::pressure>;
using MolalHenryUnit = detail::Per<MolalityUnit, si::pressure>;
using GasConstantUnit = detail::Per<si::energy, detail::Times<si::amount, si::temperature>>;
using MolarEnergyUnit = detail::Per<si::energy, si::amount>;
using SpecificVolumeUnit = detail::Per<si::volume, si::mass>;
using AccelerationUnit = detail::Per<detail::Per<si::length, si::time>, si::time>;
using LapseRateUnit = detail::Per<si::temperature, si::length>;
using ComplianceUnit = detail::Per<si::dimensionless, si::pressure>;
using TransmissionUnit = detail::Per<si::volume, si::time>;

using Pressure = Quantity<si::pressure>;  ///< absolute, Pa; also a difference of pressures
using TemperatureDifference = Quantity<si::temperature>;        ///< K, a vector
using Length = Quantity<si::length>;                            ///< m
using Volume = Quantity<si::volume>;                            ///< m³
using Mass = Quantity<si::mass>;                                ///< kg
using Amount = Quantity<si::amount>;                            ///< mol
using Duration = Quantity<si::time>;                            ///< s
using MassDensity = Quantity<si::mass_density>;                 ///< kg/m³
using MassConcentration = MassDensity;                          ///< kg/m³ = g/L
using Fraction = Quantity<si::dimensionless>;                   ///< 1
using AmountConcentration = Quantity<AmountConcentrationUnit>;  ///< mol/m³
using Molality = Quantity<MolalityUnit>;                        ///< mol/kg
using MolarMass = Quantity<MolarMassUnit>;                      ///< kg/mol
using MolarVolume = Quantity<MolarVolumeUnit>;                  ///< m³/mol
using HenryConstant = Quantity<HenryUnit>;                      ///< mol/(m³ Pa)
using MolalHenryConstant = Quantity<MolalHenryUnit>;            ///< mol/(kg Pa)
using GasConstant = Quantity<GasConstantUnit>;                  ///< J/(mol K)
using MolarEnergy = Quantity<MolarEnergyUnit>;                  ///< J/mol
using SpecificVolume = Quantity<SpecificVolumeUnit>;            ///< m³/kg
using Acceleration = Quantity<AccelerationUnit>;                ///< m/s²
using LapseRate = Quantity<LapseRateUnit>;                      ///< K/m
using Compliance = Quantity<ComplianceUnit>;                    ///< 1/Pa, growth of a container
/// Gas through a wall, m³/s of it at 0 °C and 101.325 kPa.
using Transmission = Quantity<TransmissionUnit>;

/// A quantity from its number in SI base units; the only door from plain doubles.
template <class Q>
constexpr Q from_si(double value) {
  return Q::from_value(value);
}

/// A temperature on the thermodynamic scale: a point, K. Two points make a difference; a point
/// cannot be scaled or added to another.
class Temperature {
 public:
  using Point = boost::units::quantity<boost::units::absolute<si::temperature>, double>;

  constexpr Temperature() = default;
  constexpr explicit Temperature(Point point) : point_(point) {}
  static constexpr Temperature from_value(double kelvin) {
    return Temperature(Point::from_value(kelvin));
  }
  [[nodiscard]] constexpr double kelvin() const { return point_.value(); }

  friend constexpr Temperature operator+(Temperature t, TemperatureDifference d) {
    return from_value(t.kelvin() + d.value());
  }
  friend constexpr Temperature operator-(Temperature t, TemperatureDifference d) {
    return from_value(t.kelvin() - d.value());
  }
  friend constexpr TemperatureDifference operator-(Temperature a, Temperature b) {
    return TemperatureDifference::from_value(a.kelvin() - b.kelvin());
  }
  friend constexpr bool operator==(Temperature a, Temperature b) {
    return a.kelvin() == b.kelvin();
  }
  friend constexpr auto operator<=>(Temperature a, Temperature b) {
    return a.kelvin() <=> b.kelvin();
  }

 private:
  Point point_;
};

/// A pressure read against the ambient of its place: may be negative, cannot be mixed up with an
/// absolute one. `absolute(gauge, ambient)` and `gauge(pressure, ambient)` are the only bridges.
class GaugePressure {
 public:
  constexpr GaugePressure() = default;
  constexpr explicit GaugePressure(Pressure above_ambient) : above_ambient_(above_ambient) {}
  static constexpr GaugePressure from_value(double pascal) {
    return GaugePressure(Pressure::from_value(pascal));
  }
  [[nodiscard]] constexpr Pressure above_ambient() const { return above_ambient_; }

  friend constexpr GaugePressure operator+(GaugePressure g, Pressure d) {
    return GaugePressure(g.above_ambient_ + d);
  }
  friend constexpr GaugePressure operator-(GaugePressure g, Pressure d) {
    return GaugePressure(g.above_ambient_ - d);
  }
  friend constexpr Pressure operator-(GaugePressure a, GaugePressure b) {
    return a.above_ambient_ - b.above_ambient_;
  }
  friend constexpr bool operator==(GaugePressure a, GaugePressure b) {
    return a.above_ambient_.value() == b.above_ambient_.value();
  }
  friend constexpr auto operator<=>(GaugePressure a, GaugePressure b) {
    return a.above_ambient_.value() <=> b.above_ambient_.value();
  }

 private:
  Pressure above_ambient_;
};

constexpr Pressure absolute(GaugePressure reading, Pressure ambient) {
  return ambient + reading.above_ambient();
}
constexpr GaugePressure gauge(Pressure pressure, Pressure ambient) {
  return GaugePressure(pressure - ambient);
}

/// What lies between two values of Q: a difference of points, the quantity itself for vectors.
template <class Q>
using Difference = decltype(Q{} - Q{});

/// The number of a quantity in SI base units, for traces, doubts and tables.
template <class Unit>
constexpr double si_value(const Quantity<Unit>& q) {
  return q.value();
}
constexpr double si_value(Temperature t) { return t.kelvin(); }
constexpr double si_value(GaugePressure p) { return p.above_ambient().value(); }

/// The SI unit of a quantity type as text.
template <class Q>
inline constexpr std::string_view si_symbol = "1";
template <>
inline constexpr std::string_view si_symbol<Pressure> = "Pa";
template <>
inline constexpr std::string_view si_symbol<GaugePressure> = "Pa gauge";
template <>
inline constexpr std::string_view si_symbol<Temperature> = "K";
template <>
inline constexpr std::string_view si_symbol<TemperatureDifference> = "K";
template <>
inline constexpr std::string_view si_symbol<Length> = "m";
template <>
inline constexpr std::string_view si_symbol<Volume> = "m3";
template <>
inline constexpr std::string_view si_symbol<Mass> = "kg";
template <>
inline constexpr std::string_view si_symbol<Amount> = "mol";
template <>
inline constexpr std::string_view si_symbol<MassDensity> = "kg/m3";
template <>
inline constexpr std::string_view si_symbol<AmountConcentration> = "mol/m3";
template <>
inline constexpr std::string_view si_symbol<Molality> = "mol/kg";
template <>
inline constexpr std::string_view si_symbol<MolarMass> = "kg/mol";
template <>
inline constexpr std::string_view si_symbol<MolarVolume> = "m3/mol";
template <>
inline constexpr std::string_view si_symbol<HenryConstant> = "mol/(m3 Pa)";
template <>
inline constexpr std::string_view si_symbol<MolalHenryConstant> = "mol/(kg Pa)";
template <>
inline constexpr std::string_view si_symbol<SpecificVolume> = "m3/kg";
template <>
inline constexpr std::string_view si_symbol<Compliance> = "1/Pa";
template <>
inline constexpr std::string_view si_symbol<Transmission> = "m3/s";
template <>
inline constexpr std::string_view si_symbol<MolarEnergy> = "J/mol";
template <>
inline constexpr std::string_view si_symbol<Duration> = "s";

}  // namespace capsigh
