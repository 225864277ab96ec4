// Traces of the closed package: every figure evaluated once more at the solution, noted.
#include "solver.hpp"

namespace capsigh::answer_detail {
namespace {

/// Roots and sums as steps of a trace.
struct SolvedSafeTemperature {
  Temperature root;
  static constexpr LawInfo<1> info{
      "temperature at which the rating is reached", "T: p(T) = p_rated", {"p_rated"}, "T"};
  Temperature operator()(Pressure) const { return root; }
};
struct SolvedFullTemperature {
  Temperature root;
  static constexpr LawInfo<1> info{
      "temperature from which the liquid fills the package", "T: V_L(T) = V", {"V0"}, "T"};
  Temperature operator()(Volume) const { return root; }
};
struct SolvedFill {
  Volume root{};
  static constexpr LawInfo<2> info{
      "largest fill", "V_fill: the ullage and the rating are just kept", {"V0", "T"}, "V_fill"};
  Volume operator()(Volume, Temperature) const { return root; }
};
struct SolvedTime {
  Duration root{};
  static constexpr LawInfo<1> info{
      "time until the limit", "t: n(t) = n_limit, dn/dt = -w (p - p_out)", {"w"}, "t"};
  Duration operator()(LeakRate) const { return root; }
};
struct OxygenInPackage {
  static constexpr LawInfo<4> info{"oxygen in the package, dissolved and in the headspace",
                                   "c = n M rho20/m_L",
                                   {"n", "M", "rho20", "m_L"},
                                   "c"};
  MassConcentration operator()(Amount n, MolarMass m, MassDensity rho, Mass liquid) const {
    return n * m * rho / liquid;
  }
};
struct AllowedAir {
  Volume root{};
  static constexpr LawInfo<1> info{
      "air that brings the oxygen to its limit", "V_air: n_O2 = n_limit", {"n_limit"}, "V_air"};
  Volume operator()(Amount) const { return root; }
};

std::string at_index(std::string_view list, std::size_t i) {
  return "container." + std::string(list) + "." + std::string(detail::kIndices[i]) + ".";
}

}  // namespace

void Solver::trace_package() {
  for (std::size_t i = 0; i < settled_.size(); ++i) {
    if (!settled_[i]) continue;
    trace_->begin(at_index("at", i) + "pressure_gauge");
    trace_gauge(*settled_[i]);
  }
  trace_inverses();
  trace_oxygen();
  if (c_.container->shelf) trace_shelf();
}

void Solver::trace_gauge(const ClosedState& state) {
  const auto b = trace_state(state);
  const auto p = apply(trace_, SolvedPressure{state.pressure}, b, state.at.t);
  apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
}

void Solver::trace_inverses() {
  const auto& package = answer_.package;
  const auto state_at = [&](Temperature t) { return equilibrium(m_, liquid_, filling_, t); };
  if (package.closing_gauge.asked) {
    const auto state = state_at(closing_.temperature);
    if (refused(state) == nullptr) {
      trace_->begin("container.at_closing.pressure_gauge");
      trace_gauge(std::get<ClosedState>(state));
    }
  }
  if (package.safe_temperature.asked) {
    trace_->begin("container.safe_temperature");
    const auto root = package.safe_temperature.value;
    const auto state = state_at(root);
    if (refused(state) == nullptr) trace_state(std::get<ClosedState>(state));
    const auto allowed = c_.container->rated_absolute
                             ? *c_.container->rated_absolute
                             : absolute(*c_.container->rated_gauge, ambient(trace_));
    apply(trace_, SolvedSafeTemperature{root}, allowed);
  }
  if (package.liquid_full.asked) {
    trace_->begin("container.liquid_full");
    at_temperature(m_, liquid_, package.liquid_full.value, {trace_, m_.co2});
    apply(trace_, SolvedFullTemperature{package.liquid_full.value}, filling_.shell.brimful);
  }
  if (package.largest_fill.asked) {
    trace_->begin("container.largest_fill");
    const auto closing = closing_with(at_closing_, filled_with(), package.largest_fill.value);
    if (refused(closing) == nullptr) {
      const auto filling = fermented(close(m_, at_closing_, std::get<Closing>(closing)));
      const auto state = equilibrium(m_, liquid_, filling, hottest());
      if (refused(state) == nullptr) trace_state(std::get<ClosedState>(state));
    }
    apply(trace_, SolvedFill{package.largest_fill.value}, filling_.shell.brimful, hottest());
  }
}

void Solver::trace_oxygen() {
  const auto gas = oxygen();
  if (gas >= m_.size()) return;
  trace_->begin("container.oxygen.total");
  if (closed_) trace_state(*closed_);
  apply(trace_, OxygenInPackage{}, filling_.amounts[gas], m_.gases[gas].molar_mass.at(trace_),
        density_of_content(trace_), filling_.liquid);
  const auto* limit = limit_of(gas);
  if (limit == nullptr) return;
  trace_->begin("container.oxygen.allowed_air");
  const auto air = allowed_air(trace_, *limit);
  apply(trace_, AllowedAir{air}, molality(*limit) * filling_.liquid);
}

void Solver::trace_shelf() {
  for (std::size_t i = 0; i < settled_.size(); ++i) {
    const auto& figures = answer_.package.shelf_life[i];
    if (!figures.until_limit.asked) continue;
    trace_->begin(at_index("shelf_life", i) + "until_limit");
    trace_state(*settled_[i]);
    const auto leaks = leaks_at(settled_[i]->at, trace_);
    LeakRate rate{};
    for (const auto& l : leaks) {
      if (m_.gases[l.gas].name == figures.gas) rate = l.rate;
    }
    apply(trace_, SolvedTime{figures.until_limit.value}, rate);
  }
}

}  // namespace capsigh::answer_detail
