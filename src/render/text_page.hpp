// What every part of a text report is written with: labels and values in two columns, figures with
// their doubt, units as asked for. Parts of a report live in text.cpp and text_*.cpp.
#pragma once

#include <fmt/format.h>

#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "capsigh/answer/report.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "words.hpp"
#include "wrap.hpp"

namespace capsigh::render_detail {

inline constexpr std::size_t kLabel = 30;
inline constexpr double kCoverage = 2;  // U = k u, k = 2 (JCGM 100, 6.2)

inline const Unit& unit(std::string_view name, Dimension dimension) {
  return *find_unit(name, dimension);
}

/// "1.58 ± 0.04 bar gauge"
template <class Q>
std::string shown(const Figure<Q>& figure, const Unit& in, std::string_view suffix = "") {
  const double value = in_unit(si_value(figure.value), in);
  const double expanded = kCoverage * difference_in_unit(si_value(figure.u), in);
  const auto [number, plus_minus] = rounded(value, expanded);
  return fmt::format("{}{}{} {}{}", number, plus_minus.empty() ? "" : " ± ", plus_minus, in.text,
                     suffix);
}

class TextPage {
 public:
  explicit TextPage(const std::vector<const Unit*>& asked) : asked_(asked) {}

  std::string out;

  void section(std::string_view name);
  void line(std::string_view label, const std::string& value, const std::string& more = "");
  /// Gauge and absolute on one line.
  void pressures(std::string_view label, const Figure<GaugePressure>& gauge,
                 const Figure<Pressure>& absolute);
  /// The content of one gas.
  void gas(const GasFigures& g, std::string_view indent = "");
  /// A verdict with what would be accepted and what would make it a clear one.
  void judged(const JudgedTarget& j);
  /// Where the doubt of the main figures comes from; what a Monte Carlo has shown.
  void doubts(const Report& report);
  void drawn(const Report& report);

  /// The units asked for of that dimension, else our own choice.
  [[nodiscard]] std::vector<const Unit*> units(Dimension dimension, std::string_view own) const;
  template <class Q>
  [[nodiscard]] std::string in_units(const Figure<Q>& figure, Dimension dimension,
                                     std::string_view own, std::string_view suffix = "") const {
    std::string text;
    for (const auto* u : units(dimension, own)) {
      if (!text.empty()) text += " = ";
      text += shown(figure, *u, suffix);
    }
    return text;
  }
  [[nodiscard]] std::string celsius(const Figure<Temperature>& t) const;

  /// How a figure in a unit for machines is shown to people, unless other units are asked for.
  static std::pair<Dimension, std::string_view> shown_as(const JsonUnit& json);

 private:
  void acceptance(const JudgedTarget& j);
  template <class Q>
  void interval(const std::string& path, const Figure<Q>& figure, const JsonUnit& json);

  const std::vector<const Unit*>& asked_;
};

}  // namespace capsigh::render_detail
