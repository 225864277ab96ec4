#include "records.hpp"

#include <algorithm>
#include <stdexcept>

namespace capsigh::answer_detail {
namespace {

std::string key_of(std::string_view kind, std::string_view name) {
  return std::string(kind) + "." + std::string(name);
}

template <std::size_t N>
std::array<double, N> coefficients(const Record& record) {
  std::array<double, N> c{};
  for (std::size_t i = 0; i < std::min(N, record.values.size()); ++i) {
    c[i] = record.values[i].value;
  }
  return c;
}

template <class Q>
CitedConstant<Q> cited_constant(const Record& record) {
  return {{from_si<Q>(record.values[0].value * record.factor)}, doubt_of(record)};
}

HenryForm henry_form(const Record& record, const Medium& m) {
  const MolarMass water = m.water_molar_mass.law.value;
  if (record.form == "three-term") {
    return ThreeTermHenry{coefficients<3>(record), record.factor};
  }
  if (record.form == "inverse-powers") {
    return InversePowersHenry{coefficients<3>(record), record.factor, water};
  }
  if (record.form == "high-temperature") {
    return HighTemperatureHenry{coefficients<3>(record), m.vapour.law.critical_temperature, water};
  }
  throw std::logic_error("no Henry form " + std::string(record.form));
}

HenryChain henry_chain(const Library& library, const Record& selection, const Medium& m) {
  HenryChain chain;
  for (const auto part : selection.parts) {
    const Record& record = library.at(part);
    chain.segments.push_back({henry_form(record, m), doubt_of(record),
                              record.reference == "1 atm" ? HenryReference::one_atmosphere
                                                          : HenryReference::vapour_pressure});
  }
  for (std::size_t i = 0; i + 1 < selection.values.size(); i += 2) {
    chain.overlaps.push_back({selection.values[i].value, selection.values[i + 1].value});
  }
  return chain;
}

VirialForm virial_form(const Record& record) {
  if (record.form == "power-series") {
    return PowerSeriesVirial{coefficients<4>(record), record.factor};
  }
  return InverseTemperatureVirial{coefficients<5>(record), record.factor};
}

GasModel gas_model(const Library& library, const std::string& name, const Medium& m) {
  GasModel gas;
  const Record& selection = library.at(key_of("selection.henry", name));
  gas.name = selection.key.substr(selection.key.size() - name.size());
  gas.molar_mass = cited_constant<MolarMass>(library.at(key_of("molar_mass", name)));
  gas.henry = henry_chain(library, selection, m);
  const Record& virial = library.at(key_of("virial", name));
  gas.virial = virial_form(virial);
  gas.virial_doubt = doubt_of(virial);
  gas.molar_volume = cited_constant<MolarVolume>(library.at(key_of("molar_volume", name)));
  if (const Record* volume = library.find(key_of("gas_volume", name))) {
    gas.standard_volume = cited_constant<MolarVolume>(*volume);
  }
  return gas;
}

Cited<CrossVirialExcess> cross_virial(const Record& record) {
  return {{record.values[0].value, record.values[1].value, record.factor}, doubt_of(record)};
}

bool of_air(std::string_view gas) { return gas == "N2" || gas == "O2" || gas == "Ar"; }

// CO2 with a gas of air has a source of its own; other pairs take the default.
void choose_cross_virials(const Library& library, Medium& m) {
  m.cross.push_back(cross_virial(library.at("cross_virial.default")));
  m.cross.push_back(cross_virial(library.at("cross_virial.CO2-air")));
  for (std::size_t i = 0; i < m.size(); ++i) {
    for (std::size_t j = 0; j < m.size(); ++j) {
      const auto& a = m.gases[i].name;
      const auto& b = m.gases[j].name;
      const bool co2_air = (a == "CO2" && of_air(b)) || (b == "CO2" && of_air(a));
      m.cross_of[i][j] = co2_air ? 1 : 0;
    }
  }
}

}  // namespace

Medium water_with(const Library& library, const std::vector<std::string>& gases) {
  Medium m;
  m.r = constant<GasConstant>(library, "fundamental.R");
  m.atmosphere = constant<Pressure>(library, "fundamental.atm");
  m.zero_celsius = constant<Temperature>(library, "fundamental.T0");
  m.content_temperature = constant<Temperature>(library, "fundamental.T_content");
  const Record& vapour = library.at("vapour.water");
  m.vapour = {WaterVapourPressure::from(vapour), doubt_of(vapour)};
  const Record& density = library.at("density.water");
  m.density = {WaterDensity::from(density, m.zero_celsius), doubt_of(density)};
  m.water_molar_mass = cited_constant<MolarMass>(library.at("molar_mass.H2O"));
  const Record& truncation = library.at("real_gas.second_virial");
  m.truncation = doubt_of(truncation);
  m.pressure_limit = from_si<Pressure>(truncation.limit[0].pressure.high);
  const Record& search = library.at("assumed.temperature_search");
  m.temperature_search = {search.values[0].value, search.values[1].value};
  for (const auto& gas : gases) m.gases.push_back(gas_model(library, gas, m));
  choose_cross_virials(library, m);
  return m;
}

}  // namespace capsigh::answer_detail
