// Gas and heat for a run: what dissolves, what fills the headspaces, what purges, and the warming.
#include <cmath>

#include "capsigh/balance/bracketing.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "solver.hpp"

namespace capsigh::answer_detail {
namespace {

/// m = (b − b_in) m_L M, not below zero.
struct GasToDissolve {
  static constexpr LawInfo<4> info{
      "gas to dissolve", "m = max(b - b_in, 0) m_L M", {"b", "b_in", "m_L", "M"}, "m"};
  Mass operator()(Molality b, Molality incoming, Mass liquid, MolarMass m) const {
    return std::max(b - incoming, Molality{}) * liquid * m;
  }
};

struct GasOfRun {
  static constexpr LawInfo<3> info{"gas per hectolitre",
                                   "m = m_dissolved + m_headspace + m_purge",
                                   {"m_dissolved", "m_headspace", "m_purge"},
                                   "m"};
  Mass operator()(Mass dissolved, Mass headspace, Mass purge) const {
    return dissolved + headspace + purge;
  }
};

struct WarmingOfAll {
  static constexpr LawInfo<1> info{"warming by all gases", "dT = sum dT_i", {"sum dT_i"}, "dT"};
  TemperatureDifference operator()(TemperatureDifference sum) const { return sum; }
};

Volume hectolitre() { return from_si<Volume>(find_unit("hL", Dimension::volume)->factor); }

}  // namespace

Molality Solver::incoming(std::size_t gas) const {
  for (const auto& in : c_.supply->incoming) {
    if (in.gas == gas) return molality(in);
  }
  return {};
}

// What that much degassed liquid takes up at the contact.
Mass Solver::dissolved_in(std::size_t gas, Mass liquid, Trace* trace) {
  if (trace != nullptr) trace_taken_up(contact_.at.t, contact_.pressure, gas);
  return apply(trace, GasToDissolve{}, contact_.contents[gas], incoming(gas), liquid,
               m_.gases[gas].molar_mass.at(trace));
}

// Of the dry headspace at closing, what the recipe's gas brings: all but its air.
Shares Solver::supplied_at_closing() const {
  std::size_t widest = 0;
  const auto apart = [&](std::size_t i) {
    return std::abs((c_.air[i] - contact_.shares[i]).value());
  };
  for (std::size_t i = 1; i < m_.size(); ++i) {
    if (apart(i) > apart(widest)) widest = i;
  }
  Fraction air(0.0);
  if (apart(widest) > 0) {
    air = (closing_.headspace[widest] - contact_.shares[widest]) /
          (c_.air[widest] - contact_.shares[widest]);
  }
  Shares supplied;
  for (const auto& share : contact_.shares) supplied.push_back(share * (Fraction(1.0) - air));
  return supplied;
}

// Gas closed into the headspaces of that much degassed liquid.
Mass Solver::headspace_supply(Mass liquid) const {
  if (!c_.container) return {};
  ClosedState closed;
  closed.at = at_temperature(m_, liquid_, closing_.temperature);
  closed.mixture = mix(m_, closed.at, closing_.headspace);
  closed.headspace = stretched(nullptr, closing_.shell, closing_.pressure) -
                     liquid_volume(m_, closed.at, closing_);
  const Amount gas = gas_in_headspace(nullptr, m_, closed, closing_.pressure);
  const auto supplied = supplied_at_closing();
  Mass each{};
  for (std::size_t i = 0; i < m_.size(); ++i) {
    each += supplied[i] * gas * m_.gases[i].molar_mass.at(nullptr);
  }
  return each * (liquid / filling_.liquid);
}

// Gas blown through the containers at ambient pressure and closing temperature.
Mass Solver::purge_supply(Mass liquid, Trace* trace) const {
  if (!c_.container || !c_.supply->purge) return {};
  const auto each =
      apply(trace, GasInHeadspace{m_.r}, contact_.ambient, Pressure{},
            c_.supply->purge->now() * closing_.shell.brimful, Fraction(1.0), closing_.temperature);
  Mass all{};
  for (std::size_t i = 0; i < m_.size(); ++i) {
    all += contact_.shares[i] * each * m_.gases[i].molar_mass.at(nullptr);
  }
  return all * (liquid / filling_.liquid);
}

// Warming at T by taking up `reached`, with nothing to cool it.
TemperatureDifference Solver::warming(Temperature t, const Contents& reached, Trace* trace) const {
  const auto& supply = *c_.supply;
  const auto c = heat_capacity(trace, liquid_, {supply.water, supply.alcohol, supply.solids});
  TemperatureDifference sum{};
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_contact[i] == 0) continue;
    const auto enthalpy = enthalpy_of_solution(trace, m_, liquid_, t, i, supply.enthalpy);
    sum += apply(trace, WarmingOfLiquid{}, enthalpy, reached[i], incoming(i), c);
  }
  return apply(trace, WarmingOfAll{}, sum);
}

// Where nothing takes the heat away, the liquid reaches saturation warmer, and holds less.
void Solver::answer_uncooled() {
  auto& figures = answer_.supply;
  if (m_.co2 >= m_.size() || c_.in_contact[m_.co2] == 0) return;
  const double most = figures.warming.value.value();
  if (!(most > 0)) return;
  const auto reached = [&](double kelvin) {
    const auto at =
        at_temperature(m_, liquid_, contact_.at.t + from_si<TemperatureDifference>(kelvin));
    return taken_up(at, mix(m_, at, contact_.shares), contact_.pressure);
  };
  const auto residual = [&](double kelvin) {
    const auto t = contact_.at.t + from_si<TemperatureDifference>(kelvin);
    return kelvin - warming(t, reached(kelvin), nullptr).value();
  };
  const auto root = root_between(residual, 0.0, most);
  if (!root) return;
  const auto b = reached(*root)[m_.co2];
  const auto c20 = AmountPerLitre{}(b, density_of_content(nullptr));
  figures.uncooled = per_litre(b, m_.co2);
  figures.uncooled_volumes = VolumesOfGas{}(c20, volume_basis(m_, m_.co2, c_.ideal_volumes));
}

std::optional<Refusal> Solver::answer_supply() {
  const auto& given = *c_.supply;
  auto& figures = answer_.supply;
  const Mass liquid = hectolitre() * density_of_content(nullptr);
  Mass dissolved{};
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_contact[i] != 0) dissolved += dissolved_in(i, liquid, nullptr);
  }
  const auto headspace = headspace_supply(liquid);
  const auto purge = purge_supply(liquid, nullptr);
  figures.dissolved = dissolved;
  if (c_.container) figures.headspace = headspace;
  if (given.purge) figures.purge = purge;
  figures.per_hectolitre = GasOfRun{}(dissolved, headspace, purge);
  const auto per_volume = figures.per_hectolitre.value / hectolitre();
  if (given.flow) figures.gas_flow = per_volume * given.flow->now();
  if (given.amount) figures.gas_mass = per_volume * given.amount->now();
  figures.warming = warming(contact_.at.t, contact_.contents, nullptr);
  answer_uncooled();
  if (trace_ != nullptr) trace_supply();
  return std::nullopt;
}

void Solver::trace_supply() {
  const Mass liquid = hectolitre() * density_of_content(nullptr);
  trace_->begin("supply.per_hectolitre");
  Mass dissolved{};
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (c_.in_contact[i] != 0) dissolved += dissolved_in(i, liquid, trace_);
  }
  apply(trace_, GasOfRun{}, dissolved, headspace_supply(liquid), purge_supply(liquid, trace_));
  trace_->begin("supply.warming");
  warming(contact_.at.t, contact_.contents, trace_);
}

}  // namespace capsigh::answer_detail
