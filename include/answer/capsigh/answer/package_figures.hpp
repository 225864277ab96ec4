// Figures of the closed package: its states in storage, what may be asked the other way round, its
// oxygen, and how long it keeps.
#pragma once

#include <boost/container/static_vector.hpp>
#include <optional>

#include "capsigh/answer/figure.hpp"
#include "capsigh/answer/package_case.hpp"
#include "capsigh/balance/refusal.hpp"

namespace capsigh {

/// The package at one temperature. Where it has no state there (it is full of liquid, beyond the
/// gas law, or frozen), only the temperature is asked and `without_state` says why.
struct ContainerFigures {
  Figure<Temperature> temperature;
  Figure<Pressure> pressure_absolute;
  Figure<GaugePressure> pressure_gauge;
  Figure<Fraction> ullage;
  Figure<Pressure> margin;  ///< rating less gauge pressure
  Figure<Pressure> vapour;
  Figure<Pressure> ethanol;
  PerGas<GasFigures> gases;
  std::optional<RefusalCode> without_state;
};

/// Oxygen in the package, per litre of degassed liquid at 20 °C.
struct OxygenFigures {
  Figure<MassConcentration> dissolved;  ///< at the first storage temperature, else at closing
  Figure<MassConcentration> headspace;  ///< likewise
  Figure<MassConcentration> total;
  Figure<Mass> per_package;
  std::optional<MassConcentration> limit;
  Figure<Volume> allowed_air;  ///< in the headspace at closing, at closing temperature and ambient
};

/// The package after a time on the shelf.
struct CoursePoint {
  Figure<Duration> after;
  Figure<GaugePressure> pressure_gauge;
  Figure<Fraction> volumes;  ///< of CO2 in the liquid
  Figure<MassConcentration> mass_concentration;
  Figure<MassConcentration> oxygen;  ///< dissolved and in the headspace, per litre of liquid
};

/// How long the package keeps at one storage temperature. A limit that is not reached within the
/// longest time looked at is not asked.
struct ShelfLifeFigures {
  Figure<Temperature> temperature;
  Figure<Duration> until_limit;  ///< the first of the limits
  std::string_view gas;          ///< whose limit that is
  Figure<Duration> until_co2;
  Figure<Duration> until_o2;
  boost::container::static_vector<CoursePoint, kMaxCourse> course;
};

struct PackageFigures {
  boost::container::static_vector<ContainerFigures, kMaxStorage> at;
  Figure<Temperature> safe_temperature;  ///< at which the rating is reached
  Figure<Temperature> liquid_full;       ///< from which on the liquid fills the whole package
  Figure<Volume> largest_fill;           ///< that keeps the ullage and the rating when hottest
  Figure<Temperature> closing_temperature;
  Figure<GaugePressure> closing_gauge;  ///< to be read there once the package has settled
  OxygenFigures oxygen;
  boost::container::static_vector<ShelfLifeFigures, kMaxStorage> shelf_life;
};

namespace detail {

template <class P, class F>
void each_state_figure(P& p, F&& f) {
  using namespace json_unit;
  for (std::size_t i = 0; i < p.at.size(); ++i) {
    auto& c = p.at[i];
    const FigurePath at("container", "at", kIndices[i]);
    f(at.then("temperature"), c.temperature, celsius);
    f(at.then("pressure_absolute"), c.pressure_absolute, kilopascal);
    f(at.then("pressure_gauge"), c.pressure_gauge, kilopascal);
    f(at.then("ullage"), c.ullage, percent);
    f(at.then("margin"), c.margin, kilopascal);
    f(at.then("headspace").then("partial_pressure").then("water"), c.vapour, kilopascal);
    f(at.then("headspace").then("partial_pressure").then("ethanol"), c.ethanol, kilopascal);
    each_gas_figure(c.gases, at, f);
  }
}

template <class P, class F>
void each_shelf_figure(P& p, F&& f) {
  using namespace json_unit;
  for (std::size_t i = 0; i < p.shelf_life.size(); ++i) {
    auto& s = p.shelf_life[i];
    const FigurePath at("container", "shelf_life", kIndices[i]);
    f(at.then("temperature"), s.temperature, celsius);
    f(at.then("until_limit"), s.until_limit, day);
    f(at.then("until").then("CO2"), s.until_co2, day);
    f(at.then("until").then("O2"), s.until_o2, day);
    for (std::size_t j = 0; j < s.course.size(); ++j) {
      auto& point = s.course[j];
      const auto in = at.then("course").then(kIndices[j]);
      f(in.then("after"), point.after, second);
      f(in.then("pressure_gauge"), point.pressure_gauge, kilopascal);
      const auto co2 = in.then("dissolved").then("CO2");
      f(co2.then("volumes"), point.volumes, one);
      f(co2.then("mass_concentration"), point.mass_concentration, gram_per_litre);
      f(in.then("oxygen"), point.oxygen, milligram_per_litre);
    }
  }
}

template <class P, class F>
void each_package_figure(P& p, F&& f) {
  using namespace json_unit;
  each_state_figure(p, f);
  const FigurePath container("container");
  f(container.then("safe_temperature"), p.safe_temperature, celsius);
  f(container.then("liquid_full"), p.liquid_full, celsius);
  f(container.then("largest_fill"), p.largest_fill, millilitre);
  const auto closing = container.then("at_closing");
  f(closing.then("temperature"), p.closing_temperature, celsius);
  f(closing.then("pressure_gauge"), p.closing_gauge, kilopascal);
  const auto oxygen = container.then("oxygen");
  f(oxygen.then("dissolved"), p.oxygen.dissolved, milligram_per_litre);
  f(oxygen.then("headspace"), p.oxygen.headspace, milligram_per_litre);
  f(oxygen.then("total"), p.oxygen.total, milligram_per_litre);
  f(oxygen.then("per_package"), p.oxygen.per_package, microgram);
  f(oxygen.then("allowed_air"), p.oxygen.allowed_air, millilitre);
  each_shelf_figure(p, f);
}

}  // namespace detail

}  // namespace capsigh
