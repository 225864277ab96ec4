#include "capsigh/balance/medium.hpp"

#include <algorithm>

namespace capsigh {
namespace {

struct HenryAt {
  HenryConstant k{};
  Pressure reference{};
};

// The water's own state at T, which printed constants refer to.
struct WaterAt {
  Temperature t;
  MassDensity density{};
  Pressure vapour{};
};

// Where a record takes over from a better known one, the two confirm each other: its doubt begins
// with the other's and reaches its own one overlap's width further on.
RecordDoubt tapered(const HenryChain& chain, std::size_t segment, Temperature t) {
  RecordDoubt doubt = chain.segments[segment].doubt;
  if (segment == 0 || !(doubt.u > 0)) return doubt;
  const double known = chain.segments[segment - 1].doubt.u / doubt.u;
  if (known >= 1) return doubt;
  const auto& overlap = chain.overlaps[segment - 1];
  const double own = smoothstep(t.kelvin(), overlap.high, overlap.high + overlap.width());
  doubt.widening *= known + (1.0 - known) * own;
  return doubt;
}

HenryAt segment_at(Trace* trace, const Medium& m, const HenryChain& chain, std::size_t index,
                   const WaterAt& at, MolarVolume b) {
  const HenrySegment& segment = chain.segments[index];
  const RecordDoubt doubt = tapered(chain, index, at.t);
  auto k = std::visit(
      [&](const auto& law) { return apply(trace, doubt, law, at.t, at.density, at.vapour); },
      segment.form);
  if (segment.per_partial_pressure) {
    const auto phi = apply(trace, FugacityCoefficient{m.r}, b, m.atmosphere, at.t);
    k = apply(trace, PartialToFugacity{}, k, phi);
  }
  const bool at_atmosphere = segment.reference == HenryReference::one_atmosphere;
  return {k, at_atmosphere ? m.atmosphere : at.vapour};
}

HenryAt henry_at(Trace* trace, const Medium& m, const HenryChain& chain, const WaterAt& at,
                 MolarVolume b) {
  const double kelvin = at.t.kelvin();
  std::size_t i = 0;
  while (i < chain.overlaps.size() && kelvin >= chain.overlaps[i].high) ++i;
  HenryAt first = segment_at(trace, m, chain, i, at, b);
  if (i == chain.overlaps.size() || kelvin <= chain.overlaps[i].low) return first;
  const HenryAt second = segment_at(trace, m, chain, i + 1, at, b);
  const double w = smoothstep(kelvin, chain.overlaps[i].low, chain.overlaps[i].high);
  return {apply(trace, JoinedHenry{}, first.k, second.k, Fraction(w)),
          first.reference * (1.0 - w) + second.reference * w};
}

MolarVolume virial_at(Trace* trace, const GasModel& gas, Temperature t) {
  return std::visit([&](const auto& law) { return apply(trace, gas.virial_doubt, law, t); },
                    gas.virial);
}

bool present(const Noting& note, std::size_t gas) {
  return note.shares != nullptr && (*note.shares)[gas].value() > 0;
}

// A cross record is part of the chain if any pair of the mixture uses it.
bool cross_present(const Medium& m, const Noting& note, std::size_t record) {
  for (std::size_t i = 0; i < m.size(); ++i) {
    for (std::size_t j = 0; j < i; ++j) {
      if (m.cross_of[i][j] == record && present(note, i) && present(note, j)) return true;
    }
  }
  return false;
}

// k of one gas in the solution, from k in water.
HenryConstant in_solution(Trace* trace, const Medium& m, const Liquid& liquid, std::size_t gas,
                          HenryConstant in_water, Temperature t) {
  if (m.liquid.solutes.empty()) return in_water;
  const auto exponent =
      salting_exponent(m.liquid, liquid, m.gases[gas].salting, gas == m.co2, t, trace);
  if (m.liquid.model.record == nullptr) {
    return apply(trace, SechenovEquation{}, in_water, exponent);
  }
  return apply(trace, m.liquid.model, SechenovEquation{}, in_water, exponent);
}

CarbonDioxideAt carbon_dioxide(const Medium& m, const AtTemperature& at) {
  return {at.t,        at.vapour,  at.density, at.k[m.co2], at.k_reference[m.co2],
          at.v[m.co2], at.b[m.co2]};
}

Temperature clamped(Temperature t, const Interval& range) {
  return from_si<Temperature>(std::clamp(t.kelvin(), range.low, range.high));
}

// The states at which the convention and its composition are compared.
void read_convention(const Medium& m, const Liquid& liquid, AtTemperature& at) {
  at.ethanol_by_volume = liquid.ethanol_by_volume;
  at.sugar = liquid.sugar;
  if (!m.convention.in_force() || m.co2 >= m.size()) return;
  const Temperature edge = clamped(at.t, m.convention.temperature);
  at.convention_at =
      edge == at.t ? carbon_dioxide(m, at) : at_temperature(m, liquid, edge).convention_at;
  if (const auto* equivalent = std::get_if<WaterEquivalent>(&m.convention.relation)) {
    const Medium& water = *equivalent->water;
    const Liquid pure = compose(water.liquid, water.content_temperature);
    at.water_at = carbon_dioxide(water, at_temperature(water, pure, edge));
    at.water_at_20 = pure.density;
  }
}

}  // namespace

AtTemperature at_temperature(const Medium& m, const Liquid& liquid, Temperature t,
                             const Noting& note) {
  AtTemperature at;
  at.t = t;
  at.vapours = vapour_at(m.liquid, liquid, t, note.trace);
  at.vapour = at.vapours.total();
  const WaterAt water{t, m.liquid.water_density.at(note.trace, t), at.vapours.pure_water};
  at.density_20 = liquid.density;
  at.density = liquid_density(m.liquid, liquid, water.density,
                              m.liquid.water_density.at(nullptr, m.content_temperature), t,
                              m.content_temperature, note.trace);
  for (std::size_t i = 0; i < m.size(); ++i) {
    const GasModel& gas = m.gases[i];
    Trace* chain = i == note.gas ? note.trace : nullptr;
    const bool in_mixture = note.compressibility && present(note, i);
    const auto b = virial_at(i == note.gas || in_mixture ? note.trace : nullptr, gas, t);
    const HenryAt henry = henry_at(chain, m, gas.henry, water, b);
    at.k.push_back(in_solution(chain, m, liquid, i, henry.k, t));
    at.k_reference.push_back(henry.reference);
    at.v.push_back(gas.molar_volume.at(chain));
    at.b.push_back(b);
  }
  for (std::size_t c = 0; c < m.cross.size(); ++c) {
    at.excess.push_back(m.cross[c].at(cross_present(m, note, c) ? note.trace : nullptr, t));
  }
  read_convention(m, liquid, at);
  return at;
}

GasMixture mix(const Medium& m, const AtTemperature& at, const Shares& shares) {
  // Kernel: virial coefficients in m³/mol, shares dimensionless.
  GasMixture mixture{shares, {}, {}};
  std::array<double, kMaxGases> row{};
  double b_mix = 0;
  for (std::size_t i = 0; i < m.size(); ++i) {
    double sum = 0;
    for (std::size_t j = 0; j < m.size(); ++j) {
      const double mean = 0.5 * (at.b[i].value() + at.b[j].value());
      const double excess = i == j ? 0.0 : at.excess[m.cross_of[i][j]].value();
      sum += shares[j].value() * (mean + excess);
    }
    row[i] = sum;
    b_mix += shares[i].value() * sum;
  }
  for (std::size_t i = 0; i < m.size(); ++i) {
    mixture.b_star.push_back(from_si<MolarVolume>(2.0 * row[i] - b_mix));
  }
  mixture.b_mix = from_si<MolarVolume>(b_mix);
  return mixture;
}

MolarVolume volume_basis(const Medium& m, std::size_t gas, bool ideal, Trace* trace) {
  const MolarVolumeOfGas volume{m.r};
  if (ideal) return apply(trace, volume, Fraction(1.0), m.atmosphere, m.zero_celsius);
  if (m.gases[gas].standard_volume) return m.gases[gas].standard_volume->at(trace);
  const auto b = virial_at(trace, m.gases[gas], m.zero_celsius);
  const auto z = apply(trace, m.truncation, Compressibility{m.r}, b, m.atmosphere, m.zero_celsius);
  return apply(trace, volume, z, m.atmosphere, m.zero_celsius);
}

}  // namespace capsigh
