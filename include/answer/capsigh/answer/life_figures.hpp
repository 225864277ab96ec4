// Figures on the life of a package: what happens once it is open, conditioning, supply.
#pragma once

#include <boost/container/static_vector.hpp>

#include "capsigh/answer/figure.hpp"
#include "capsigh/answer/life_case.hpp"
#include "capsigh/quantity/thermal.hpp"

namespace capsigh {

/// The open drink at one moment.
struct MomentFigures {
  Figure<Duration> after;
  PerGas<GasFigures> gases;  ///< dissolved
  Figure<Mass> lost;         ///< CO2 since opening, headspace included
};

/// One of the three losses of CO2 beside its mass.
struct LossShare {
  Figure<Fraction> share;    ///< of all CO2 that was inside
  Figure<Fraction> volumes;  ///< per volume of degassed liquid
};

struct OpenedFigures {
  Figure<Mass> total;  ///< CO2 inside before opening
  LossShare headspace;
  LossShare fizz;
  LossShare flat;
  Figure<Temperature> cold_gas;  ///< the coldest the headspace gas becomes
  Figure<Fraction> dry_ice;      ///< CO2 in it over what dry ice holds: above 1, dry ice forms
  Figure<Fraction> supersaturation;
  Figure<Length> nucleus;
  Figure<Duration> half_life;
  Figure<Duration> fizz_until;
  boost::container::static_vector<MomentFigures, kMaxMoments> course;
  Figure<Pressure> reclosed_absolute;
  Figure<GaugePressure> reclosed_gauge;
  PerGas<GasFigures> reclosed;
};

struct ConditioningFigures {
  bool dose_found = false;
  Figure<MassConcentration> dose;
  Figure<MassConcentration> residual;
  Figure<MassConcentration> produced;
  Figure<MassConcentration> content;  ///< both together
  Figure<Fraction> ethanol_added;     ///< by volume
  Figure<GaugePressure> pressure_gauge;
  Figure<Pressure> pressure_absolute;
  Figure<Temperature> temperature;  ///< at which that pressure stands
  Figure<Pressure> margin;          ///< rating less that pressure
};

struct SupplyFigures {
  Figure<MassFlow> gas_flow;
  Figure<Mass> gas_mass;
  Figure<Mass> per_hectolitre;  ///< of degassed liquid at 20 °C
  Figure<Mass> dissolved;       ///< its parts
  Figure<Mass> headspace;
  Figure<Mass> purge;
  Figure<TemperatureDifference> warming;
  Figure<Fraction> uncooled_volumes;  ///< of CO2, where nothing takes the heat away
  Figure<MassConcentration> uncooled;
};

namespace json_unit {
inline constexpr JsonUnit kilogram{"kg", 1};
inline constexpr JsonUnit kilogram_per_hour{"kg/h", 1.0 / 3600};
inline constexpr JsonUnit kelvin{"K", 1};
inline constexpr JsonUnit micrometre{"um", 1e-6};
}  // namespace json_unit

namespace detail {

template <class O, class F>
void each_opened_figure(O& o, F&& f) {
  using namespace json_unit;
  f(FigurePath("opening", "total"), o.total, gram);
  f(FigurePath("opening", "headspace_share"), o.headspace.share, percent);
  f(FigurePath("opening", "headspace_volumes"), o.headspace.volumes, one);
  f(FigurePath("opening", "fizz_share"), o.fizz.share, percent);
  f(FigurePath("opening", "fizz_volumes"), o.fizz.volumes, one);
  f(FigurePath("opening", "flat_share"), o.flat.share, percent);
  f(FigurePath("opening", "flat_volumes"), o.flat.volumes, one);
  f(FigurePath("opening", "cold_gas"), o.cold_gas, celsius);
  f(FigurePath("opening", "dry_ice_saturation"), o.dry_ice, one);
  f(FigurePath("opening", "supersaturation"), o.supersaturation, one);
  f(FigurePath("opening", "nucleus_radius"), o.nucleus, micrometre);
  f(FigurePath("opening", "escape_half_life"), o.half_life, second);
  f(FigurePath("opening", "fizz_until"), o.fizz_until, second);
  for (std::size_t i = 0; i < o.course.size(); ++i) {
    const FigurePath at("opening", "course", kIndices[i]);
    f(at.then("after"), o.course[i].after, second);
    each_gas_figure(o.course[i].gases, at, f);
    f(at.then("lost"), o.course[i].lost, gram);
  }
  const FigurePath again("opening", "reclosed");
  f(again.then("pressure_absolute"), o.reclosed_absolute, kilopascal);
  f(again.then("pressure_gauge"), o.reclosed_gauge, kilopascal);
  each_gas_figure(o.reclosed, again, f);
}

template <class C, class F>
void each_conditioning_figure(C& c, F&& f) {
  using namespace json_unit;
  f(FigurePath("conditioning", "dose"), c.dose, gram_per_litre);
  f(FigurePath("conditioning", "residual"), c.residual, gram_per_litre);
  f(FigurePath("conditioning", "produced"), c.produced, gram_per_litre);
  f(FigurePath("conditioning", "content"), c.content, gram_per_litre);
  f(FigurePath("conditioning", "ethanol_added"), c.ethanol_added, percent);
  f(FigurePath("conditioning", "pressure_gauge"), c.pressure_gauge, kilopascal);
  f(FigurePath("conditioning", "pressure_absolute"), c.pressure_absolute, kilopascal);
  f(FigurePath("conditioning", "temperature"), c.temperature, celsius);
  f(FigurePath("conditioning", "margin"), c.margin, kilopascal);
}

template <class S, class F>
void each_supply_figure(S& s, F&& f) {
  using namespace json_unit;
  f(FigurePath("supply", "gas_flow"), s.gas_flow, kilogram_per_hour);
  f(FigurePath("supply", "gas_mass"), s.gas_mass, kilogram);
  f(FigurePath("supply", "per_hectolitre"), s.per_hectolitre, kilogram);
  f(FigurePath("supply", "dissolved_per_hectolitre"), s.dissolved, kilogram);
  f(FigurePath("supply", "headspace_per_hectolitre"), s.headspace, kilogram);
  f(FigurePath("supply", "purge_per_hectolitre"), s.purge, kilogram);
  f(FigurePath("supply", "warming"), s.warming, kelvin);
  f(FigurePath("supply", "uncooled", "volumes"), s.uncooled_volumes, one);
  f(FigurePath("supply", "uncooled", "mass_concentration"), s.uncooled, gram_per_litre);
}

}  // namespace detail

}  // namespace capsigh
