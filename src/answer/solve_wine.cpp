// Wines are classed by the gauge pressure of the closed bottle at 20 °C; without a container, by
// the pressure that holds the content there.
#include "solver.hpp"

namespace capsigh::answer_detail {

// Where there is no such pressure the rest of the answer stands without it.
void Solver::answer_wine() {
  const auto twenty = m_.content_temperature;
  Pressure p{};
  if (c_.container) {
    const auto found = equilibrium(m_, liquid_, filling_, twenty);
    if (refused(found) != nullptr) return;
    const auto& state = std::get<ClosedState>(found);
    p = state.pressure;
    if (trace_ != nullptr) trace_wine(state);
  } else {
    const auto at = at_temperature(m_, liquid_, twenty);
    const auto found =
        pressure_for(m_, at, mix(m_, at, contact_.shares), m_.co2, contact_.contents[m_.co2]);
    if (refused(found) != nullptr) return;
    p = std::get<Pressure>(found);
    if (trace_ != nullptr) trace_wine(p);
  }
  answer_.wine_gauge = gauge(p, contact_.ambient);
}

void Solver::trace_wine(Pressure root) {
  trace_->begin("wine.pressure_gauge");
  const auto twenty = m_.content_temperature;
  const auto at = at_temperature(m_, liquid_, twenty, {trace_, m_.co2, &contact_.shares});
  const auto b = content(trace_, m_, at, mix(m_, at, contact_.shares), root, m_.co2);
  const auto p = apply(trace_, SolvedPressure{root}, b, twenty);
  apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
}

void Solver::trace_wine(const ClosedState& state) {
  trace_->begin("wine.pressure_gauge");
  const auto b = trace_state(state);
  const auto p = apply(trace_, SolvedPressure{state.pressure}, b, state.at.t);
  apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
}

}  // namespace capsigh::answer_detail
