#include "capsigh/balance/medium.hpp"

namespace capsigh {
namespace {

struct HenryAt {
  HenryConstant k{};
  Pressure reference{};
};

HenryAt segment_at(Trace* trace, const Medium& m, const HenrySegment& segment,
                   const AtTemperature& at) {
  const auto k = std::visit(
      [&](const auto& law) {
        return apply(trace, segment.doubt, law, at.t, at.density, at.vapour);
      },
      segment.form);
  const bool at_atmosphere = segment.reference == HenryReference::one_atmosphere;
  return {k, at_atmosphere ? m.atmosphere : at.vapour};
}

HenryAt henry_at(Trace* trace, const Medium& m, const HenryChain& chain, const AtTemperature& at) {
  const double kelvin = at.t.kelvin();
  std::size_t i = 0;
  while (i < chain.overlaps.size() && kelvin >= chain.overlaps[i].high) ++i;
  const HenryAt first = segment_at(trace, m, chain.segments[i], at);
  if (i == chain.overlaps.size() || kelvin <= chain.overlaps[i].low) return first;
  const HenryAt second = segment_at(trace, m, chain.segments[i + 1], at);
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

}  // namespace

AtTemperature at_temperature(const Medium& m, Temperature t, const Noting& note) {
  AtTemperature at;
  at.t = t;
  at.vapour = m.vapour.at(note.trace, t);
  at.density = m.density.at(note.trace, t);
  for (std::size_t i = 0; i < m.size(); ++i) {
    const GasModel& gas = m.gases[i];
    Trace* chain = i == note.gas ? note.trace : nullptr;
    const HenryAt henry = henry_at(chain, m, gas.henry, at);
    at.k.push_back(henry.k);
    at.k_reference.push_back(henry.reference);
    at.v.push_back(gas.molar_volume.at(chain));
    const bool in_mixture = note.compressibility && present(note, i);
    at.b.push_back(virial_at(i == note.gas || in_mixture ? note.trace : nullptr, gas, t));
  }
  for (std::size_t c = 0; c < m.cross.size(); ++c) {
    at.excess.push_back(m.cross[c].at(cross_present(m, note, c) ? note.trace : nullptr, t));
  }
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
