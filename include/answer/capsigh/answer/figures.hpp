// The figures of an answer, and the JSON contract listed once: path, unit in UCUM, and its factor.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "capsigh/balance/medium.hpp"
#include "capsigh/balance/refusal.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// A figure: value and standard uncertainty (k = 1; zero where nothing doubtful enters). Slots that
/// were not asked for stay silent; a slot asked for keeps its place from solve to solve.
template <class Q>
struct Figure {
  Q value{};
  Difference<Q> u{};
  bool asked = false;
  bool nonlinear = false;   ///< not in proportion to its doubts: first order is not the whole of u
  bool doubt_known = true;  ///< false where too many draws of a Monte Carlo had no answer
  std::optional<Q> low{};   ///< ends of the coverage interval of a Monte Carlo
  std::optional<Q> high{};
  Difference<Q> u_first{};  ///< with a Monte Carlo: u by first order, beside it

  Figure& operator=(const Q& q) {
    value = q;
    asked = true;
    return *this;
  }
};

/// Unit of a figure as machines read it: number = (SI value − offset)/factor.
struct JsonUnit {
  std::string_view ucum;
  double factor = 1;
  double offset = 0;
};

/// The path of a figure in the contract: names and indices ("container", "at", "0", ...).
class FigurePath {
 public:
  FigurePath() = default;
  template <class... Part>
  explicit FigurePath(Part... part) : parts_{std::string_view(part)...}, size_(sizeof...(part)) {}

  [[nodiscard]] FigurePath then(std::string_view part) const {
    FigurePath longer = *this;
    longer.parts_[longer.size_++] = part;
    return longer;
  }
  [[nodiscard]] std::string text() const;
  [[nodiscard]] const std::string_view* begin() const { return parts_.data(); }
  [[nodiscard]] const std::string_view* end() const { return parts_.data() + size_; }

 private:
  std::array<std::string_view, 8> parts_{};
  std::size_t size_ = 0;
};

struct GasFigures {
  std::string_view gas;
  Figure<MassConcentration> mass_concentration;
  Figure<AmountConcentration> amount_concentration;
  Figure<Fraction> volumes;
  Figure<Fraction> mole_fraction;
  Figure<Fraction> mass_fraction;
  Figure<Pressure> partial_pressure;
};

/// Whether so little of a gas is there that it is read in mg/L: volumes would be a row of zeros.
inline bool is_trace(const GasFigures& g) {
  constexpr double trace = 0.1;  // kg/m3
  return g.mass_concentration.value.value() < trace;
}

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

struct ContainerFigures {
  Figure<Temperature> temperature;
  Figure<Pressure> pressure_absolute;
  Figure<GaugePressure> pressure_gauge;
  Figure<Fraction> ullage;
  Figure<Pressure> margin;  ///< rating less gauge pressure
  Figure<Pressure> vapour;
  Figure<Pressure> ethanol;
  PerGas<GasFigures> gases;
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
  boost::container::static_vector<ContainerFigures, 8> container;
  Figure<GaugePressure> wine_gauge;  ///< at 20 °C: what wines are classed by
  Figure<Temperature> opening_temperature;
  Figure<GaugePressure> opening_pressure;  ///< of the package when it is opened
  Figure<Pressure> opening_margin;         ///< rating less that
  bool breaks_out_above = false;           ///< the depth holds more than the headspace does
  PerGas<LossFigures> opening;
};

namespace json_unit {
inline constexpr JsonUnit kilopascal{"kPa", 1e3};
inline constexpr JsonUnit celsius{"Cel", 1, 273.15};
inline constexpr JsonUnit gram_per_litre{"g/L", 1};
inline constexpr JsonUnit mole_per_litre{"mol/L", 1e3};
inline constexpr JsonUnit one{"1", 1};
inline constexpr JsonUnit percent{"%", 1e-2};
inline constexpr JsonUnit milligram_per_kilogram{"mg/kg", 1e-6};
inline constexpr JsonUnit mole_per_kilogram{"mol/kg", 1};
inline constexpr JsonUnit gram{"g", 1e-3};
}  // namespace json_unit

namespace detail {

template <class Gases, class F>
void each_gas_figure(Gases& gases, const FigurePath& at, F&& f) {
  for (auto& g : gases) {
    const auto content = at.then("dissolved").then(g.gas);
    f(content.then("mass_concentration"), g.mass_concentration, json_unit::gram_per_litre);
    f(content.then("amount_concentration"), g.amount_concentration, json_unit::mole_per_litre);
    f(content.then("volumes"), g.volumes, json_unit::one);
    f(content.then("mole_fraction"), g.mole_fraction, json_unit::one);
    f(content.then("mass_fraction"), g.mass_fraction, json_unit::milligram_per_kilogram);
    f(at.then("headspace").then("partial_pressure").then(g.gas), g.partial_pressure,
      json_unit::kilopascal);
  }
}

inline constexpr std::array<std::string_view, 8> kIndices{"0", "1", "2", "3", "4", "5", "6", "7"};

}  // namespace detail

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
  for (std::size_t i = 0; i < a.container.size(); ++i) {
    auto& c = a.container[i];
    const FigurePath at("container", "at", detail::kIndices[i]);
    f(at.then("temperature"), c.temperature, celsius);
    f(at.then("pressure_absolute"), c.pressure_absolute, kilopascal);
    f(at.then("pressure_gauge"), c.pressure_gauge, kilopascal);
    f(at.then("ullage"), c.ullage, percent);
    f(at.then("margin"), c.margin, kilopascal);
    f(at.then("headspace").then("partial_pressure").then("water"), c.vapour, kilopascal);
    f(at.then("headspace").then("partial_pressure").then("ethanol"), c.ethanol, kilopascal);
    detail::each_gas_figure(c.gases, at, f);
  }
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
}

}  // namespace capsigh
