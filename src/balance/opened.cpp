#include "capsigh/balance/opened.hpp"

#include <algorithm>
#include <cmath>

#include "capsigh/models/expansion.hpp"

namespace capsigh {

Contents flat_contents(const Medium& m, const Opened& opened, Pressure ambient, const Shares& air) {
  return contents(m, opened.at, mix(m, opened.at, air), ambient);
}

Contents contents_in_time(const Opened& opened, const Contents& flat, Fraction left) {
  Contents now;
  for (std::size_t i = 0; i < flat.size(); ++i) {
    now.push_back(ContentInTime{}(opened.contents[i], flat[i], left));
  }
  return now;
}

Filling closed_again(const Medium& m, const Filling& filling, const ClosedState& state,
                     const Opened& opened, const Contents& now, Fraction left, Pressure ambient,
                     const Shares& air) {
  double shrunk = 0;  // m³
  for (std::size_t i = 0; i < now.size(); ++i) {
    shrunk +=
        (opened.contents[i] - now[i]).value() * opened.at.v[i].value() * opened.liquid.value();
  }
  // The room the liquid makes fills with air; into a vacuum, air rushes at once.
  ClosedState room = state;
  room.mixture = mix(m, state.at, air);
  room.headspace = from_si<Volume>(std::abs(shrunk));
  const Amount made_room = gas_in_headspace(nullptr, m, room, ambient) * (shrunk < 0 ? -1.0 : 1.0);
  ClosedState relaxed = state;
  relaxed.headspace = opened.headspace;
  const Amount rushes_in = std::max(gas_in_headspace(nullptr, m, relaxed, ambient) -
                                        gas_in_headspace(nullptr, m, state, state.pressure),
                                    Amount{});
  Filling again = filling;
  for (std::size_t i = 0; i < now.size(); ++i) {
    const Amount gas = opened.as_air[i] + left * (opened.stays[i] - opened.as_air[i]);
    const Amount more = air[i] * (made_room + left * rushes_in);
    again.amounts[i] = now[i] * opened.liquid + std::max(gas + more, Amount{});
  }
  return again;
}

Temperature cold_of_opening(Trace* trace, const Shares& shares,
                            const PerGas<CitedConstant<Fraction>>& ratios, Temperature t,
                            Pressure before, Pressure ambient) {
  double heat_capacity = 0;
  for (std::size_t i = 0; i < shares.size(); ++i) {
    if (!(shares[i].value() > 0)) continue;
    const double gamma = ratios[i].at(trace).value();
    heat_capacity += shares[i].value() * gamma / (gamma - 1.0);
  }
  const auto gamma = apply(trace, MixtureHeatRatio{}, Fraction(heat_capacity));
  return apply(trace, AdiabaticExpansion{}, t, before, ambient, gamma);
}

}  // namespace capsigh
