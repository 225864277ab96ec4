#include "capsigh/balance/contact.hpp"

#include <algorithm>
#include <cmath>

#include "capsigh/balance/bracketing.hpp"

namespace capsigh {

namespace {

// One gas over a liquid, by composition.
Molality by_composition(Trace* trace, const Medium& m, const CarbonDioxideAt& at, Fraction share,
                        MolarVolume b_star, Pressure p) {
  const auto partial = apply(trace, DaltonsLaw{}, share, p, at.vapour);
  const auto phi = apply(trace, m.truncation, FugacityCoefficient{m.r}, b_star, p, at.t);
  const auto fugacity = apply(trace, Fugacity{}, phi, partial);
  const auto k = apply(trace, PressureOnHenry{m.r}, at.k, at.v, p, at.k_reference, at.t);
  return apply(trace, HenrysLaw{}, k, fugacity, at.density);
}

Molality of_pure(const Medium& m, const CarbonDioxideAt& at, Pressure p) {
  return by_composition(nullptr, m, at, Fraction(1.0), at.b, p);
}

// The relation's content as a molality of the degassed liquid.
Molality by_relation(const Medium& m, const AtTemperature& at, Pressure p) {
  const Temperature t = at.convention_at.t;
  const auto molar_mass = m.gases[m.co2].molar_mass.at(nullptr);
  const auto volumes = [&](Fraction vol) {
    return vol / volume_basis(m, m.co2, false) / at.density_20;
  };
  return std::visit(
      [&](const auto& relation) -> Molality {
        using Form = std::decay_t<decltype(relation)>;
        if constexpr (std::is_same_v<Form, AsbcRelation>) {
          return volumes(relation(t, p));
        } else if constexpr (std::is_same_v<Form, MebakRelation>) {
          return relation(t, p) / molar_mass;
        } else if constexpr (std::is_same_v<Form, OivRelation>) {
          return relation(t, p, at.ethanol_by_volume, at.sugar) / molar_mass / at.density_20;
        } else if constexpr (std::is_same_v<Form, WaterEquivalent>) {
          return of_pure(*relation.water, at.water_at, p) * at.water_at_20 / at.density_20;
        } else {
          return Molality{};
        }
      },
      m.convention.relation);
}

// The convention's factor for CO2 at a partial pressure: in its range, or carried from the edge.
Fraction convention_factor(Trace* trace, const Medium& m, const AtTemperature& at,
                           const GasMixture& mixture, Pressure p) {
  const auto over_pure = mixture.shares[m.co2] * (p - at.vapour) + at.vapour;
  const auto& range = m.convention.pressure;
  // Near the vapour pressure a relation says nothing: there it is read where some CO2 is.
  const double least =
      std::max(range.low, (at.convention_at.vapour + m.convention.least_partial).value());
  const auto read_at =
      from_si<Pressure>(std::clamp(over_pure.value(), least, std::max(least, range.high)));
  return apply_defined(trace, m.convention.record, {at.t, over_pure}, ConventionFactor{},
                       by_relation(m, at, read_at), of_pure(m, at.convention_at, read_at));
}

}  // namespace

Molality content(Trace* trace, const Medium& m, const AtTemperature& at, const GasMixture& mixture,
                 Pressure p, std::size_t gas) {
  const CarbonDioxideAt state{at.t,      at.vapour, at.density, at.k[gas], at.k_reference[gas],
                              at.v[gas], at.b[gas]};
  const auto b = by_composition(trace, m, state, mixture.shares[gas], mixture.b_star[gas], p);
  if (gas != m.co2 || !m.convention.in_force()) return b;
  return apply(trace, ContentAsTested{}, convention_factor(trace, m, at, mixture, p), b);
}

Contents contents(const Medium& m, const AtTemperature& at, const GasMixture& mixture, Pressure p) {
  Contents all;
  for (std::size_t i = 0; i < m.size(); ++i) {
    all.push_back(content(nullptr, m, at, mixture, p, i));
  }
  return all;
}

std::optional<Refusal> pressure_refusal(const Medium& m, const AtTemperature& at,
                                        const Shares& shares, Pressure p) {
  if (!m.temperature_search.contains(at.t.kelvin())) {
    const auto& range = m.temperature_search;
    return Refusal{RefusalCode::temperature_beyond_model, at.t.kelvin(),
                   at.t.kelvin() < range.low ? range.low : range.high};
  }
  if (p <= at.vapour) return Refusal{RefusalCode::boils, p.value(), at.vapour.value()};
  if (p > m.pressure_limit) {
    return Refusal{RefusalCode::pressure_beyond_model, p.value(), m.pressure_limit.value()};
  }
  if (m.co2 < m.size()) {
    const auto condenses = m.condensation(at.t);
    const auto partial = shares[m.co2] * (p - at.vapour);
    if (partial >= condenses) {
      return Refusal{RefusalCode::condenses, partial.value(), condenses.value()};
    }
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
  // At the vapour pressure itself there is no gas, and a convention's factor has no value.
  const double low = at.vapour.value() * (1.0 + 1e-9);
  const auto root = root_between(residual, low, m.pressure_limit.value());
  if (!root) {
    return Refusal{RefusalCode::no_pressure_holds, wanted.value(), m.pressure_limit.value()};
  }
  return from_si<Pressure>(*root);
}

OrRefusal<Temperature> temperature_for(const Medium& m, const Liquid& liquid, const Shares& shares,
                                       Pressure p, std::size_t gas, Molality wanted,
                                       const LiquidColumn& column) {
  if (!(shares[gas].value() > 0)) {
    return Refusal{RefusalCode::nothing_of_that_gas, wanted.value(), 0};
  }
  const auto residual = [&](double kelvin) {
    const auto at = at_temperature(m, liquid, from_si<Temperature>(kelvin));
    if (p <= at.vapour) return -wanted.value();  // boiling liquid holds nothing
    const auto below = p + HydrostaticHead{column.gravity}(at.density, column.depth);
    return (content(nullptr, m, at, mix(m, at, shares), below, gas) - wanted).value();
  };
  // A gas may have a minimum of solubility and two temperatures: the coldest is taken, found by
  // walking up from the cold end.
  const auto& search = m.temperature_search;
  constexpr int steps = 30;
  const double step = search.width() / steps;
  double low = search.low;
  if (residual(low) < 0) {
    return Refusal{RefusalCode::no_temperature_holds, wanted.value(), search.low};
  }
  for (int i = 0; i < steps; ++i, low += step) {
    if (const auto root = root_between(residual, low, low + step)) {
      return from_si<Temperature>(*root);
    }
  }
  return Refusal{RefusalCode::too_little_everywhere, wanted.value(), search.high};
}

}  // namespace capsigh
