#include "capsigh/answer/solve.hpp"

#include <fmt/format.h>

#include <cmath>

#include "capsigh/balance/closed_container.hpp"
#include "capsigh/balance/contact.hpp"
#include "capsigh/balance/opening.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

// The contact, solved.
struct ContactState {
  Pressure ambient{};
  Shares shares;
  AtTemperature at;
  GasMixture mixture;
  Pressure pressure{};
  Contents contents;
};

class Solver {
 public:
  Solver(const Case& c, Trace* trace)
      : c_(c),
        m_(c.medium),
        trace_(trace),
        liquid_(compose(c.medium.liquid, c.medium.content_temperature)) {}

  OrRefusal<Answer> run() {
    auto refusal = by(AskedBy::contact, solve_contact());
    if (!refusal) refusal = by(AskedBy::saturation, answer_saturation());
    if (!refusal && c_.container) refusal = by(AskedBy::closing, answer_container());
    if (!refusal && c_.opening) refusal = by(AskedBy::opening, answer_opening());
    if (!refusal) refusal = all_finite();
    if (refusal) return *refusal;
    return answer_;
  }

 private:
  using Maybe = std::optional<Refusal>;

  static Maybe by(AskedBy step, Maybe refusal) {
    if (refusal) refusal->asked_by = step;
    return refusal;
  }

  // No figure leaves the solver that is no number.
  Maybe all_finite() const {
    bool finite = true;
    each_figure(answer_, [&](const FigurePath&, const auto& figure, const JsonUnit&) {
      finite = finite && std::isfinite(si_value(figure.value));
    });
    if (finite) return std::nullopt;
    return Refusal{RefusalCode::no_number};
  }

  // ---- contact ----------------------------------------------------------------------------------

  Pressure ambient(Trace* trace) const {
    if (!c_.ambient.altitude) return c_.ambient.stated.now();
    return apply(trace, c_.ambient.atmosphere, c_.ambient.altitude->now());
  }

  Pressure given_pressure(Trace* trace) const {
    if (c_.contact.absolute_pressure) return c_.contact.absolute_pressure->now();
    return apply(trace, GaugeToAbsolute{}, c_.contact.gauge_pressure->now(), ambient(trace));
  }

  // The degassed liquid at 20 °C.
  MassDensity density_of_content(Trace* trace) const {
    if (trace != nullptr) compose(m_.liquid, m_.content_temperature, trace);
    return liquid_.density;
  }

  Molality molality(const ContentCase& content) const {
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

  Maybe solve_contact() {
    contact_.ambient = ambient(nullptr);
    contact_.shares = contact_shares(c_);
    Temperature t;
    if (c_.contact.known == Known::pressure_content) {
      contact_.pressure = given_pressure(nullptr);
      const auto found = temperature_for(m_, liquid_, contact_.shares, contact_.pressure,
                                         c_.contact.content->gas, molality(*c_.contact.content));
      if (const auto* no = refused(found)) return *no;
      t = std::get<Temperature>(found);
    } else {
      t = c_.contact.temperature->now();
    }
    contact_.at = at_temperature(m_, liquid_, t);
    contact_.mixture = mix(m_, contact_.at, contact_.shares);
    if (c_.contact.known == Known::temperature_content) {
      const auto found = pressure_for(m_, contact_.at, contact_.mixture, c_.contact.content->gas,
                                      molality(*c_.contact.content));
      if (const auto* no = refused(found)) return *no;
      contact_.pressure = std::get<Pressure>(found);
    } else if (c_.contact.known == Known::temperature_pressure) {
      contact_.pressure = given_pressure(nullptr);
    }
    if (const auto no = pressure_refusal(m_, contact_.at, contact_.shares, contact_.pressure))
      return no;
    contact_.contents = contents(m_, contact_.at, contact_.mixture, contact_.pressure);
    answer_contact();
    return std::nullopt;
  }

  void answer_contact() {
    answer_.temperature = contact_.at.t;
    answer_.pressure_absolute = contact_.pressure;
    answer_.pressure_gauge = gauge(contact_.pressure, contact_.ambient);
    answer_.ambient = contact_.ambient;
    answer_.vapour = contact_.at.vapours.water;
    if (liquid_.x_ethanol.value() > 0) answer_.ethanol = contact_.at.vapours.ethanol;
    for (std::size_t i = 0; i < m_.size(); ++i) {
      if (c_.in_contact[i] == 0) continue;
      answer_.gases.push_back(gas_figures(i, contact_.contents, contact_.mixture, contact_.pressure,
                                          contact_.at.vapour));
    }
    if (trace_ != nullptr) trace_contact();
  }

  GasFigures gas_figures(std::size_t i, const Contents& contents, const GasMixture& mixture,
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

  // ---- traces: every main figure once more, noted
  // -------------------------------------------------

  // The chain of one gas's content at a pressure over a mixture.
  Molality trace_content(Temperature t, const Shares& shares, Pressure p, std::size_t gas) {
    const auto at = at_temperature(m_, liquid_, t, {trace_, gas, &shares});
    return content(trace_, m_, at, mix(m_, at, shares), p, gas);
  }

  void trace_contact() {
    for (std::size_t i = 0; i < m_.size(); ++i) {
      if (c_.in_contact[i] == 0) continue;
      const std::string at = "dissolved." + std::string(m_.gases[i].name);
      trace_->begin(at + ".mass_concentration");
      if (c_.contact.known != Known::temperature_content) given_pressure(trace_);
      const auto b = trace_content(contact_.at.t, contact_.shares, contact_.pressure, i);
      const auto c20 = apply(trace_, AmountPerLitre{}, b, density_of_content(trace_));
      apply(trace_, MassPerLitre{}, c20, m_.gases[i].molar_mass.at(trace_));
      trace_->begin(at + ".volumes");
      apply(trace_, VolumesOfGas{}, c20, volume_basis(m_, i, c_.ideal_volumes, trace_));
    }
    if (c_.contact.known == Known::temperature_content) {
      trace_pressure("condition.pressure_gauge", c_.contact.content->gas, contact_.pressure);
    } else if (c_.contact.known == Known::pressure_content) {
      trace_->begin("condition.temperature");
      const auto b =
          trace_content(contact_.at.t, contact_.shares, contact_.pressure, c_.contact.content->gas);
      apply(trace_, SolvedTemperature{contact_.at.t}, b, contact_.pressure);
    }
  }

  void trace_pressure(std::string figure, std::size_t gas, Pressure root) {
    trace_->begin(std::move(figure));
    const auto b = trace_content(contact_.at.t, contact_.shares, root, gas);
    const auto p = apply(trace_, SolvedPressure{root}, b, contact_.at.t);
    apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
  }

  // ---- saturation -------------------------------------------------------------------------------

  // Where the contact is known without the targets, they only judge: one that nothing can reach is
  // no reason to answer nothing.
  Maybe answer_saturation() {
    const bool only_judge =
        c_.contact.known == Known::temperature_pressure || !c_.content_from_target;
    for (const auto& target : c_.targets) {
      auto no = saturation_of(target);
      if (no && !only_judge) return no;
      if (no) {
        SaturationFigures s;
        s.gas = m_.gases[target.gas].name;
        s.unreachable = no->code;
        answer_.saturation.push_back(s);
      }
    }
    if (c_.targets.empty() && c_.contact.content) return saturation_of(*c_.contact.content);
    return std::nullopt;
  }

  Maybe saturation_of(const ContentCase& target) {
    SaturationFigures s;
    s.gas = m_.gases[target.gas].name;
    if (c_.contact.known == Known::pressure_content) {
      const auto found = temperature_for(m_, liquid_, contact_.shares, contact_.pressure,
                                         target.gas, molality(target));
      if (const auto* no = refused(found)) return *no;
      s.temperature = std::get<Temperature>(found);
      answer_.saturation.push_back(s);
      if (trace_ != nullptr) trace_temperature(s, target.gas);
      return std::nullopt;
    }
    const auto found =
        pressure_for(m_, contact_.at, contact_.mixture, target.gas, molality(target));
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

  void trace_temperature(const SaturationFigures& s, std::size_t gas) {
    trace_->begin("saturation." + std::string(s.gas) + ".temperature");
    const auto t = s.temperature.value;
    const auto b = trace_content(t, contact_.shares, contact_.pressure, gas);
    apply(trace_, SolvedTemperature{t}, b, contact_.pressure);
  }

  // ---- container --------------------------------------------------------------------------------

  // The dry headspace at closing: its air, the rest the recipe's gas.
  Shares headspace_at_closing() const {
    const Fraction air = c_.container->closing_air.now();
    Shares shares;
    for (std::size_t i = 0; i < m_.size(); ++i) {
      shares.push_back(c_.air[i] * air + contact_.shares[i] * (1.0 - air));
    }
    return shares;
  }

  Maybe answer_container() {
    Closing closing;
    closing.temperature = contact_.at.t;
    closing.pressure = absolute(c_.container->closing_pressure, contact_.ambient);
    closing.headspace = headspace_at_closing();
    closing.contents = contact_.contents;
    closing.fill = c_.container->fill.now();
    closing.brimful = c_.container->brimful.now();
    if (closing.pressure <= contact_.at.vapour) {
      return Refusal{RefusalCode::boils, closing.pressure.value(), contact_.at.vapour.value()};
    }
    filling_ = close(m_, liquid_, closing);
    const auto found = equilibrium(m_, liquid_, filling_, closing.temperature);
    if (const auto* no = refused(found)) return *no;
    closed_ = std::get<ClosedState>(found);
    answer_.container.push_back(container_figures(*closed_));
    if (trace_ != nullptr) trace_container(*closed_);
    return std::nullopt;
  }

  ContainerFigures container_figures(const ClosedState& state) const {
    ContainerFigures f;
    f.temperature = state.at.t;
    f.pressure_absolute = state.pressure;
    f.pressure_gauge = gauge(state.pressure, contact_.ambient);
    f.ullage = state.headspace / filling_.brimful;
    f.vapour = state.at.vapours.water;
    if (liquid_.x_ethanol.value() > 0) f.ethanol = state.at.vapours.ethanol;
    for (std::size_t i = 0; i < m_.size(); ++i) {
      if (c_.in_container[i] == 0) continue;
      f.gases.push_back(
          gas_figures(i, state.contents, state.mixture, state.pressure, state.at.vapour));
    }
    return f;
  }

  void trace_container(const ClosedState& state) {
    trace_->begin("container.at.0.pressure_gauge");
    const auto b = trace_state(state);
    const auto p = apply(trace_, SolvedPressure{state.pressure}, b, state.at.t);
    apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
  }

  // Every gas of a closed state, and the gas in its headspace; returns the content of the gas that
  // leads it (CO2 where there is some).
  Molality trace_state(const ClosedState& state) {
    Molality leading{};
    const auto& shares = state.mixture.shares;
    for (std::size_t i = 0; i < m_.size(); ++i) {
      if (c_.in_container[i] == 0) continue;
      const auto at = at_temperature(m_, liquid_, state.at.t, {trace_, i, &shares, true});
      const auto b = content(trace_, m_, at, mix(m_, at, shares), state.pressure, i);
      if (leading.value() == 0 || i == m_.co2) leading = b;
    }
    gas_in_headspace(trace_, m_, state, state.pressure);
    return leading;
  }

  // ---- opening ----------------------------------------------------------------------------------

  Maybe answer_opening() {
    Opened opened;
    const auto& wanted = c_.opening->temperature;
    if (c_.container) {
      ClosedState state = *closed_;
      if (wanted) {
        const auto found = equilibrium(m_, liquid_, filling_, wanted->now());
        if (const auto* no = refused(found)) return *no;
        state = std::get<ClosedState>(found);
      }
      if (trace_ != nullptr) opened_state_ = state;
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
    return std::nullopt;
  }

  // One litre of degassed liquid at 20 °C.
  Mass litre() const {
    return from_si<Volume>(find_unit("L", Dimension::volume)->factor) * density_of_content(nullptr);
  }

  void answer_losses(const Opened& opened, std::size_t gas) {
    const bool bubbles = gas == m_.co2;
    LossFigures loss;
    if (!bubbles) loss.gas = m_.gases[gas].name;
    loss.headspace_loss = headspace_loss(nullptr, m_, opened, gas);
    if (bubbles) loss.fizz_loss = fizz_loss(nullptr, m_, opened, contact_.ambient, gas);
    loss.flat_loss = flat_loss(nullptr, m_, opened, contact_.ambient, c_.air, gas, bubbles);
    answer_.opening.push_back(loss);
    if (trace_ != nullptr) trace_losses(opened, gas, bubbles);
  }

  void trace_losses(const Opened& opened, std::size_t gas, bool bubbles) {
    const std::string at =
        bubbles ? "opening." : "opening." + std::string(m_.gases[gas].name) + ".";
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

  const Case& c_;
  const Medium& m_;
  Trace* trace_;
  Liquid liquid_;
  ContactState contact_;
  Filling filling_;
  std::optional<ClosedState> closed_;
  std::optional<ClosedState> opened_state_;  // for the trace
  Answer answer_;
};

std::string bar(double pascal) {
  return fmt::format("{} bar abs",
                     significant(in_unit(pascal, *find_unit("bar", Dimension::pressure)), 4));
}

std::string celsius(double kelvin) {
  return fmt::format("{} °C",
                     significant(in_unit(kelvin, *find_unit("°C", Dimension::temperature)), 4));
}

Finding refusal_finding(std::string code, std::string message, std::string expected) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  return f;
}

Finding explain_boiling(const Refusal& r) {
  if (r.value <= 0) {
    return refusal_finding("below-vacuum",
                           "a gauge reading that low lies below a vacuum at this ambient pressure",
                           "a reading above minus the ambient pressure");
  }
  const std::string_view where = r.asked_by == AskedBy::closing   ? "when the package is closed, "
                                 : r.asked_by == AskedBy::opening ? "when it is opened, "
                                                                  : "";
  return refusal_finding("boils",
                         fmt::format("{}at {} the liquid boils: its own vapour pressure is {}",
                                     where, bar(r.value), bar(r.bound)),
                         r.asked_by == AskedBy::contact ? "a higher pressure or a lower temperature"
                                                        : "a lower temperature");
}

}  // namespace

OrRefusal<Answer> solve(const Case& c, Trace* trace) { return Solver(c, trace).run(); }

Finding explain(const Refusal& r) {
  switch (r.code) {
    case RefusalCode::boils: return explain_boiling(r);
    case RefusalCode::temperature_beyond_model:
      return refusal_finding(
          "temperature-beyond-model",
          fmt::format("{} is beyond what the laws of this liquid may be used for, which end at {}",
                      celsius(r.value), celsius(r.bound)),
          "a temperature between freezing and boiling");
    case RefusalCode::pressure_beyond_model:
      return refusal_finding(
          "pressure-beyond-model",
          fmt::format("a pressure of {} or more is beyond the gas law, which ends at {}",
                      bar(r.value), bar(r.bound)),
          "a lower pressure, content, temperature or fill");
    case RefusalCode::condenses:
      return refusal_finding("condenses",
                             fmt::format("CO2 would condense: its partial pressure {} is not "
                                         "below {}",
                                         bar(r.value), bar(r.bound)),
                             "a lower pressure or a warmer liquid");
    case RefusalCode::no_pressure_holds:
      return refusal_finding("no-pressure-holds",
                             fmt::format("no pressure up to {} dissolves that much", bar(r.bound)),
                             "a lower content, a colder liquid, or more of that gas in the "
                             "headspace");
    case RefusalCode::no_temperature_holds:
      return refusal_finding(
          "no-temperature-holds",
          fmt::format("even at {} the liquid holds less than that at this pressure",
                      celsius(r.bound)),
          "a higher pressure or a lower content");
    case RefusalCode::too_little_everywhere:
      return refusal_finding(
          "too-little-everywhere",
          fmt::format("up to {} the liquid holds more than that at this pressure",
                      celsius(r.bound)),
          "a lower pressure or a higher content");
    case RefusalCode::container_without_space:
      return refusal_finding("container-without-space",
                             "the liquid fills the whole container: no headspace is left and its "
                             "pressure has no upper bound",
                             "a smaller fill");
    case RefusalCode::nothing_of_that_gas:
      return refusal_finding("nothing-of-that-gas",
                             "a content is asked of a gas that the headspace does not hold",
                             "a share of that gas under [gas]");
    case RefusalCode::no_number: break;
  }
  return refusal_finding("no-number", "these inputs lead to no finite figure",
                         "values that can occur in a plant");
}

}  // namespace capsigh
