// Traces: every main figure evaluated once more at the solution, noted.
#include "solver.hpp"

namespace capsigh::answer_detail {

// The chain of one gas's content at the contact, with the liquid above it and the approach to
// saturation.
Molality Solver::trace_taken_up(Temperature t, Pressure headspace, std::size_t gas) {
  const auto at = at_temperature(m_, liquid_, t, {trace_, gas, &contact_.shares});
  const auto b =
      content(trace_, m_, at, mix(m_, at, contact_.shares), below(at, headspace, trace_), gas);
  if (!c_.contact.approach) return b;
  return apply(trace_, ApproachToSaturation{}, approach(), b);
}

void Solver::trace_contact() {
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_contact[i] == 0) continue;
    const std::string at = "dissolved." + std::string(m_.gases[i].name);
    trace_->begin(at + ".mass_concentration");
    if (c_.contact.known != Known::temperature_content) given_pressure(trace_);
    const auto b = trace_taken_up(contact_.at.t, contact_.pressure, i);
    const auto c20 = apply(trace_, AmountPerLitre{}, b, density_of_content(trace_));
    apply(trace_, MassPerLitre{}, c20, m_.gases[i].molar_mass.at(trace_));
    trace_->begin(at + ".volumes");
    apply(trace_, VolumesOfGas{}, c20, volume_basis(m_, i, c_.ideal_volumes, trace_));
  }
  if (c_.contact.known == Known::temperature_content) {
    trace_pressure("condition.pressure_gauge", c_.contact.content->gas, contact_.pressure);
  } else if (c_.contact.known == Known::pressure_content) {
    trace_->begin("condition.temperature");
    const auto b = trace_taken_up(contact_.at.t, contact_.pressure, c_.contact.content->gas);
    apply(trace_, SolvedTemperature{contact_.at.t}, b, contact_.pressure);
  }
}

void Solver::trace_pressure(std::string figure, std::size_t gas, Pressure root) {
  trace_->begin(std::move(figure));
  const auto b = trace_taken_up(contact_.at.t, root, gas);
  const auto p = apply(trace_, SolvedPressure{root}, b, contact_.at.t);
  apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
}

void Solver::trace_temperature(const SaturationFigures& s, std::size_t gas) {
  trace_->begin("saturation." + std::string(s.gas) + ".temperature");
  const auto t = s.temperature.value;
  const auto b = trace_taken_up(t, contact_.pressure, gas);
  apply(trace_, SolvedTemperature{t}, b, contact_.pressure);
}

// Every gas of a closed state, and the gas in its headspace; returns the content of the gas that
// leads it (CO2 where there is some).
Molality Solver::trace_state(const ClosedState& state) {
  Molality leading{};
  const auto& shares = state.mixture.shares;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_container[i] == 0) continue;
    const auto at = at_temperature(m_, liquid_, state.at.t, {trace_, i, &shares, true});
    const auto b = content(trace_, m_, at, mix(m_, at, shares), state.pressure, i);
    if (leading.value() == 0 || i == m_.co2) leading = b;
  }
  if (c_.container->typical_stretch && !c_.container->stretch) {
    c_.container->typical_stretch->at(trace_);
  }
  stretched(trace_, filling_.shell, state.pressure);
  gas_in_headspace(trace_, m_, state, state.pressure);
  return leading;
}

void Solver::trace_losses(const Opened& opened, std::size_t gas, bool bubbles) {
  const std::string at = bubbles ? "opening." : "opening." + std::string(m_.gases[gas].name) + ".";
  trace_->begin(at + "headspace_loss");
  if (opened_state_) trace_state(*opened_state_);
  headspace_loss(trace_, m_, opened, gas);
  if (bubbles) {
    trace_->begin(at + "fizz_loss");
    at_temperature(m_, liquid_, opened.at.t, {trace_, gas, nullptr});
    fizz_loss(trace_, m_, opened, contact_.ambient, gas);
  }
  trace_->begin(at + "flat_loss");
  at_temperature(m_, liquid_, opened.at.t, {trace_, gas, &c_.air});
  flat_loss(trace_, m_, opened, contact_.ambient, c_.air, gas, bubbles);
}

}  // namespace capsigh::answer_detail
