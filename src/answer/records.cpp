#include "records.hpp"

#include <algorithm>
#include <stdexcept>

#include "capsigh/quantity/grammar.hpp"

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

HenryForm henry_form(const Record& record, const Medium& m) {
  const MolarMass water = m.liquid.water_molar_mass.law.value;
  if (record.form == "three-term") {
    return ThreeTermHenry{coefficients<3>(record), record.factor};
  }
  if (record.form == "inverse-powers") {
    return InversePowersHenry{coefficients<3>(record), record.factor, water};
  }
  if (record.form == "high-temperature") {
    return HighTemperatureHenry{coefficients<3>(record),
                                m.liquid.water_vapour.law.critical_temperature, water};
  }
  if (record.form == "mole-fraction-log" || record.form == "mole-fraction-log-kelvin") {
    constexpr double hundreds = 100;
    const double theta = record.form == "mole-fraction-log" ? hundreds : 1.0;
    return MoleFractionHenry{coefficients<4>(record), theta, water, m.atmosphere};
  }
  if (record.form == "two-term") {
    return TwoTermHenry{record.values[0].value, record.values[1].value, record.factor, 1.0};
  }
  throw std::logic_error("no Henry form " + std::string(record.form));
}

// Multiplies every later two-term record by what makes it meet the one before, where the overlap
// begins. Both are per fugacity in the tables that ask for it.
void scale_to_meet(HenryChain& chain, const Medium& m) {
  for (std::size_t i = 0; i < chain.overlaps.size(); ++i) {
    const auto t = from_si<Temperature>(chain.overlaps[i].low);
    const auto value = [&](const HenryForm& form) {
      return std::visit(
          [&](const auto& law) {
            return law(t, m.liquid.water_density.law(t), m.liquid.water_vapour.law(t)).value();
          },
          form);
    };
    if (auto* later = std::get_if<TwoTermHenry>(&chain.segments[i + 1].form)) {
      later->scale = value(chain.segments[i].form) / value(chain.segments[i + 1].form);
    }
  }
}

HenryChain henry_chain(const Library& library, const Record& selection, const Medium& m) {
  HenryChain chain;
  for (const auto part : selection.parts) {
    const Record& record = library.at(part);
    chain.segments.push_back({henry_form(record, m), doubt_of(record),
                              record.reference == "1 atm" ? HenryReference::one_atmosphere
                                                          : HenryReference::vapour_pressure,
                              record.scale == "partial pressure"});
  }
  for (std::size_t i = 0; i + 1 < selection.values.size(); i += 2) {
    chain.overlaps.push_back({selection.values[i].value, selection.values[i + 1].value});
  }
  if (selection.form == "overlap-scaled") scale_to_meet(chain, m);
  return chain;
}

VirialForm virial_form(const Library& library, const Record& record, const Medium& m) {
  if (record.form == "tsonopoulos") {
    const auto& bar = *find_unit("bar", Dimension::pressure);
    const auto f = library.at("virial_form.tsonopoulos").values;
    return TsonopoulosVirial{from_si<Temperature>(record.values[0].value),
                             from_si<Pressure>(record.values[1].value * bar.factor),
                             record.values[2].value,
                             m.r,
                             {f[0].value, f[1].value, f[2].value, f[3].value, f[4].value},
                             {f[5].value, f[6].value, f[7].value, f[8].value}};
  }
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
  gas.virial = virial_form(library, virial, m);
  gas.virial_doubt = doubt_of(virial);
  gas.molar_volume = cited_constant<MolarVolume>(library.at(key_of("molar_volume", name)));
  const Record* salting = library.find(key_of("sechenov", name));
  if (salting == nullptr) salting = &library.at("sechenov.default");
  if (!m.liquid.ions.empty()) {
    gas.salting = {{salting->values[0].value, salting->values[1].value, salting->factor},
                   doubt_of(*salting)};
  }
  if (const Record* volume = library.find(key_of("gas_volume", name))) {
    gas.standard_volume = cited_constant<MolarVolume>(*volume);
  }
  return gas;
}

Cited<CrossVirialExcess> cross_virial(const Record& record) {
  return {{record.values[0].value, record.values[1].value, record.factor}, doubt_of(record)};
}

bool of_air(std::string_view gas) { return gas == "N2" || gas == "O2" || gas == "Ar"; }

// Pairs with a source of their own, pairs of air, and the rest: index into Medium::cross.
void choose_cross_virials(const Library& library, Medium& m) {
  enum : std::uint8_t { air_pair, co2_air, n2o_air, unlike };
  for (const auto* key : {"cross_virial.default", "cross_virial.CO2-air", "cross_virial.N2O-air",
                          "cross_virial.unlike"}) {
    m.cross.push_back(cross_virial(library.at(key)));
  }
  for (std::size_t i = 0; i < m.size(); ++i) {
    for (std::size_t j = 0; j < m.size(); ++j) {
      const auto& a = m.gases[i].name;
      const auto& b = m.gases[j].name;
      const auto with_air = [&](std::string_view gas) {
        return (a == gas && of_air(b)) || (b == gas && of_air(a));
      };
      m.cross_of[i][j] = of_air(a) && of_air(b) ? air_pair
                         : with_air("CO2")      ? co2_air
                         : with_air("N2O")      ? n2o_air
                                                : unlike;
    }
  }
}

}  // namespace

namespace {

Interval hull(std::span<const ValidityBox> range, Interval ValidityBox::*side) {
  Interval all = range.front().*side;
  for (const auto& box : range) {
    all.low = std::min(all.low, (box.*side).low);
    all.high = std::max(all.high, (box.*side).high);
  }
  return all;
}

}  // namespace

Convention convention_of(const Library& library, const Record* relation, const Medium& m) {
  Convention convention;
  if (relation == nullptr) return convention;
  convention.record = relation;
  convention.temperature = hull(relation->range, &ValidityBox::temperature);
  convention.pressure = hull(relation->range, &ValidityBox::pressure);
  convention.least_partial = constant<Pressure>(library, "assumed.convention_margin");
  if (relation->form == "asbc") {
    convention.relation = AsbcRelation::from(*relation);
  } else if (relation->form == "mebak") {
    convention.relation = MebakRelation::from(*relation);
  } else if (relation->form == "oiv") {
    convention.relation = OivRelation::from(*relation, m.r);
  } else {
    // Pure water without doubt: the convention is what water holds by the tables, whatever they
    // are worth.
    LiquidModel water;
    water.water_vapour = m.liquid.water_vapour;
    water.water_density = m.liquid.water_density;
    water.water_molar_mass = m.liquid.water_molar_mass;
    convention.relation = WaterEquivalent{
        std::make_shared<const Medium>(medium_of(library, std::move(water), {"CO2"}, nullptr))};
  }
  return convention;
}

Medium medium_of(const Library& library, LiquidModel liquid, const std::vector<std::string>& gases,
                 const Record* relation) {
  Medium m;
  m.r = constant<GasConstant>(library, "fundamental.R");
  m.atmosphere = constant<Pressure>(library, "fundamental.atm");
  m.zero_celsius = constant<Temperature>(library, "fundamental.T0");
  m.content_temperature = constant<Temperature>(library, "fundamental.T_content");
  m.liquid = std::move(liquid);
  const Record& truncation = library.at("real_gas.second_virial");
  m.truncation = doubt_of(truncation);
  m.pressure_limit = from_si<Pressure>(truncation.limit[0].pressure.high);
  const Record& search = library.at("assumed.temperature_search");
  m.temperature_search = {search.values[0].value, search.values[1].value};
  const Record& condensation = library.at("vapour.CO2");
  m.condensation = {coefficients<4>(condensation),
                    from_si<Temperature>(condensation.values[4].value),
                    from_si<Pressure>(condensation.values[5].value * condensation.factor)};
  for (const auto& gas : gases) {
    if (gas == "CO2") m.co2 = m.gases.size();
    m.gases.push_back(gas_model(library, gas, m));
  }
  choose_cross_virials(library, m);
  if (m.co2 < m.size()) m.convention = convention_of(library, relation, m);
  return m;
}

}  // namespace capsigh::answer_detail
