// One figure of an answer, where it stands in the JSON contract, and the figures of one gas.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>

#include "capsigh/balance/medium.hpp"
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
inline constexpr JsonUnit milligram_per_litre{"mg/L", 1e-3};
inline constexpr JsonUnit microgram{"ug", 1e-9};
inline constexpr JsonUnit millilitre{"mL", 1e-6};
inline constexpr JsonUnit second{"s", 1};
inline constexpr JsonUnit day{"d", 86400};
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

inline constexpr std::array<std::string_view, 32> kIndices{
    "0",  "1",  "2",  "3",  "4",  "5",  "6",  "7",  "8",  "9",  "10", "11", "12", "13", "14", "15",
    "16", "17", "18", "19", "20", "21", "22", "23", "24", "25", "26", "27", "28", "29", "30", "31"};

}  // namespace detail

}  // namespace capsigh
