#include "capsigh/balance/closed_container.hpp"

#include <cmath>
#include <numeric>

#include "capsigh/balance/bracketing.hpp"

namespace capsigh {
namespace {

// Dissolved gas swells the liquid: Σ b_i v̄_i, volume per mass of degassed liquid.
double swelling(const AtTemperature& at, const Contents& contents) {
  double sum = 0;
  for (std::size_t i = 0; i < contents.size(); ++i) {
    sum += contents[i].value() * at.v[i].value();
  }
  return sum;
}

Volume headspace_of(const Filling& filling, const AtTemperature& at, const Contents& contents) {
  const double liquid =
      filling.liquid.value() * (1.0 / at.density.value() + swelling(at, contents));
  return filling.brimful - from_si<Volume>(liquid);
}

Fraction compressibility(Trace* trace, const Medium& m, const AtTemperature& at,
                         const GasMixture& mixture, Pressure p) {
  return apply(trace, m.truncation, Compressibility{m.r}, mixture.b_mix, p, at.t);
}

double total(const PerGas<Amount>& amounts) {
  return std::accumulate(amounts.begin(), amounts.end(), 0.0,
                         [](double sum, const Amount& n) { return sum + n.value(); });
}

Shares shares_by_amount(const PerGas<Amount>& amounts) {
  Shares shares;
  const double sum = total(amounts);
  for (const auto& n : amounts) shares.emplace_back(n.value() / sum);
  return shares;
}

// The distribution of the conserved moles at one trial pressure: the shares are iterated until they
// stand (they enter their own equilibrium only through non-ideality and swelling, so it is quick).
class TrialPressure {
 public:
  TrialPressure(const Medium& m, const Filling& filling, const AtTemperature& at)
      : m_(m), filling_(filling), shares_(shares_by_amount(filling.amounts)) {
    state_.at = at;
  }

  // Σ y_i − 1: above zero where the moles need more pressure.
  double operator()(double pascal) {
    state_.pressure = from_si<Pressure>(pascal);
    double excess = 0;
    constexpr int most_rounds = 200;
    constexpr double settled = 1e-14;
    for (int round = 0; round < most_rounds; ++round) {
      const double change = redistribute(excess);
      if (change < settled) break;
    }
    return excess;
  }

  [[nodiscard]] const ClosedState& state() const { return state_; }

 private:
  double redistribute(double& excess) {
    state_.mixture = mix(m_, state_.at, shares_);
    state_.contents = contents(m_, state_.at, state_.mixture, state_.pressure);
    state_.headspace = headspace_of(filling_, state_.at, state_.contents);
    state_.z = compressibility(nullptr, m_, state_.at, state_.mixture, state_.pressure);
    const double gas = gas_in_headspace(nullptr, m_, state_, state_.pressure).value();
    Shares next;
    double sum = 0;
    for (std::size_t i = 0; i < shares_.size(); ++i) {
      const double share = shares_[i].value();
      const double dissolved_per_share =
          share > 0 ? state_.contents[i].value() / share * filling_.liquid.value() : 0.0;
      const double held = dissolved_per_share + std::max(gas, 0.0);
      next.emplace_back(share > 0 ? filling_.amounts[i].value() / held : 0.0);
      sum += next.back().value();
    }
    double change = 0;
    for (std::size_t i = 0; i < shares_.size(); ++i) {
      const Fraction share = next[i] / sum;
      change = std::max(change, std::abs((share - shares_[i]).value()));
      shares_[i] = share;
    }
    excess = sum - 1.0;
    return change;
  }

  const Medium& m_;
  const Filling& filling_;
  Shares shares_;
  ClosedState state_;
};

}  // namespace

Amount gas_in_headspace(Trace* trace, const Medium& m, const ClosedState& state, Pressure p) {
  return apply(trace, GasInHeadspace{m.r}, p, state.at.vapour, state.headspace,
               compressibility(trace, m, state.at, state.mixture, p), state.at.t);
}

namespace {

double volume_per_mass(const AtTemperature& at, const Contents& contents) {
  return 1.0 / at.density.value() + swelling(at, contents);
}

// Degassed liquid behind the fill.
Mass degassed(const Medium& m, const AtTemperature& at, const Closing& closing) {
  if (!(closing.fill_mass.value() > 0)) {
    return from_si<Mass>(closing.fill.value() / volume_per_mass(at, closing.contents));
  }
  double gas_per_mass = 0;
  for (std::size_t i = 0; i < m.size(); ++i) {
    gas_per_mass += (closing.contents[i] * m.gases[i].molar_mass.at(nullptr)).value();
  }
  return closing.fill_mass / (1.0 + gas_per_mass);
}

}  // namespace

Volume liquid_volume(const Medium& m, const AtTemperature& at, const Closing& closing) {
  return from_si<Volume>(degassed(m, at, closing).value() * volume_per_mass(at, closing.contents));
}

Filling close(const Medium& m, const Liquid& liquid, const Closing& closing) {
  ClosedState state;
  state.at = at_temperature(m, liquid, closing.temperature);
  state.mixture = mix(m, state.at, closing.headspace);
  state.headspace = closing.brimful - liquid_volume(m, state.at, closing);
  Filling filling;
  filling.brimful = closing.brimful;
  filling.liquid = degassed(m, state.at, closing);
  const Amount gas = gas_in_headspace(nullptr, m, state, closing.pressure);
  for (std::size_t i = 0; i < m.size(); ++i) {
    filling.amounts.push_back(closing.contents[i] * filling.liquid + closing.headspace[i] * gas);
  }
  if (closing.nitrogen < m.size()) {
    filling.amounts[closing.nitrogen] += closing.nitrogen_dose;
  }
  return filling;
}

OrRefusal<ClosedState> equilibrium(const Medium& m, const Liquid& liquid, const Filling& filling,
                                   Temperature t) {
  const AtTemperature at = at_temperature(m, liquid, t);
  TrialPressure trial(m, filling, at);
  const auto residual = [&](double pascal) { return trial(pascal); };
  // Just above the vapour pressure the shares needed to hold the moles exceed one; at the limit of
  // the model they fall below it, or the package is beyond it.
  const double low = at.vapour.value() * (1.0 + 1e-9);
  const auto root = root_between(residual, low, m.pressure_limit.value());
  if (!root) {
    return Refusal{RefusalCode::pressure_beyond_model, m.pressure_limit.value(),
                   m.pressure_limit.value()};
  }
  trial(*root);
  const ClosedState& state = trial.state();
  if (!(state.headspace.value() > 0)) {
    return Refusal{RefusalCode::container_without_space, state.headspace.value(),
                   filling.brimful.value()};
  }
  return state;
}

}  // namespace capsigh
