// A liquid with the gases over it and in it: every law in force, each with its record's doubt. Flat
// and copyable, so that a thread may own one and move its doubts.
#pragma once

#include <array>
#include <boost/container/static_vector.hpp>
#include <cstdint>
#include <optional>
#include <string_view>
#include <vector>

#include "capsigh/balance/convention.hpp"
#include "capsigh/balance/liquid.hpp"
#include "capsigh/constants/cited.hpp"
#include "capsigh/models/henry.hpp"
#include "capsigh/models/real_gas.hpp"
#include "capsigh/models/vapour.hpp"

namespace capsigh {

inline constexpr std::size_t kMaxGases = 24;
inline constexpr std::size_t kMaxCrossRecords = 8;

/// One value a gas, in the order of Medium::gases.
template <class T>
using PerGas = boost::container::static_vector<T, kMaxGases>;
using Shares = PerGas<Fraction>;  ///< dry amount fractions, adding up to 1
using Contents = PerGas<Molality>;

/// One published Henry's constant in force over a stretch of temperature.
struct HenrySegment {
  HenryForm form;
  RecordDoubt doubt;
  HenryReference reference = HenryReference::one_atmosphere;
  bool per_partial_pressure = false;  ///< the record's scale; else per fugacity
};

/// Henry's constant of one gas: records in the order of temperature, joined over their overlaps
/// (overlap i lies between segments i and i + 1, in K). The doubt of a record that takes over from
/// a better known one begins with the other's and reaches its own one overlap's width beyond.
struct HenryChain {
  boost::container::static_vector<HenrySegment, 3> segments;
  boost::container::static_vector<Interval, 2> overlaps;
};

struct GasModel {
  std::string_view name;  ///< lives in the library
  CitedConstant<MolarMass> molar_mass;
  HenryChain henry;
  VirialForm virial;
  RecordDoubt virial_doubt;
  CitedConstant<MolarVolume> molar_volume;  ///< partial, of the dissolved gas
  /// Of the gas at 0 °C and 1 atm where a record gives it; else by the virial coefficient.
  std::optional<CitedConstant<MolarVolume>> standard_volume;
  Cited<GasSalting> salting;  ///< used only where the liquid has ions
};

struct Medium {
  GasConstant r{};
  Pressure atmosphere{};
  Temperature zero_celsius;         ///< with the atmosphere: the state behind 'vol'
  Temperature content_temperature;  ///< of the degassed litre behind every content
  LiquidModel liquid;
  Convention convention;      ///< by which the trade reads CO2; none: by composition
  RecordDoubt truncation;     ///< of the virial series; its record's limit bounds the pressure
  Pressure pressure_limit{};  ///< beyond which no answer is given
  CarbonDioxideVapourPressure condensation;
  Interval temperature_search;  ///< K, where a temperature is looked for
  PerGas<GasModel> gases;
  std::size_t co2 = kMaxGases;  ///< its place among the gases; kMaxGases where there is none
  boost::container::static_vector<Cited<CrossVirialExcess>, kMaxCrossRecords> cross;
  std::array<std::array<std::uint8_t, kMaxGases>, kMaxGases> cross_of{};  ///< index into `cross`

  [[nodiscard]] std::size_t size() const { return gases.size(); }
};

/// Calls visit(RecordDoubt&) for every record's doubt in the medium, each once.
template <class Visit>
void each_record_doubt(Medium& m, Visit&& visit) {
  each_record_doubt(m.liquid, visit);
  visit(m.truncation);
  for (auto& c : m.cross) visit(c.doubt);
  for (auto& gas : m.gases) {
    visit(gas.molar_mass.doubt);
    visit(gas.virial_doubt);
    visit(gas.molar_volume.doubt);
    if (gas.standard_volume) visit(gas.standard_volume->doubt);
    visit(gas.salting.doubt);
    for (auto& s : gas.henry.segments) visit(s.doubt);
  }
}

/// What pure CO2 over a liquid needs to know at one temperature.
struct CarbonDioxideAt {
  Temperature t;
  Pressure vapour{};
  MassDensity density{};
  HenryConstant k{};
  Pressure k_reference{};
  MolarVolume v{};
  MolarVolume b{};
};

/// Everything that depends on temperature and liquid alone.
struct AtTemperature {
  Temperature t;
  Pressure vapour{};  ///< of water and ethanol together
  VapourAt vapours;
  MassDensity density{};     ///< of the degassed liquid
  MassDensity density_20{};  ///< at 20 °C
  PerGas<HenryConstant> k;
  PerGas<Pressure> k_reference;
  PerGas<MolarVolume> v;
  PerGas<MolarVolume> b;       ///< pure second virial coefficients
  PerGas<MolarVolume> excess;  ///< one per Medium::cross record
  /// Where the trade's convention is read: at T, or at the edge of its range.
  CarbonDioxideAt convention_at;
  CarbonDioxideAt water_at;  ///< pure water there, without doubt (water equivalent)
  MassDensity water_at_20{};
  Fraction ethanol_by_volume{};
  MassConcentration sugar{};
};

/// What a traced evaluation notes: the chain of one gas, in a mixture of these shares. The fugacity
/// of a gas rests on its own virial coefficient and the cross excesses only (in B* the others'
/// cancel); the compressibility of the mixture rests on all.
struct Noting {
  Trace* trace = nullptr;
  std::size_t gas = 0;
  const Shares* shares = nullptr;
  bool compressibility = false;
};

AtTemperature at_temperature(const Medium& medium, const Liquid& liquid, Temperature t,
                             const Noting& note = {});

/// A dry mixture's virial sums at one temperature: b_star_i = 2 Σ_j y_j B_ij − B_mix.
struct GasMixture {
  Shares shares;
  PerGas<MolarVolume> b_star;
  MolarVolume b_mix{};
};
GasMixture mix(const Medium& medium, const AtTemperature& at, const Shares& shares);

/// Volume of one mole of a pure gas at 0 °C and 1 atm: real (its record, else its virial
/// coefficient), or ideal.
MolarVolume volume_basis(const Medium& medium, std::size_t gas, bool ideal, Trace* trace = nullptr);

}  // namespace capsigh
