#include "capsigh/answer/solve.hpp"

#include <cmath>
#include <limits>

#include "capsigh/balance/bracketing.hpp"
#include "solver.hpp"

namespace capsigh {
namespace answer_detail {

OrRefusal<Answer> Solver::run() {
  Maybe refusal;
  if (c_.conditioning) refusal = by(AskedBy::conditioning, prepare_conditioning());
  if (!refusal) refusal = by(AskedBy::contact, solve_contact());
  if (!refusal) refusal = by(AskedBy::saturation, answer_saturation());
  if (!refusal && c_.container) refusal = by(AskedBy::closing, answer_container());
  if (!refusal && c_.classed_by_gauge && m_.co2 < m_.size()) answer_wine();
  if (!refusal && c_.conditioning) refusal = by(AskedBy::conditioning, answer_conditioning());
  if (!refusal && c_.supply) refusal = by(AskedBy::supply, answer_supply());
  if (!refusal && c_.opening) refusal = by(AskedBy::opening, answer_opening());
  if (!refusal) refusal = all_finite();
  if (refusal) return *refusal;
  return std::move(answer_);
}

std::optional<Refusal> Solver::by(AskedBy step, Maybe refusal) {
  if (refusal) refusal->asked_by = step;
  return refusal;
}

// No figure leaves the solver that is no number.
std::optional<Refusal> Solver::all_finite() const {
  bool finite = true;
  each_figure(answer_, [&](const FigurePath&, const auto& figure, const JsonUnit&) {
    finite = finite && std::isfinite(si_value(figure.value));
  });
  if (finite) return std::nullopt;
  return Refusal{RefusalCode::no_number};
}

Pressure Solver::ambient(Trace* trace) const {
  if (!c_.ambient.altitude) return c_.ambient.stated.now();
  return apply(trace, c_.ambient.atmosphere, c_.ambient.altitude->now());
}

Pressure Solver::given_pressure(Trace* trace) const {
  if (c_.contact.absolute_pressure) return c_.contact.absolute_pressure->now();
  return apply(trace, GaugeToAbsolute{}, c_.contact.gauge_pressure->now(), ambient(trace));
}

// The degassed liquid at 20 °C.
MassDensity Solver::density_of_content(Trace* trace) const {
  if (trace != nullptr) compose(m_.liquid, m_.content_temperature, trace);
  return liquid_.density;
}

Molality Solver::molality(const ContentCase& content) const {
  if (content.conditioned) return residual_ + produced_;
  const double number = content.amount.now().value();
  const auto molar_mass = m_.gases[content.gas].molar_mass.at(nullptr);
  const auto rho = density_of_content(nullptr);
  switch (content.measure) {
    case ContentMeasure::volumes:
      return from_si<Fraction>(number) / volume_basis(m_, content.gas, c_.ideal_volumes) / rho;
    case ContentMeasure::mass_concentration:
      return from_si<MassConcentration>(number) / molar_mass / rho;
    case ContentMeasure::amount_concentration: return from_si<AmountConcentration>(number) / rho;
    case ContentMeasure::molality: return from_si<Molality>(number);
    case ContentMeasure::mass_fraction: return from_si<Fraction>(number) / molar_mass;
  }
  return {};
}

LiquidColumn Solver::column() const {
  return {c_.contact.depth ? c_.contact.depth->now() : Length{}, c_.gravity};
}

Fraction Solver::approach() const {
  return c_.contact.approach ? c_.contact.approach->now() : Fraction(1.0);
}

// Pressure where the gas meets the liquid, under a headspace at p.
Pressure Solver::below(const AtTemperature& at, Pressure headspace, Trace* trace) const {
  if (!c_.contact.depth) return headspace;
  const auto head = apply(trace, HydrostaticHead{c_.gravity}, at.density, column().depth);
  return apply(trace, PressureAtDepth{}, headspace, head);
}

// What the liquid takes up under a headspace at p.
Contents Solver::taken_up(const AtTemperature& at, const GasMixture& mixture,
                          Pressure headspace) const {
  Contents reached = contents(m_, at, mixture, below(at, headspace));
  for (auto& b : reached) b = approach() * b;
  return reached;
}

// The headspace pressure at which the liquid takes up that content.
OrRefusal<Pressure> Solver::headspace_for(std::size_t gas, Molality wanted) const {
  const auto found = pressure_for(m_, contact_.at, contact_.mixture, gas, wanted / approach());
  if (refused(found) != nullptr || !c_.contact.depth) return found;
  const auto head = HydrostaticHead{c_.gravity}(contact_.at.density, column().depth);
  return std::get<Pressure>(found) - head;
}

// The same so that the package holds it once it is closed and settled.
OrRefusal<Pressure> Solver::headspace_for_package(std::size_t gas, Molality wanted) const {
  const auto at_least = headspace_for(gas, wanted);
  if (refused(at_least) != nullptr) return at_least;
  const auto closing_at = at_temperature(m_, liquid_, closing_temperature());
  const auto& storage = c_.container->storage;
  const auto settled_at =
      storage.empty() ? closing_at : at_temperature(m_, liquid_, storage.front().now());
  const auto settled = [&](double pascal) {
    return settled_package(closing_at, settled_at, from_si<Pressure>(pascal));
  };
  const auto missing = [&](double pascal, double without) {
    const auto state = settled(pascal);
    if (refused(state) != nullptr) return without;
    return (std::get<ClosedState>(state).contents[gas] - wanted).value();
  };
  const double least = contact_.at.vapour.value() * (1.0 + 1e-9);
  const double most = m_.pressure_limit.value();
  const double near = std::get<Pressure>(at_least).value();
  constexpr double nearby = 1.05;
  const auto quick = root_near(
      [&](double pascal) { return missing(pascal, std::numeric_limits<double>::quiet_NaN()); },
      near, nearby * near, least, most);
  if (quick) return from_si<Pressure>(*quick);
  // An impossible package is above every wish.
  const auto root =
      root_between([&](double pascal) { return missing(pascal, wanted.value()); }, least, most);
  if (root) return from_si<Pressure>(*root);
  const auto state = settled(near);
  if (const auto* no = refused(state)) return *no;
  return Refusal{RefusalCode::no_pressure_holds, wanted.value(), most};
}

// The package filled with what the liquid takes up under that headspace, settled at its first
// storage temperature, else at closing.
OrRefusal<ClosedState> Solver::settled_package(const AtTemperature& closing_at,
                                               const AtTemperature& settled_at,
                                               Pressure headspace) const {
  const auto closing = closing_with(closing_at, taken_up(contact_.at, contact_.mixture, headspace));
  if (const auto* no = refused(closing)) return *no;
  return equilibrium(m_, close(m_, closing_at, std::get<Closing>(closing)), settled_at);
}

OrRefusal<Pressure> Solver::pressure_for_target(std::size_t gas, Molality wanted) const {
  return c_.target_at_package && c_.container && !c_.conditioning
             ? headspace_for_package(gas, wanted)
             : headspace_for(gas, wanted);
}

// The share of the line to be found, at the given temperature and pressure.
std::optional<Refusal> Solver::find_blend() {
  const ShareLine* line = nullptr;
  double others = 0;
  for (const auto& l : c_.contact.gas) {
    if (l.find) line = &l;
    if (!l.find && !l.rest) others += l.share.now().value();
  }
  if (line == nullptr) return std::nullopt;
  const ContentCase* wish = nullptr;
  for (const auto& target : c_.targets) {
    if (m_.gases[target.gas].name == line->name) wish = &target;
  }
  const Molality wanted = molality(*wish);
  const auto at = at_temperature(m_, liquid_, c_.contact.temperature->now());
  const auto p = given_pressure(nullptr);
  const auto residual = [&](double share) {
    const auto mixture = mix(m_, at, contact_shares(c_, Fraction(share)));
    return (taken_up(at, mixture, p)[wish->gas] - wanted).value();
  };
  const auto root = root_between(residual, 0.0, 1.0 - others);
  if (!root) return Refusal{RefusalCode::no_blend_holds, pressure_of_pure(at, *wish), 0};
  found_ = Fraction(*root);
  BlendFigures blend;
  blend.gas = m_.gases[wish->gas].name;
  blend.share = found_;
  answer_.blend.push_back(blend);
  return std::nullopt;
}

// What would hold the wish: the pressure of the pure gas, Pa; 0 where not even that.
double Solver::pressure_of_pure(const AtTemperature& at, const ContentCase& wish) const {
  Shares pure(m_.size(), Fraction(0.0));
  pure[wish.gas] = 1.0;
  const auto found = pressure_for(m_, at, mix(m_, at, pure), wish.gas, molality(wish) / approach());
  return refused(found) != nullptr ? 0.0 : std::get<Pressure>(found).value();
}

std::optional<Refusal> Solver::solve_contact() {
  contact_.ambient = ambient(nullptr);
  if (auto no = find_blend()) return no;
  contact_.shares = contact_shares(c_, found_);
  Temperature t;
  if (c_.contact.known == Known::pressure_content) {
    contact_.pressure = given_pressure(nullptr);
    const auto found =
        temperature_for(m_, liquid_, contact_.shares, contact_.pressure, c_.contact.content->gas,
                        molality(*c_.contact.content) / approach(), column());
    if (const auto* no = refused(found)) return *no;
    t = std::get<Temperature>(found);
  } else {
    t = c_.contact.temperature->now();
  }
  contact_.at = at_temperature(m_, liquid_, t);
  contact_.mixture = mix(m_, contact_.at, contact_.shares);
  if (c_.contact.known == Known::temperature_content) {
    const auto& content = *c_.contact.content;
    const auto found = c_.content_from_target ? pressure_for_target(content.gas, molality(content))
                                              : headspace_for(content.gas, molality(content));
    if (const auto* no = refused(found)) return *no;
    contact_.pressure = std::get<Pressure>(found);
  } else if (c_.contact.known == Known::temperature_pressure) {
    contact_.pressure = given_pressure(nullptr);
  }
  const auto deepest = below(contact_.at, contact_.pressure);
  if (const auto no = pressure_refusal(m_, contact_.at, contact_.shares, deepest)) return no;
  if (contact_.pressure <= contact_.at.vapour) {
    return Refusal{RefusalCode::boils, contact_.pressure.value(), contact_.at.vapour.value()};
  }
  contact_.contents = taken_up(contact_.at, contact_.mixture, contact_.pressure);
  // What a sparger in the depth dissolves can be more than the headspace holds.
  const auto held = contents(m_, contact_.at, contact_.mixture, contact_.pressure);
  for (std::size_t i = 0; i < held.size(); ++i) {
    if (c_.contact.depth && contact_.contents[i] > held[i]) answer_.breaks_out_above = true;
  }
  answer_contact();
  return std::nullopt;
}

void Solver::answer_contact() {
  answer_.temperature = contact_.at.t;
  answer_.pressure_absolute = contact_.pressure;
  answer_.pressure_gauge = gauge(contact_.pressure, contact_.ambient);
  answer_.ambient = contact_.ambient;
  answer_.vapour = contact_.at.vapours.water;
  if (liquid_.x_ethanol.value() > 0) answer_.ethanol = contact_.at.vapours.ethanol;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_contact[i] == 0) continue;
    answer_.gases.push_back(
        gas_figures(i, contact_.contents, contact_.mixture, contact_.pressure, contact_.at.vapour));
  }
  if (trace_ != nullptr) trace_contact();
}

GasFigures Solver::gas_figures(std::size_t i, const Contents& contents, const GasMixture& mixture,
                               Pressure p, Pressure vapour) const {
  const auto molar_mass = m_.gases[i].molar_mass.at(nullptr);
  const auto c20 = AmountPerLitre{}(contents[i], density_of_content(nullptr));
  GasFigures g;
  g.gas = m_.gases[i].name;
  g.amount_concentration = c20;
  g.mass_concentration = MassPerLitre{}(c20, molar_mass);
  g.volumes = VolumesOfGas{}(c20, volume_basis(m_, i, c_.ideal_volumes));
  g.mass_fraction = contents[i] * molar_mass;
  Molality all = Molality{};
  for (const auto& b : contents) all += b;
  g.mole_fraction = contents[i] / (liquid_.particles + all);
  g.partial_pressure = DaltonsLaw{}(mixture.shares[i], p, vapour);
  return g;
}

// Where the contact is known without the targets, they only judge: one that nothing can reach is
// no reason to answer nothing.
std::optional<Refusal> Solver::answer_saturation() {
  const bool only_judge =
      c_.contact.known == Known::temperature_pressure || !c_.content_from_target;
  bool wished = false;
  for (const auto& target : c_.targets) {
    if (target.is_limit) continue;
    wished = true;
    auto no = saturation_of(target);
    if (no && !only_judge) return no;
    if (no) {
      SaturationFigures s;
      s.gas = m_.gases[target.gas].name;
      s.unreachable = no->code;
      answer_.saturation.push_back(s);
    }
  }
  if (!wished && c_.contact.content) return saturation_of(*c_.contact.content);
  return std::nullopt;
}

std::optional<Refusal> Solver::saturation_of(const ContentCase& target) {
  SaturationFigures s;
  s.gas = m_.gases[target.gas].name;
  if (c_.contact.known == Known::pressure_content) {
    const auto found = temperature_for(m_, liquid_, contact_.shares, contact_.pressure, target.gas,
                                       molality(target) / approach(), column());
    if (const auto* no = refused(found)) return *no;
    s.temperature = std::get<Temperature>(found);
    answer_.saturation.push_back(s);
    if (trace_ != nullptr) trace_temperature(s, target.gas);
    return std::nullopt;
  }
  const auto found = c_.content_from_target || c_.contact.known == Known::temperature_pressure
                         ? pressure_for_target(target.gas, molality(target))
                         : headspace_for(target.gas, molality(target));
  if (const auto* no = refused(found)) return *no;
  const auto p = std::get<Pressure>(found);
  s.pressure_absolute = p;
  s.pressure_gauge = gauge(p, contact_.ambient);
  answer_.saturation.push_back(s);
  if (trace_ != nullptr) {
    trace_pressure("saturation." + std::string(s.gas) + ".pressure_gauge", target.gas, p);
  }
  return std::nullopt;
}

std::optional<Refusal> Solver::answer_opening() {
  Opened opened;
  const auto& wanted = c_.opening->temperature;
  if (c_.container) {
    if (!wanted && unsettled_) return *unsettled_;
    ClosedState state;
    if (!wanted) {
      state = *closed_;
    } else {
      const auto found = equilibrium(m_, liquid_, filling_, wanted->now());
      if (const auto* no = refused(found)) return *no;
      state = std::get<ClosedState>(found);
    }
    opened_state_ = state;
    answer_.opening_pressure = gauge(state.pressure, contact_.ambient);
    answer_.opening_margin = margin(state);
    if (!rated()) answer_.opening_margin.asked = false;
    opened = open_package(m_, filling_, state, contact_.ambient, c_.air);
  } else {
    const auto t = wanted ? wanted->now() : contact_.at.t;
    opened = open_liquid(m_, at_temperature(m_, liquid_, t), contact_.contents, litre());
  }
  if (const auto no = pressure_refusal(m_, opened.at, c_.air, contact_.ambient)) return no;
  answer_.opening_temperature = opened.at.t;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_container[i] != 0 || c_.in_contact[i] != 0) answer_losses(opened, i);
  }
  return answer_opened(opened);
}

void Solver::answer_losses(const Opened& opened, std::size_t gas) {
  const bool bubbles = gas == m_.co2;
  LossFigures loss;
  if (!bubbles) loss.gas = m_.gases[gas].name;
  loss.headspace_loss = headspace_loss(nullptr, m_, opened, gas);
  if (bubbles) loss.fizz_loss = fizz_loss(nullptr, m_, opened, contact_.ambient, gas);
  loss.flat_loss = flat_loss(nullptr, m_, opened, contact_.ambient, c_.air, gas, bubbles);
  answer_.opening.push_back(loss);
  if (trace_ != nullptr) trace_losses(opened, gas, bubbles);
}

}  // namespace answer_detail

OrRefusal<Answer> solve(const Case& c, Trace* trace) {
  return answer_detail::Solver(c, trace).run();
}

}  // namespace capsigh
