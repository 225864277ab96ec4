// Carbonation by fermentation in the package: residual and produced CO2 together are its content.
#include "capsigh/balance/bracketing.hpp"
#include "solver.hpp"

namespace capsigh::answer_detail {

Shares Solver::pure_carbon_dioxide() const {
  Shares pure(m_.size(), Fraction(0.0));
  pure[m_.co2] = 1.0;
  return pure;
}

// What stayed dissolved before the sugar ferments: stated, or in equilibrium with pure CO2 at
// ambient pressure at the temperature at which the liquid last stood open.
OrRefusal<Molality> Solver::residual(Trace* trace) const {
  const auto& given = *c_.conditioning;
  if (given.residual) return molality(*given.residual);
  const auto t = given.residual_temperature ? given.residual_temperature->now()
                                            : c_.contact.temperature->now();
  const auto pure = pure_carbon_dioxide();
  const auto at = at_temperature(m_, liquid_, t, {trace, m_.co2, &pure});
  if (const auto no = pressure_refusal(m_, at, pure, contact_.ambient)) return *no;
  return content(trace, m_, at, mix(m_, at, pure), contact_.ambient, m_.co2);
}

Fraction Solver::sugar_yield(Trace* trace) const {
  const auto& given = *c_.conditioning;
  return given.yield ? given.yield->now() : given.assumed_yield.at(trace);
}

Fraction Solver::per_sugar(Trace* trace) const {
  const auto& given = *c_.conditioning;
  const auto gas = m_.gases[m_.co2].molar_mass.at(trace);
  const auto sugar = given.sugar.at(trace);
  const bool hydrate = given.of_sugar.water > 0;
  const auto water = m_.liquid.water_molar_mass.at(hydrate ? trace : nullptr);
  return apply(trace, given.of_sugar, gas, sugar, water);
}

// A content as grams per degassed litre.
MassConcentration Solver::per_litre(Molality b, std::size_t gas) const {
  return MassPerLitre{}(AmountPerLitre{}(b, density_of_content(nullptr)),
                        m_.gases[gas].molar_mass.at(nullptr));
}

std::optional<Refusal> Solver::prepare_conditioning() {
  contact_.ambient = ambient(nullptr);
  contact_.shares = contact_shares(c_);
  const auto before = residual(nullptr);
  if (const auto* no = refused(before)) return *no;
  residual_ = std::get<Molality>(before);
  const auto& given = *c_.conditioning;
  if (!given.dose) return find_produced();
  const auto produced =
      ProducedCarbonDioxide{}(given.dose->now(), per_sugar(nullptr), sugar_yield(nullptr));
  produced_ = produced / m_.gases[m_.co2].molar_mass.at(nullptr) / density_of_content(nullptr);
  return std::nullopt;
}

// What must be produced for the target: in the liquid as a whole, or in the package once it has
// settled, where the headspace takes its share.
std::optional<Refusal> Solver::find_produced() {
  const Molality wanted = molality(*c_.conditioning->wanted);
  const Refusal none{RefusalCode::nothing_to_condition, per_litre(residual_, m_.co2).value(),
                     per_litre(wanted, m_.co2).value()};
  if (!c_.target_at_package || !c_.container) {
    if (wanted <= residual_) return none;
    produced_ = wanted - residual_;
    return std::nullopt;
  }
  contact_.at = at_temperature(m_, liquid_, c_.contact.temperature->now());
  const auto idle = conditioned_package(Molality{});
  if (const auto* no = refused(idle)) return *no;
  if (std::get<ClosedState>(idle).contents[m_.co2] >= wanted) return none;
  const auto missing = [&](double produced) {
    const auto settled = conditioned_package(from_si<Molality>(produced));
    // A package beyond the model holds more than any wish.
    if (refused(settled) != nullptr) return wanted.value();
    return (std::get<ClosedState>(settled).contents[m_.co2] - wanted).value();
  };
  // Even a headspace as large as the liquid takes no more than the liquid itself keeps, twice.
  constexpr double most = 8;
  const auto root = root_between(missing, 0.0, most * wanted.value());
  if (!root)
    return Refusal{RefusalCode::pressure_beyond_model, m_.pressure_limit.value(),
                   m_.pressure_limit.value()};
  produced_ = from_si<Molality>(*root);
  const auto settled = conditioned_package(produced_);
  if (const auto* no = refused(settled)) return *no;
  return std::nullopt;
}

OrRefusal<ClosedState> Solver::conditioned_package(Molality produced) const {
  Contents before(m_.size(), Molality{});
  before[m_.co2] = residual_;
  const auto at = at_temperature(m_, liquid_, closing_temperature());
  const auto closing = closing_with(at, before);
  if (const auto* no = refused(closing)) return *no;
  auto filling = close(m_, at, std::get<Closing>(closing));
  filling.amounts[m_.co2] += produced * filling.liquid;
  const auto& storage = c_.container->storage;
  return equilibrium(m_, liquid_, filling, storage.empty() ? at.t : storage.front().now());
}

// What the liquid holds when the package is closed: a conditioned one has its residual CO2 only.
Contents Solver::filled_with() const {
  if (!c_.conditioning) return contact_.contents;
  Contents before(m_.size(), Molality{});
  before[m_.co2] = residual_;
  return before;
}

// The closed package with what the sugar in it produces.
Filling Solver::fermented(Filling filling) const {
  if (c_.conditioning) filling.amounts[m_.co2] += produced_ * filling.liquid;
  return filling;
}

std::optional<Refusal> Solver::answer_conditioning() {
  const auto& given = *c_.conditioning;
  auto& figures = answer_.conditioning;
  const auto produced = per_litre(produced_, m_.co2);
  figures.dose_found = !given.dose;
  figures.residual = per_litre(residual_, m_.co2);
  figures.produced = produced;
  figures.content = per_litre(residual_ + produced_, m_.co2);
  figures.dose = given.dose ? given.dose->now()
                            : DoseOfSugar{}(produced, per_sugar(nullptr), sugar_yield(nullptr));
  figures.ethanol_added =
      EthanolAdded{}(produced, given.ethanol.at(nullptr), m_.gases[m_.co2].molar_mass.at(nullptr),
                     given.ethanol_density.at(nullptr, Fraction(1.0), m_.content_temperature));
  std::optional<ClosedState> package;
  auto pressure = contact_.pressure;
  if (c_.container) {
    const auto settled = equilibrium(m_, liquid_, filling_, contact_.at.t);
    if (const auto* no = refused(settled)) return *no;
    package = std::get<ClosedState>(settled);
    pressure = package->pressure;
    if (c_.container->rated_gauge || c_.container->rated_absolute)
      figures.margin = margin(*package);
  }
  figures.temperature = contact_.at.t;
  figures.pressure_absolute = pressure;
  figures.pressure_gauge = gauge(pressure, contact_.ambient);
  if (trace_ != nullptr) trace_conditioning(package);
  return std::nullopt;
}

void Solver::trace_conditioning(const std::optional<ClosedState>& package) {
  const auto& given = *c_.conditioning;
  const auto produced = per_litre(produced_, m_.co2);
  const auto gas = m_.gases[m_.co2].molar_mass;
  if (!given.residual) {
    trace_->begin("conditioning.residual");
    const auto b = std::get<Molality>(residual(trace_));
    const auto c20 = apply(trace_, AmountPerLitre{}, b, density_of_content(trace_));
    apply(trace_, MassPerLitre{}, c20, gas.at(trace_));
  }
  trace_->begin(given.dose ? "conditioning.produced" : "conditioning.dose");
  const auto each = per_sugar(trace_);
  const auto share = sugar_yield(trace_);
  if (given.dose) {
    apply(trace_, ProducedCarbonDioxide{}, given.dose->now(), each, share);
  } else {
    apply(trace_, DoseOfSugar{}, produced, each, share);
  }
  trace_->begin("conditioning.ethanol_added");
  const auto ethanol = given.ethanol.at(trace_);
  const auto density = given.ethanol_density.at(trace_, Fraction(1.0), m_.content_temperature);
  apply(trace_, EthanolAdded{}, produced, ethanol, gas.at(trace_), density);
  if (!package) {
    trace_pressure("conditioning.pressure_gauge", m_.co2, contact_.pressure);
    return;
  }
  trace_->begin("conditioning.pressure_gauge");
  const auto b = trace_state(*package);
  const auto p = apply(trace_, SolvedPressure{package->pressure}, b, package->at.t);
  apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
}

}  // namespace capsigh::answer_detail
