#include "text_page.hpp"

#include <algorithm>
#include <array>

namespace capsigh::render_detail {

void TextPage::section(std::string_view name) { out += fmt::format("\n{}\n", name); }

void TextPage::line(std::string_view label, const std::string& value, const std::string& more) {
  constexpr std::size_t page = 80;
  constexpr std::size_t column = 24;
  std::string row = "  " + padded(label, kLabel);
  if (columns(label) >= kLabel) row += ' ';
  const std::string both = row + padded(value, column) + "  " + more;
  if (more.empty()) {
    out += row + value + "\n";
  } else if (columns(both) <= page) {
    out += both + "\n";
  } else {
    out += row + value + "\n" + std::string(kLabel + 2, ' ') + more + "\n";
  }
}

void TextPage::pressures(std::string_view label, const Figure<GaugePressure>& gauge,
                         const Figure<Pressure>& absolute) {
  line(label, in_units(gauge, Dimension::pressure, "bar", " gauge"),
       in_units(absolute, Dimension::pressure, "bar", " abs"));
}

std::vector<const Unit*> TextPage::units(Dimension dimension, std::string_view own) const {
  std::vector<const Unit*> chosen;
  for (const auto* u : asked_) {
    if (u->dimension == dimension) chosen.push_back(u);
  }
  if (chosen.empty()) chosen.push_back(find_unit(own, dimension));
  return chosen;
}

std::string TextPage::celsius(const Figure<Temperature>& t) const {
  return in_units(t, Dimension::temperature, "°C");
}

// Gases that are there in traces are read in mg/L; volumes would be a row of zeros.
void TextPage::gas(const GasFigures& g, std::string_view indent) {
  const std::string label = fmt::format("{}Dissolved {}", indent, g.gas);
  std::string chosen;
  const auto add = [&](const auto& figure, const Unit& in) {
    chosen += (chosen.empty() ? "" : " = ") + shown(figure, in);
  };
  for (const auto* u : asked_) {
    if (u->dimension == Dimension::gas_volumes) add(g.volumes, *u);
    if (u->dimension == Dimension::mass_concentration) add(g.mass_concentration, *u);
    if (u->dimension == Dimension::amount_concentration) add(g.amount_concentration, *u);
    if (u->dimension == Dimension::mass_fraction) add(g.mass_fraction, *u);
  }
  if (!chosen.empty()) {
    line(label, chosen);
  } else if (is_trace(g)) {
    line(label, shown(g.mass_concentration, unit("mg/L", Dimension::mass_concentration)));
  } else {
    line(label, shown(g.volumes, unit("vol", Dimension::gas_volumes)),
         shown(g.mass_concentration, unit("g/L", Dimension::mass_concentration)));
  }
}

std::pair<Dimension, std::string_view> TextPage::shown_as(const JsonUnit& json) {
  struct Shown {
    std::string_view ucum;
    Dimension dimension;
    std::string_view unit;
  };
  static constexpr std::array table{
      Shown{"kPa", Dimension::pressure, "bar"},
      Shown{"Cel", Dimension::temperature, "°C"},
      Shown{"%", Dimension::fraction, "%"},
      Shown{"1", Dimension::gas_volumes, "vol"},
      Shown{"g/L", Dimension::mass_concentration, "g/L"},
      Shown{"mol/L", Dimension::amount_concentration, "mol/L"},
      Shown{"mg/kg", Dimension::mass_fraction, "mg/kg"},
      Shown{"mg/L", Dimension::mass_concentration, "mg/L"},
      Shown{"kg", Dimension::mass, "kg"},
      Shown{"g", Dimension::mass, "g"},
      Shown{"ug", Dimension::mass, "ug"},
      Shown{"mL", Dimension::volume, "mL"},
      Shown{"d", Dimension::duration, "wk"},
      Shown{"s", Dimension::duration, "s"},
  };
  const auto* const it = std::find_if(table.begin(), table.end(),
                                      [&](const Shown& row) { return row.ucum == json.ucum; });
  if (it == table.end()) return {Dimension::gas_volumes, "vol"};
  return {it->dimension, it->unit};
}

}  // namespace capsigh::render_detail
