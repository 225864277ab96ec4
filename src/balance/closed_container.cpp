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

Volume headspace_of(const Filling& filling, const AtTemperature& at, const Contents& contents,
                    Pressure p) {
  const double liquid =
      filling.liquid.value() * (1.0 / at.density.value() + swelling(at, contents));
  return stretched(nullptr, filling.shell, p) - from_si<Volume>(liquid);
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

// The distribution of the conserved moles over liquid and headspace at a trial pressure.
class Distribution {
 public:
  Distribution(const Medium& m, const Filling& filling, const AtTemperature& at)
      : m_(m), filling_(filling), shares_(shares_by_amount(filling.amounts)) {
    state_.at = at;
  }

  void start_from(const Shares& shares) { shares_ = shares; }

  // One round at p, Pa: the total pressure less p that the moles need at the present shares, which
  // are then brought up to date.
  double round(double p) {
    state_.pressure = from_si<Pressure>(p);
    state_.mixture = mix(m_, state_.at, shares_);
    state_.contents = contents(m_, state_.at, state_.mixture, state_.pressure);
    state_.headspace = headspace_of(filling_, state_.at, state_.contents, state_.pressure);
    state_.z = compressibility(nullptr, m_, state_.at, state_.mixture, state_.pressure);
    const double dry = p - state_.at.vapour.value();
    const double gas = gas_in_headspace(nullptr, m_, state_, state_.pressure).value();
    const double room = std::max(gas, 0.0) / dry;  // mol per Pa of partial pressure
    const double liquid = filling_.liquid.value();
    PerGas<double> partial;
    double sum = 0;
    for (std::size_t i = 0; i < shares_.size(); ++i) {
      const double share = shares_[i].value();
      // Of a gas without a share nothing is known to dissolve; it has no moles either.
      const double dissolves =
          share > 0 ? state_.contents[i].value() * liquid / (share * dry) : 0.0;
      partial.push_back(share > 0 ? filling_.amounts[i].value() / (dissolves + room) : 0.0);
      sum += partial.back();
    }
    change_ = 0;
    for (std::size_t i = 0; i < shares_.size(); ++i) {
      const Fraction share(partial[i] / sum);
      change_ = std::max(change_, std::abs((share - shares_[i]).value()));
      shares_[i] = share;
    }
    return state_.at.vapour.value() + sum - p;
  }

  // The same with the shares settled.
  double settled_round(double p) {
    constexpr int most_rounds = 200;
    double missing = round(p);
    for (int i = 0; i < most_rounds && change_ > kSettled; ++i) missing = round(p);
    return missing;
  }

  // Secant steps with the shares on the way; nullopt where they do not come to rest inside the
  // model.
  std::optional<double> quick_root(double start) {
    constexpr int most_rounds = 40;
    const double least = state_.at.vapour.value();
    const double most = m_.pressure_limit.value();
    double before = start;
    double missing_before = round(before);
    double p = std::clamp(before + missing_before, 0.5 * (least + before), 0.5 * (most + before));
    for (int i = 0; i < most_rounds; ++i) {
      const double missing = round(p);
      if (std::abs(missing) <= kSettled * p && change_ <= kSettled) return p;
      const double slope = (missing - missing_before) / (p - before);
      const double next = slope < 0 ? p - missing / slope : p + missing;
      before = p;
      missing_before = missing;
      if (!(next > least && next < most) || next == p) return std::nullopt;
      p = next;
    }
    return std::nullopt;
  }

  [[nodiscard]] const ClosedState& state() const { return state_; }

 private:
  static constexpr double kSettled = 1e-14;  // relative: differences at z = ±1 stay clean
  const Medium& m_;
  const Filling& filling_;
  Shares shares_;
  ClosedState state_;
  double change_ = 0;
};

// The state of the moles at equilibrium, whether or not a headspace is left. nullopt: beyond the
// gas law.
std::optional<ClosedState> distributed(const Medium& m, const Filling& filling,
                                       const AtTemperature& at, const ClosedState* near) {
  Distribution distribution(m, filling, at);
  if (near != nullptr) distribution.start_from(near->mixture.shares);
  const double start = near != nullptr ? std::max(near->pressure.value(), 1.01 * at.vapour.value())
                                       : at.vapour.value() + m.atmosphere.value();
  if (distribution.quick_root(start)) return distribution.state();
  const auto missing = [&](double pascal) { return distribution.settled_round(pascal); };
  // Just above the vapour pressure the moles need more than there is; at the limit of the model
  // they need less, or the package is beyond it.
  distribution.start_from(shares_by_amount(filling.amounts));
  const double low = at.vapour.value() * (1.0 + 1e-9);
  const auto root = root_between(missing, low, m.pressure_limit.value());
  if (!root) return std::nullopt;
  distribution.settled_round(*root);
  return distribution.state();
}

}  // namespace

Volume stretched(Trace* trace, const Shell& shell, Pressure p) {
  if (!(shell.stretch.value() > 0)) return shell.brimful;
  return apply(trace, StretchedVolume{}, shell.brimful, shell.stretch, gauge(p, shell.ambient));
}

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
  return close(m, at_temperature(m, liquid, closing.temperature), closing);
}

Filling close(const Medium& m, const AtTemperature& at, const Closing& closing) {
  ClosedState state;
  state.at = at;
  state.mixture = mix(m, state.at, closing.headspace);
  state.headspace =
      stretched(nullptr, closing.shell, closing.pressure) - liquid_volume(m, state.at, closing);
  Filling filling;
  filling.shell = closing.shell;
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

OrRefusal<ClosedState> equilibrium(const Medium& m, const Filling& filling, const AtTemperature& at,
                                   const ClosedState* near) {
  const auto state = distributed(m, filling, at, near);
  if (!state) {
    return Refusal{RefusalCode::pressure_beyond_model, m.pressure_limit.value(),
                   m.pressure_limit.value()};
  }
  if (!(state->headspace.value() > 0)) {
    return Refusal{RefusalCode::container_without_space, state->headspace.value(),
                   filling.shell.brimful.value()};
  }
  return *state;
}

OrRefusal<ClosedState> equilibrium(const Medium& m, const Liquid& liquid, const Filling& filling,
                                   Temperature t) {
  return equilibrium(m, filling, at_temperature(m, liquid, t));
}

std::optional<Temperature> liquid_full_temperature(const Medium& m, const Liquid& liquid,
                                                   const Filling& filling, Temperature from,
                                                   Temperature to) {
  // Beyond the gas law a rigid package counts as full: its state is not known.
  const auto headspace = [&](double kelvin) {
    const auto at = at_temperature(m, liquid, from_si<Temperature>(kelvin));
    const auto state = distributed(m, filling, at, nullptr);
    return state ? state->headspace.value() : -filling.shell.brimful.value();
  };
  const auto root = root_between(headspace, from.kelvin(), to.kelvin());
  if (!root) return std::nullopt;
  // At the end of the gas law there is a jump, and no temperature at which the package is full.
  const auto state =
      distributed(m, filling, at_temperature(m, liquid, from_si<Temperature>(*root)), nullptr);
  constexpr double touching = 1e-6;  // of the brimful volume
  if (!state || std::abs(state->headspace.value()) > touching * filling.shell.brimful.value()) {
    return std::nullopt;
  }
  return from_si<Temperature>(*root);
}

}  // namespace capsigh
