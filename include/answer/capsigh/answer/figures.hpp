// The figures of an answer, and the JSON contract listed once: path, unit in UCUM, and its factor.
#pragma once

#include <optional>
#include <string_view>

#include "capsigh/answer/life_figures.hpp"
#include "capsigh/answer/package_figures.hpp"
#include "capsigh/balance/refusal.hpp"

namespace capsigh {

struct SaturationFigures {
  std::string_view gas;
  Figure<Pressure> pressure_absolute;
  Figure<GaugePressure> pressure_gauge;
  Figure<Temperature> temperature;
  std::optional<RefusalCode> unreachable;  ///< why nothing holds the wanted content
};

/// The share of a gas that was to be found.
struct BlendFigures {
  std::string_view gas;
  Figure<Fraction> share;
};

struct LossFigures {
  std::string_view gas;  ///< empty for CO2, whose losses stand at the top
  Figure<Mass> headspace_loss;
  Figure<Mass> fizz_loss;
  Figure<Mass> flat_loss;
};

struct Answer {
  Figure<Temperature> temperature;
  Figure<Pressure> pressure_absolute;
  Figure<GaugePressure> pressure_gauge;
  Figure<Pressure> ambient;
  Figure<Pressure> vapour;   ///< of water
  Figure<Pressure> ethanol;  ///< vapour of ethanol, where the liquid has some
  PerGas<BlendFigures> blend;
  PerGas<GasFigures> gases;
  PerGas<SaturationFigures> saturation;
  PackageFigures package;
  Figure<GaugePressure> wine_gauge;  ///< at 20 °C: what wines are classed by
  Figure<Temperature> opening_temperature;
  Figure<GaugePressure> opening_pressure;  ///< of the package when it is opened
  Figure<Pressure> opening_margin;         ///< rating less that
  bool breaks_out_above = false;           ///< the depth holds more than the headspace does
  PerGas<LossFigures> opening;
  OpenedFigures opened;
  ConditioningFigures conditioning;
  SupplyFigures supply;
};

/// Visits every slot of an answer in a fixed order: f(path, figure, unit).
template <class A, class F>
void each_figure(A& a, F&& f) {
  using namespace json_unit;
  f(FigurePath("condition", "temperature"), a.temperature, celsius);
  f(FigurePath("condition", "pressure_absolute"), a.pressure_absolute, kilopascal);
  f(FigurePath("condition", "pressure_gauge"), a.pressure_gauge, kilopascal);
  f(FigurePath("condition", "ambient"), a.ambient, kilopascal);
  f(FigurePath("headspace", "partial_pressure", "water"), a.vapour, kilopascal);
  f(FigurePath("headspace", "partial_pressure", "ethanol"), a.ethanol, kilopascal);
  for (auto& b : a.blend) f(FigurePath("blend", b.gas), b.share, percent);
  detail::each_gas_figure(a.gases, FigurePath(), f);
  for (auto& s : a.saturation) {
    const FigurePath at("saturation", s.gas);
    f(at.then("pressure_absolute"), s.pressure_absolute, kilopascal);
    f(at.then("pressure_gauge"), s.pressure_gauge, kilopascal);
    f(at.then("temperature"), s.temperature, celsius);
  }
  detail::each_package_figure(a.package, f);
  f(FigurePath("wine", "pressure_gauge"), a.wine_gauge, kilopascal);
  f(FigurePath("opening", "temperature"), a.opening_temperature, celsius);
  f(FigurePath("opening", "pressure_gauge"), a.opening_pressure, kilopascal);
  f(FigurePath("opening", "margin"), a.opening_margin, kilopascal);
  for (auto& loss : a.opening) {
    const FigurePath at =
        loss.gas.empty() ? FigurePath("opening") : FigurePath("opening", loss.gas);
    f(at.then("headspace_loss"), loss.headspace_loss, gram);
    f(at.then("fizz_loss"), loss.fizz_loss, gram);
    f(at.then("flat_loss"), loss.flat_loss, gram);
  }
  detail::each_opened_figure(a.opened, f);
  detail::each_conditioning_figure(a.conditioning, f);
  detail::each_supply_figure(a.supply, f);
}

}  // namespace capsigh
