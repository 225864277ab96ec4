// The opened drink: its losses as shares, the cold of opening, bubbles, the course to flat, and the
// package closed again.
#include <cmath>

#include "capsigh/quantity/grammar.hpp"
#include "solver.hpp"

namespace capsigh::answer_detail {

// One litre of degassed liquid at 20 °C.
Mass Solver::litre() const {
  return from_si<Volume>(find_unit("L", Dimension::volume)->factor) * density_of_content(nullptr);
}

std::optional<Refusal> Solver::answer_opened(const Opened& opened) {
  if (m_.co2 < m_.size() && present(m_.co2)) {
    const auto b = saturated(nullptr, opened);
    answer_shares(opened);
    answer_bubbles(opened, b);
    if (opened_state_) answer_cold(opened);
    if (c_.opening->escape) {
      answer_escape(opened, flat_contents(m_, opened, contact_.ambient, c_.air), b);
    }
  }
  const auto flat = flat_contents(m_, opened, contact_.ambient, c_.air);
  for (const auto& moment : c_.opening->after) answer_moment(opened, flat, moment.now());
  if (c_.opening->reclose_after) return answer_reclosed(opened, flat);
  return std::nullopt;
}

// What the liquid holds under pure CO2 at ambient pressure.
Molality Solver::saturated(Trace* trace, const Opened& opened) const {
  const auto pure = pure_carbon_dioxide();
  const auto at = trace == nullptr
                      ? opened.at
                      : at_temperature(m_, liquid_, opened.at.t, {trace, m_.co2, &pure});
  return content(trace, m_, at, mix(m_, at, pure), contact_.ambient, m_.co2);
}

void Solver::answer_shares(const Opened& opened) {
  auto& o = answer_.opened;
  const Amount inside = opened.contents[m_.co2] * opened.liquid + opened.in_headspace[m_.co2];
  if (!(inside.value() > 0)) return;
  o.total = inside * m_.gases[m_.co2].molar_mass.at(nullptr);
  for (const auto& loss : answer_.opening) {
    if (!loss.gas.empty()) continue;
    o.headspace = share_of(opened, loss.headspace_loss.value);
    o.fizz = share_of(opened, loss.fizz_loss.value);
    o.flat = share_of(opened, loss.flat_loss.value);
  }
}

LossShare Solver::share_of(const Opened& opened, Mass loss) const {
  const Volume liquid = opened.liquid / density_of_content(nullptr);
  LossShare s;
  s.share = loss / answer_.opened.total.value;
  s.volumes = VolumesOfGas{}(loss / m_.gases[m_.co2].molar_mass.at(nullptr) / liquid,
                             volume_basis(m_, m_.co2, c_.ideal_volumes));
  return s;
}

void Solver::answer_cold(const Opened& opened) {
  auto& o = answer_.opened;
  const auto& state = *opened_state_;
  const auto& ratios = c_.opening->heat_ratio;
  const auto& shares = state.mixture.shares;
  const auto cold =
      cold_of_opening(nullptr, shares, ratios, opened.at.t, state.pressure, contact_.ambient);
  o.cold_gas = cold;
  if (cold < c_.opening->sublimation.triple_temperature) {
    o.dry_ice = shares[m_.co2] * contact_.ambient / c_.opening->sublimation(cold);
  }
  if (trace_ == nullptr) return;
  trace_->begin("opening.cold_gas");
  trace_state(state);
  cold_of_opening(trace_, shares, ratios, opened.at.t, state.pressure, contact_.ambient);
}

void Solver::answer_bubbles(const Opened& opened, Molality saturated_content) {
  auto& o = answer_.opened;
  const auto b = opened.contents[m_.co2];
  const auto s = Supersaturation{}(b, saturated_content);
  o.supersaturation = s;
  const auto tension = [&](Trace* trace) {
    return std::visit(
        [&](const auto& law) {
          if constexpr (std::is_same_v<std::decay_t<decltype(law)>, Cited<WaterSurfaceTension>>) {
            return law.at(trace, opened.at.t);
          } else {
            return law.at(trace);
          }
        },
        c_.opening->tension);
  };
  const auto radius = [&](Trace* trace, Fraction at) {
    const auto sigma = tension(trace);
    return apply(trace, NucleusRadius{}, sigma, at, contact_.ambient, opened.at.vapour);
  };
  if (s.value() > 1) o.nucleus = radius(nullptr, s);
  if (trace_ == nullptr) return;
  trace_->begin("opening.supersaturation");
  apply(trace_, Supersaturation{}, b, saturated(trace_, opened));
  if (!(s.value() > 1)) return;
  trace_->begin("opening.nucleus_radius");
  radius(trace_, s);
}

Rate Solver::escape_rate(Trace* trace, const Opened& opened) const {
  const auto& escape = *c_.opening->escape;
  if (escape.half_life) return apply(trace, RateOfHalfLife{}, escape.half_life->now());
  const Volume liquid = opened.liquid / opened.at.density;
  // One standard uncertainty of 75 % is a factor of 1.75, to either side.
  auto doubt = escape.transfer.doubt;
  const double factor =
      std::pow(1.0 + doubt.u / escape.transfer.law.value.value(), doubt.widening * doubt.z);
  doubt.z = 0;  // what it moves is in the factor
  const auto transfer =
      apply(trace, doubt, TransferOfSurface{escape.transfer.law.value, Fraction(factor)});
  return apply(trace, RateOfSurface{}, transfer, escape.surface->now(), liquid);
}

Fraction Solver::after_pour(Trace* trace) const {
  const auto& pour = c_.opening->escape->pour;
  if (!pour) return Fraction(1.0);
  return apply(trace, LeftAfterPour{}, pour->at(trace));
}

void Solver::answer_escape(const Opened& opened, const Contents& flat, Molality saturated_content) {
  auto& o = answer_.opened;
  const auto rate = escape_rate(nullptr, opened);
  const auto poured = after_pour(nullptr);
  o.half_life = HalfLifeOfRate{}(rate);
  const auto air = flat[m_.co2];
  const auto b = opened.contents[m_.co2];
  const bool bubbles = poured.value() * (b - air).value() > (saturated_content - air).value();
  if (bubbles) o.fizz_until = TimeOfFizz{}(poured, b, saturated_content, air, rate);
  if (trace_ == nullptr) return;
  trace_->begin("opening.escape_half_life");
  apply(trace_, HalfLifeOfRate{}, escape_rate(trace_, opened));
  if (!bubbles) return;
  trace_->begin("opening.fizz_until");
  const auto s = after_pour(trace_);
  const auto lambda = escape_rate(trace_, opened);
  apply(trace_, TimeOfFizz{}, s, b, saturated(trace_, opened), air, lambda);
}

void Solver::answer_moment(const Opened& opened, const Contents& flat, Duration after) {
  const auto left = [&](Trace* trace) {
    const auto poured = after_pour(trace);
    return apply(trace, LeftToLose{}, poured, escape_rate(trace, opened), after);
  };
  const auto f = left(nullptr);
  const auto now = contents_in_time(opened, flat, f);
  MomentFigures moment;
  moment.after = after;
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (!present(i)) continue;
    moment.gases.push_back(
        gas_figures(i, now, mix(m_, opened.at, c_.air), contact_.ambient, opened.at.vapour));
    moment.gases.back().partial_pressure = Figure<Pressure>{};
  }
  const std::string path = "opening.course." + std::to_string(answer_.opened.course.size());
  const auto lost = [&](Trace* trace, const LossFigures& loss, Fraction share) {
    return apply(trace, LostInTime{}, loss.headspace_loss.value, loss.fizz_loss.value,
                 loss.flat_loss.value, share);
  };
  for (const auto& loss : answer_.opening) {
    if (!loss.gas.empty()) continue;
    moment.lost = lost(nullptr, loss, f);
    if (trace_ == nullptr) continue;
    trace_->begin(path + ".lost");
    lost(trace_, loss, left(trace_));
    trace_->begin(path + ".dissolved.CO2.mass_concentration");
    const auto b =
        apply(trace_, ContentInTime{}, opened.contents[m_.co2], flat[m_.co2], left(trace_));
    const auto c20 = apply(trace_, AmountPerLitre{}, b, density_of_content(trace_));
    apply(trace_, MassPerLitre{}, c20, m_.gases[m_.co2].molar_mass.at(trace_));
  }
  answer_.opened.course.push_back(moment);
}

// What was poured out is not closed in again: the pour's own loss stays out of this.
std::optional<Refusal> Solver::answer_reclosed(const Opened& opened, const Contents& flat) {
  const auto after = c_.opening->reclose_after->now();
  Fraction left(1.0);
  if (c_.opening->escape) {
    left = LeftToLose{}(Fraction(1.0), escape_rate(nullptr, opened), after);
  }
  const auto now = contents_in_time(opened, flat, left);
  const auto filling =
      closed_again(m_, filling_, *opened_state_, opened, now, left, contact_.ambient, c_.air);
  const auto settled = equilibrium(m_, liquid_, filling, opened.at.t);
  if (const auto* no = refused(settled)) return *no;
  const auto& state = std::get<ClosedState>(settled);
  auto& o = answer_.opened;
  o.reclosed_absolute = state.pressure;
  o.reclosed_gauge = gauge(state.pressure, contact_.ambient);
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (!present(i) && !(c_.air[i].value() > 0)) continue;
    o.reclosed.push_back(
        gas_figures(i, state.contents, state.mixture, state.pressure, state.at.vapour));
  }
  if (trace_ != nullptr) trace_reclosed(state);
  return std::nullopt;
}

void Solver::trace_reclosed(const ClosedState& state) {
  trace_->begin("opening.reclosed.pressure_gauge");
  const auto b = trace_state(state);
  const auto p = apply(trace_, SolvedPressure{state.pressure}, b, state.at.t);
  apply(trace_, AbsoluteToGauge{}, p, ambient(trace_));
}

}  // namespace capsigh::answer_detail
