#include "capsigh/balance/liquid.hpp"

#include <cmath>
#include <limits>

namespace capsigh {
namespace {

// Masses by kind, kg per m³ of liquid at 20 °C, for a trial density.
struct Masses {
  double ethanol = 0;
  double sugar = 0;
  double rest = 0;
  double rest_volume = 0;
};

// Mass of one solute per m³ of liquid.
double mass_of(const SoluteModel& s, double density, double ethanol_density) {
  const double amount = s.amount.now().value();
  switch (s.measure) {
    case SoluteMeasure::mass_fraction: return amount * density;
    case SoluteMeasure::volume_fraction: return amount * ethanol_density;
    case SoluteMeasure::mass_concentration: return amount;
    case SoluteMeasure::amount_concentration: return amount * s.molar_mass.at(nullptr).value();
  }
  return 0;
}

Masses masses_at(const LiquidModel& m, double density, double ethanol_density) {
  Masses masses;
  for (const auto& s : m.solutes) {
    const double mass = mass_of(s, density, ethanol_density);
    if (s.kind == SoluteKind::ethanol) {
      masses.ethanol += mass;
    } else if (s.kind == SoluteKind::sugar) {
      masses.sugar += mass;
    } else {
      masses.rest += mass;
      masses.rest_volume += mass * s.apparent_volume.at(nullptr).value();
    }
  }
  return masses;
}

// Volume that a mass of sugar adds to a mass of water, by the gravity of the two alone.
double sugar_volume(const LiquidModel& m, double sugar, double water, double water_density,
                    Trace* trace) {
  if (sugar <= 0) return 0;
  const auto gravity = m.sugar_gravity.at(trace, Fraction(sugar / (sugar + water)));
  return (sugar + water) / (gravity.value() * water_density) - water / water_density;
}

// Density of the ethanol–water pair: Kell's water plus what ethanol changes by OIML R22.
double pair_density(const LiquidModel& m, double ethanol_share, double water_density, Temperature t,
                    Trace* trace) {
  if (ethanol_share <= 0) return water_density;
  const auto mixture = m.ethanol_density.at(trace, Fraction(ethanol_share), t);
  const auto water = m.ethanol_density.at(nullptr, Fraction(0.0), t);
  return water_density + (mixture - water).value();
}

}  // namespace

Liquid compose(const LiquidModel& m, Temperature twenty, Trace* trace) {
  Liquid l;
  const double water_density = m.water_density.at(trace, twenty).value();
  const bool has_ethanol = m.ethanol_density.doubt.record != nullptr;
  const double ethanol_density =
      has_ethanol ? m.ethanol_density.law(Fraction(1.0), twenty).value() : 0;
  // The density that makes the volumes add up to one. Shares by mass couple it to itself; the
  // iteration contracts by the solutes' share at each round.
  double density = water_density;
  double water = density;
  Masses masses;
  constexpr int rounds = 60;
  for (int i = 0; i < rounds; ++i) {
    masses = masses_at(m, density, ethanol_density);
    water = density - masses.ethanol - masses.sugar - masses.rest;
    const double pair = water + masses.ethanol;
    const double share = masses.ethanol / pair;
    const double volume = pair / pair_density(m, share, water_density, twenty, nullptr) +
                          sugar_volume(m, masses.sugar, water, water_density, nullptr) +
                          masses.rest_volume;
    const double step = (1.0 - volume) * water_density;
    density += step;
    constexpr double settled = 4 * std::numeric_limits<double>::epsilon();
    if (std::abs(step) <= settled * density) break;
  }
  l.pair_mass = water + masses.ethanol;
  l.ethanol_in_pair = masses.ethanol / l.pair_mass;
  l.other_volume = sugar_volume(m, masses.sugar, water, water_density, trace) + masses.rest_volume;
  l.density = from_si<MassDensity>(density);
  if (m.measured_density) {
    l.expansion = m.measured_density->now().value() / density;
    l.density = m.measured_density->now();
  }
  l.sugar = from_si<MassConcentration>(masses.sugar);
  l.ethanol_by_volume = ethanol_density > 0 ? masses.ethanol / ethanol_density : 0.0;

  const double water_moles = water / m.water_molar_mass.at(nullptr).value();
  double ethanol_moles = 0;
  double particles = water_moles;
  for (const auto& s : m.solutes) {
    const double moles = mass_of(s, density, ethanol_density) / s.molar_mass.at(nullptr).value();
    l.solutes.push_back(from_si<AmountConcentration>(moles));
    if (s.kind == SoluteKind::ethanol) ethanol_moles += moles;
    double pieces = s.ions.empty() ? 1 : 0;
    for (const auto& ion : s.ions) pieces += ion.second;
    particles += moles * pieces;
  }
  for (std::size_t i = 0; i < m.ions.size(); ++i) {
    double c = 0;
    for (std::size_t s = 0; s < m.solutes.size(); ++s) {
      for (const auto& [ion, count] : m.solutes[s].ions) {
        if (ion == i) c += count * l.solutes[s].value();
      }
    }
    l.ions.push_back(from_si<AmountConcentration>(c));
  }
  l.x_water = water_moles / particles;
  l.x_ethanol = ethanol_moles / particles;
  l.x_ethanol_in_pair = ethanol_moles / (ethanol_moles + water_moles);
  l.particles = from_si<Molality>(particles / density);
  return l;
}

MassDensity liquid_density(const LiquidModel& m, const Liquid& l, MassDensity water,
                           MassDensity water_twenty, Temperature t, Temperature twenty,
                           Trace* trace) {
  if (m.solutes.empty() && !m.measured_density) return water;
  const auto volume = [&](double water_density, Temperature at, Trace* noted) {
    const double pair =
        l.pair_mass / pair_density(m, l.ethanol_in_pair.value(), water_density, at, noted);
    // Solutes expand as water does, where no source is better.
    return pair + l.other_volume * water_twenty.value() / water_density;
  };
  const double ratio =
      volume(water_twenty.value(), twenty, nullptr) / volume(water.value(), t, trace);
  return apply(trace, SolutionDensity{}, l.density, Fraction(ratio));
}

VapourAt vapour_at(const LiquidModel& m, const Liquid& l, Temperature t, Trace* trace) {
  VapourAt v;
  v.pure_water = m.water_vapour.at(trace, t);
  if (m.solutes.empty()) {
    v.water = v.pure_water;
    return v;
  }
  if (l.x_ethanol.value() <= 0) {
    v.water = apply(trace, RaoultsLaw{}, l.x_water, Fraction(1.0), v.pure_water);
    return v;
  }
  const Fraction x(l.x_ethanol_in_pair);
  const auto water_activity = apply(trace, m.van_laar_doubt, VanLaarWater{m.van_laar}, x);
  v.water = apply(trace, RaoultsLaw{}, l.x_water, water_activity, v.pure_water);
  const auto ethanol_activity = apply(trace, m.van_laar_doubt, VanLaarEthanol{m.van_laar}, x);
  v.ethanol =
      apply(trace, RaoultsLaw{}, l.x_ethanol, ethanol_activity, m.ethanol_vapour.at(trace, t));
  return v;
}

Fraction salting_exponent(const LiquidModel& m, const Liquid& l, const Cited<GasSalting>& gas,
                          bool co2, Temperature t, Trace* trace) {
  Fraction sum(0.0);
  if (!m.ions.empty()) {
    const auto h_gas = gas.at(trace, t);
    for (std::size_t i = 0; i < m.ions.size(); ++i) {
      sum += apply(trace, IonTerm{}, m.ions[i].h.at(trace), h_gas, l.ions[i]);
    }
  }
  Fraction organic(0.0);
  bool any = false;
  for (std::size_t i = 0; i < m.solutes.size(); ++i) {
    const auto& solute = m.solutes[i];
    if (solute.kind == SoluteKind::salt) continue;
    any = true;
    organic += apply(trace, OrganicTerm{}, solute.salting.at(trace, t), l.solutes[i]);
  }
  if (!any) return sum;
  if (co2) return sum + organic;
  return sum + apply(trace, m.other_gases, OrganicsOfOtherGas{}, organic);
}

}  // namespace capsigh
