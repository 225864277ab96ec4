#include "capsigh/balance/contact.hpp"

#include <algorithm>
#include <cmath>

#include "root.hpp"

namespace capsigh {

Molality content(Trace* trace, const Medium& m, const AtTemperature& at, const GasMixture& mixture,
                 Pressure p, std::size_t gas) {
  const auto partial = apply(trace, DaltonsLaw{}, mixture.shares[gas], p, at.vapour);
  const auto phi =
      apply(trace, m.truncation, FugacityCoefficient{m.r}, mixture.b_star[gas], p, at.t);
  const auto fugacity = apply(trace, Fugacity{}, phi, partial);
  const auto k =
      apply(trace, PressureOnHenry{m.r}, at.k[gas], at.v[gas], p, at.k_reference[gas], at.t);
  return apply(trace, HenrysLaw{}, k, fugacity, at.density);
}

Contents contents(const Medium& m, const AtTemperature& at, const GasMixture& mixture, Pressure p) {
  Contents all;
  for (std::size_t i = 0; i < m.size(); ++i) {
    all.push_back(content(nullptr, m, at, mixture, p, i));
  }
  return all;
}

std::optional<Refusal> pressure_refusal(const Medium& m, const AtTemperature& at, Pressure p) {
  if (p <= at.vapour) return Refusal{RefusalCode::boils, p.value(), at.vapour.value()};
  if (p > m.pressure_limit) {
    return Refusal{RefusalCode::pressure_beyond_model, p.value(), m.pressure_limit.value()};
  }
  return std::nullopt;
}

OrRefusal<Pressure> pressure_for(const Medium& m, const AtTemperature& at,
                                 const GasMixture& mixture, std::size_t gas, Molality wanted) {
  if (!(mixture.shares[gas].value() > 0)) {
    return Refusal{RefusalCode::nothing_of_that_gas, wanted.value(), 0};
  }
  const auto residual = [&](double pascal) {
    return (content(nullptr, m, at, mixture, from_si<Pressure>(pascal), gas) - wanted).value();
  };
  const auto root =
      balance_detail::root_between(residual, at.vapour.value(), m.pressure_limit.value());
  if (!root) {
    return Refusal{RefusalCode::no_pressure_holds, wanted.value(), m.pressure_limit.value()};
  }
  return from_si<Pressure>(*root);
}

OrRefusal<Temperature> temperature_for(const Medium& m, const Shares& shares, Pressure p,
                                       std::size_t gas, Molality wanted) {
  if (!(shares[gas].value() > 0)) {
    return Refusal{RefusalCode::nothing_of_that_gas, wanted.value(), 0};
  }
  const auto residual = [&](double kelvin) {
    const auto at = at_temperature(m, from_si<Temperature>(kelvin));
    if (p <= at.vapour) return -wanted.value();  // boiling liquid holds nothing
    return (content(nullptr, m, at, mix(m, at, shares), p, gas) - wanted).value();
  };
  const auto& search = m.temperature_search;
  const auto root = balance_detail::root_between(residual, search.low, search.high);
  if (!root) {
    return Refusal{RefusalCode::no_temperature_holds, wanted.value(), search.low};
  }
  return from_si<Temperature>(*root);
}

}  // namespace capsigh
