// The closed package: how it is closed, and its states in storage.
#include "solver.hpp"

namespace capsigh::answer_detail {

Pressure Solver::closing_pressure() const {
  if (c_.container->closing_absolute) return c_.container->closing_absolute->now();
  return absolute(c_.container->closing_gauge.now(), contact_.ambient);
}

// The dry headspace at closing: its air, the rest the recipe's gas.
Shares Solver::headspace_at_closing(Fraction air) const {
  Shares shares;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    shares.push_back(c_.air[i] * air + contact_.shares[i] * (1.0 - air));
  }
  return shares;
}

// What is left in the liquid at closing: filling losses off, its oxygen as measured.
Contents Solver::at_closing(Contents reached) const {
  for (const auto& loss : c_.container->filling_loss) {
    reached[loss.gas] = std::max(reached[loss.gas] - molality(loss), Molality{});
  }
  if (c_.container->closing_oxygen) {
    reached[c_.container->closing_oxygen->gas] = molality(*c_.container->closing_oxygen);
  }
  return reached;
}

Temperature Solver::closing_temperature() const {
  const auto& given = c_.container->closing_temperature;
  return given ? given->now() : contact_.at.t;
}

// Z of the dry headspace with that share of air, over Z of air at ambient.
double Solver::z_over_air(const AtTemperature& at, Pressure p, Fraction air) const {
  const auto z = [&](const Shares& shares, Pressure at_pressure) {
    return Compressibility{m_.r}(mix(m_, at, shares).b_mix, at_pressure, at.t).value();
  };
  return z(headspace_at_closing(air), p) / z(c_.air, contact_.ambient);
}

// A volume of air at ambient, as a share of the dry gas in the headspace: p_amb V_air/Z_air of
// (p − p_v) V_H/Z. Z of the headspace depends on the share, by little.
Fraction Solver::share_of_air(const AtTemperature& at, Pressure p, Volume headspace) const {
  const Fraction ideal =
      contact_.ambient * c_.container->closing_air_volume->now() / ((p - at.vapour) * headspace);
  Fraction air = ideal;
  constexpr int rounds = 6;
  for (int i = 0; i < rounds && air.value() <= 1; ++i) air = ideal * z_over_air(at, p, air);
  return air;
}

// Closed with what the liquid reached; `fill` instead of the recipe's, where it is given.
OrRefusal<Closing> Solver::closing_with(const AtTemperature& at, const Contents& reached,
                                        std::optional<Volume> fill) const {
  const auto& given = *c_.container;
  Closing closing;
  closing.temperature = at.t;
  closing.pressure = closing_pressure();
  closing.contents = at_closing(reached);
  if (given.fill) closing.fill = given.fill->now();
  if (given.fill_mass) closing.fill_mass = given.fill_mass->now();
  if (fill) {
    closing.fill = *fill;
    closing.fill_mass = Mass{};
  }
  closing.shell = {given.brimful.now(), stretch(), contact_.ambient};
  if (closing.pressure <= at.vapour) {
    return Refusal{RefusalCode::boils, closing.pressure.value(), at.vapour.value()};
  }
  const auto headspace =
      stretched(nullptr, closing.shell, closing.pressure) - liquid_volume(m_, at, closing);
  if (!(headspace.value() > 0)) {
    return Refusal{RefusalCode::container_without_space, headspace.value(),
                   closing.shell.brimful.value()};
  }
  Fraction air = given.closing_air.now();
  if (given.closing_air_volume) {
    air = share_of_air(at, closing.pressure, headspace);
    if (air.value() > 1) {
      return Refusal{RefusalCode::air_exceeds_headspace, air.value(), 1};
    }
  }
  closing.headspace = headspace_at_closing(air);
  if (given.nitrogen_dose) {
    for (std::size_t i = 0; i < m_.size(); ++i) {
      if (m_.gases[i].name == "N2") closing.nitrogen = i;
    }
    closing.nitrogen_dose =
        given.nitrogen_dose->now() / m_.gases[closing.nitrogen].molar_mass.at(nullptr);
  }
  return closing;
}

// Growth of the container under pressure: stated, typical of its kind, or none.
Compliance Solver::stretch() const {
  const auto& container = *c_.container;
  if (container.stretch) return container.stretch->now();
  return container.typical_stretch ? by_factor(*container.typical_stretch, nullptr) : Compliance{};
}

bool Solver::rated() const { return c_.container->rated_gauge || c_.container->rated_absolute; }

std::optional<Refusal> Solver::answer_container() {
  at_closing_ = at_temperature(m_, liquid_, closing_temperature());
  const auto closing = closing_with(at_closing_, filled_with());
  if (const auto* no = refused(closing)) return *no;
  closing_ = std::get<Closing>(closing);
  filling_ = fermented(close(m_, at_closing_, closing_));
  for (const auto& t : c_.container->storage) {
    if (auto no = answer_storage(t.now())) return no;
  }
  if (c_.container->storage.empty()) {
    if (auto no = answer_at(closing_.temperature)) return no;
  } else {
    answer_closing();
  }
  answer_inverses();
  answer_oxygen();
  answer_shelf();
  if (trace_ != nullptr) trace_package();
  return std::nullopt;
}

// The package at T, settled.
std::optional<Refusal> Solver::answer_at(Temperature t) {
  const auto found = equilibrium(m_, liquid_, filling_, t);
  if (const auto* no = refused(found)) return *no;
  settled_.push_back(std::get<ClosedState>(found));
  if (!closed_ && !unsettled_) closed_ = settled_.back();
  answer_.package.at.push_back(container_figures(*settled_.back()));
  return std::nullopt;
}

// The package at a storage temperature. One at which it has no state is a finding, not the end of
// the report.
std::optional<Refusal> Solver::answer_storage(Temperature t) {
  const auto& search = m_.temperature_search;
  if (t.kelvin() > search.high) {
    return Refusal{RefusalCode::temperature_beyond_model, t.kelvin(), search.high};
  }
  std::optional<Refusal> no;
  if (t.kelvin() < search.low) {
    no = Refusal{RefusalCode::temperature_beyond_model, t.kelvin(), search.low};
  } else {
    no = answer_at(t);
  }
  if (!no) return std::nullopt;
  if (!closed_ && !unsettled_) unsettled_ = no;
  settled_.emplace_back();
  ContainerFigures f;
  f.temperature = t;
  f.without_state = no->code;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_container[i] == 0) continue;
    f.gases.emplace_back().gas = m_.gases[i].name;  // slots keep their places
  }
  answer_.package.at.push_back(f);
  return std::nullopt;
}

// Rating less the package's pressure; without a rating, nothing to be asked.
Pressure Solver::margin(const ClosedState& state) const {
  if (c_.container->rated_gauge) {
    return *c_.container->rated_gauge - gauge(state.pressure, contact_.ambient);
  }
  return c_.container->rated_absolute ? *c_.container->rated_absolute - state.pressure : Pressure{};
}

ContainerFigures Solver::container_figures(const ClosedState& state) const {
  ContainerFigures f;
  f.temperature = state.at.t;
  f.pressure_absolute = state.pressure;
  f.pressure_gauge = gauge(state.pressure, contact_.ambient);
  f.ullage = state.headspace / filling_.shell.brimful;
  if (rated()) f.margin = margin(state);
  f.vapour = state.at.vapours.water;
  if (liquid_.x_ethanol.value() > 0) f.ethanol = state.at.vapours.ethanol;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_container[i] == 0) continue;
    f.gases.push_back(
        gas_figures(i, state.contents, state.mixture, state.pressure, state.at.vapour));
  }
  return f;
}

}  // namespace capsigh::answer_detail
