#include "capsigh/balance/opening.hpp"

namespace capsigh {
namespace {

Shares pure(const Medium& m, std::size_t gas) {
  Shares shares(m.size(), Fraction(0.0));
  shares[gas] = 1.0;
  return shares;
}

PerGas<Amount> portion(const Shares& shares, Amount total) {
  PerGas<Amount> amounts;
  for (const auto& share : shares) amounts.push_back(share * total);
  return amounts;
}

}  // namespace

Opened open_package(const Medium& m, const Filling& filling, const ClosedState& state,
                    Pressure ambient, const Shares& air) {
  Opened opened;
  opened.liquid = filling.liquid;
  opened.contents = state.contents;
  opened.at = state.at;
  // A wall that was stretched draws back as the pressure falls.
  ClosedState relaxed = state;
  relaxed.headspace =
      std::max(state.headspace - (stretched(nullptr, filling.shell, state.pressure) -
                                  stretched(nullptr, filling.shell, ambient)),
               Volume{});
  opened.headspace = relaxed.headspace;
  const Amount before = gas_in_headspace(nullptr, m, state, state.pressure);
  const Amount after = gas_in_headspace(nullptr, m, relaxed, ambient);
  opened.in_headspace = portion(state.mixture.shares, before);
  opened.stays = portion(state.mixture.shares, std::min(before, after));
  relaxed.mixture = mix(m, state.at, air);
  opened.as_air = portion(air, gas_in_headspace(nullptr, m, relaxed, ambient));
  return opened;
}

Opened open_liquid(const Medium& m, const AtTemperature& at, const Contents& contents,
                   Mass liquid) {
  Opened opened;
  opened.liquid = liquid;
  opened.contents = contents;
  opened.at = at;
  opened.in_headspace.resize(m.size());
  opened.stays.resize(m.size());
  opened.as_air.resize(m.size());
  return opened;
}

Mass headspace_loss(Trace* trace, const Medium& m, const Opened& opened, std::size_t gas) {
  return apply(trace, HeadspaceLoss{}, opened.in_headspace[gas], opened.stays[gas],
               m.gases[gas].molar_mass.at(trace));
}

Mass fizz_loss(Trace* trace, const Medium& m, const Opened& opened, Pressure ambient,
               std::size_t gas) {
  const auto saturated =
      content(trace, m, opened.at, mix(m, opened.at, pure(m, gas)), ambient, gas);
  return apply(trace, FizzLoss{}, opened.contents[gas], saturated, opened.liquid,
               m.gases[gas].molar_mass.at(trace));
}

Mass flat_loss(Trace* trace, const Medium& m, const Opened& opened, Pressure ambient,
               const Shares& air, std::size_t gas, bool bubbles) {
  const auto& at = opened.at;
  const Molality b = opened.contents[gas];
  // Not noted: a trade's relation is far below its range at the CO2 of air, where next to nothing
  // stays dissolved, and a caution about it would only distract.
  const auto with_air = content(nullptr, m, at, mix(m, at, air), ambient, gas);
  const auto saturated =
      bubbles ? content(trace, m, at, mix(m, at, pure(m, gas)), ambient, gas) : b;
  return apply(trace, FlatLoss{}, b, saturated, with_air, opened.liquid, opened.stays[gas],
               opened.as_air[gas], m.gases[gas].molar_mass.at(trace));
}

}  // namespace capsigh
