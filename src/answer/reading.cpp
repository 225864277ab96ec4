#include "capsigh/answer/reading.hpp"

#include <algorithm>
#include <cmath>
#include <stdexcept>

#include "capsigh/balance/contact.hpp"
#include "capsigh/models/solution.hpp"
#include "solver.hpp"

namespace capsigh {
namespace {

// One mol/kg of degassed liquid in SI units of the measure.
double of_one_molal(const Case& c, std::size_t gas, ContentMeasure measure, const Liquid& liquid) {
  const auto b = from_si<Molality>(1.0);
  const auto c20 = AmountPerLitre{}(b, liquid.density);
  const auto molar_mass = c.medium.gases[gas].molar_mass.at(nullptr);
  switch (measure) {
    case ContentMeasure::volumes:
      return VolumesOfGas{}(c20, volume_basis(c.medium, gas, c.ideal_volumes)).value();
    case ContentMeasure::mass_concentration: return MassPerLitre{}(c20, molar_mass).value();
    case ContentMeasure::amount_concentration: return c20.value();
    case ContentMeasure::molality: return b.value();
    case ContentMeasure::mass_fraction: return (b * molar_mass).value();
  }
  return 0;
}

// How the liquid's volume stands to what it is when the package is closed.
double expansion(const Case& c, const Liquid& liquid, const AtTemperature& at) {
  const auto& closing = c.container->closing_temperature;
  if (!closing) return 1;
  return (at_temperature(c.medium, liquid, closing->now()).density / at.density).value();
}

// Growth under pressure: stated, typical of the container's kind, or none.
Compliance stretch_of(const ContainerCase& container) {
  if (container.stretch) return container.stretch->now();
  using answer_detail::by_factor;
  return container.typical_stretch ? by_factor(*container.typical_stretch, nullptr) : Compliance{};
}

}  // namespace

ReadingModel::ReadingModel(const Case& c, std::size_t gas, ContentMeasure measure)
    : c_(c),
      liquid_(compose(c.medium.liquid, c.medium.content_temperature)),
      shares_(contact_shares(c)),
      gas_(gas),
      per_molality_(of_one_molal(c, gas, measure, liquid_)) {}

Pressure ReadingModel::ambient() const {
  if (!c_.ambient.altitude) return c_.ambient.stated.now();
  return c_.ambient.atmosphere(c_.ambient.altitude->now());
}

Volume ReadingModel::dead() const {
  return c_.gauge && c_.gauge->dead ? c_.gauge->dead->now() : Volume{};
}

// What the piercer brings of the gas that is read.
Amount ReadingModel::brought(Temperature t, Pressure ambient) const {
  if (!(dead().value() > 0)) return Amount{};
  return from_si<Amount>((c_.gauge->dead_gas[gas_] * ambient * dead()).value() /
                         (c_.medium.r.value() * t.kelvin()));
}

// Swelling by the dissolved gas cancels between closing and reading to 1e-5 of the liquid.
PackageAt ReadingModel::package(const AtTemperature& at, Pressure read) const {
  if (!c_.container) throw std::logic_error("air in a package, and no container in the case");
  PackageAt p;
  p.t = at.t;
  p.r = c_.medium.r;
  p.vapour = at.vapour;
  p.b_gas = at.b[gas_];
  const auto& container = *c_.container;
  const MassDensity closing_density = at.density * expansion(c_, liquid_, at);
  const Volume closed =
      container.fill ? container.fill->now() : container.fill_mass->now() / closing_density;
  p.liquid = closed * expansion(c_, liquid_, at);
  p.degassed = p.liquid * at.density;
  const Shell shell{container.brimful.now(), stretch_of(container), ambient()};
  p.headspace = stretched(nullptr, shell, read) - p.liquid;
  const double rt = c_.medium.r.value() * at.t.kelvin();
  for (std::size_t i = 0; i < c_.air.size(); ++i) {
    p.air_ostwald += c_.air[i] * Fraction(at.k[i].value() * rt);
  }
  return p;
}

// Air measured in the package, and gas the piercer brought other than the one read.
Pressure ReadingModel::air_pressure(const PackageAt& package, Volume air, Pressure ambient) const {
  Fraction foreign{};
  if (dead().value() > 0) {
    for (std::size_t i = 0; i < c_.gauge->dead_gas.size(); ++i) {
      if (i != gas_) foreign += c_.gauge->dead_gas[i];
    }
  }
  return AirInPackage{}(ambient, air + foreign * dead(), room_for_air(package, dead()));
}

OrRefusal<CorrectedReading> ReadingModel::corrected(const GaugeReading& reading) const {
  CorrectedReading r{reading.temperature, {}};
  GaugePressure shown = reading.pressure;
  if (c_.gauge) {
    r.temperature =
        r.temperature + (c_.gauge->temperature.now() + c_.gauge->temperature_offset.now());
    shown = shown + (c_.gauge->pressure.now() + c_.gauge->pressure_offset.now());
  }
  const Pressure around = reading.ambient.value_or(ambient());
  r.pressure = absolute(shown, around);
  if (!reading.air && !(dead().value() > 0)) return r;
  const auto at = at_temperature(c_.medium, liquid_, r.temperature);
  if (const auto no = pressure_refusal(c_.medium, at, shares_, r.pressure)) return *no;
  const auto package = this->package(at, r.pressure);
  if (!(package.headspace.value() > 0)) {
    return Refusal{RefusalCode::container_without_space, package.headspace.value(),
                   c_.container->brimful.now().value()};
  }
  const auto air = air_pressure(package, reading.air.value_or(Volume{}), around);
  if (r.pressure - air <= at.vapour) {
    return Refusal{RefusalCode::boils, (r.pressure - air).value(), at.vapour.value()};
  }
  r.pressure -= air;
  if (!(dead().value() > 0)) return r;
  const auto mixture = mix(c_.medium, at, shares_);
  const auto before = before_piercing(
      package, r.pressure, dead(), brought(at.t, around), c_.medium.pressure_limit,
      [&](Pressure p) { return capsigh::content(nullptr, c_.medium, at, mixture, p, gas_); });
  if (!before) {
    return Refusal{RefusalCode::pressure_beyond_model, r.pressure.value(),
                   c_.medium.pressure_limit.value()};
  }
  r.pressure = *before;
  return r;
}

OrRefusal<double> ReadingModel::content(const GaugeReading& reading) const {
  const auto found = corrected(reading);
  if (const auto* no = refused(found)) return *no;
  const auto& r = std::get<CorrectedReading>(found);
  const auto at = at_temperature(c_.medium, liquid_, r.temperature);
  if (const auto no = pressure_refusal(c_.medium, at, shares_, r.pressure)) return *no;
  const auto mixture = mix(c_.medium, at, shares_);
  return per_molality_ *
         capsigh::content(nullptr, c_.medium, at, mixture, r.pressure, gas_).value();
}

// What the gauge meets in a package that stood at that pressure. The container is as wide as the
// pressure read makes it, which is what is looked for: repeated until it stands (a stretch of some
// per cent moves it by a few parts in a thousand a round).
OrRefusal<Pressure> ReadingModel::pierced(const AtTemperature& at, Pressure closed) const {
  const auto mixture = mix(c_.medium, at, shares_);
  Pressure read = closed;
  constexpr int most_rounds = 100;
  constexpr double settled = 1e-13;
  for (int round = 0; round < most_rounds; ++round) {
    const auto package = this->package(at, read);
    const auto found = after_piercing(
        package, closed, dead(), brought(at.t, ambient()), c_.medium.pressure_limit,
        [&](Pressure x) { return capsigh::content(nullptr, c_.medium, at, mixture, x, gas_); });
    if (!found) {
      return Refusal{RefusalCode::pressure_beyond_model, closed.value(),
                     c_.medium.pressure_limit.value()};
    }
    const Pressure next = *found + air_pressure(package, Volume{}, ambient());
    const bool stands = std::abs((next - read).value()) <= settled * read.value();
    read = next;
    if (stands) break;
  }
  return read;
}

OrRefusal<GaugePressure> ReadingModel::pressure(Temperature shown, double content) const {
  Temperature t = shown;
  Pressure offset{};
  if (c_.gauge) {
    t = t + (c_.gauge->temperature.now() + c_.gauge->temperature_offset.now());
    offset = c_.gauge->pressure.now() + c_.gauge->pressure_offset.now();
  }
  if (!c_.medium.temperature_search.contains(t.kelvin())) {
    const auto& range = c_.medium.temperature_search;
    return Refusal{RefusalCode::temperature_beyond_model, t.kelvin(),
                   t.kelvin() < range.low ? range.low : range.high};
  }
  const auto at = at_temperature(c_.medium, liquid_, t);
  const auto mixture = mix(c_.medium, at, shares_);
  const auto wanted = from_si<Molality>(content / per_molality_);
  const auto found = pressure_for(c_.medium, at, mixture, gas_, wanted);
  if (const auto* no = refused(found)) return *no;
  Pressure p = std::get<Pressure>(found);
  if (const auto no = pressure_refusal(c_.medium, at, shares_, p)) return *no;
  if (dead().value() > 0) {
    const auto read = pierced(at, p);
    if (const auto* no = refused(read)) return *no;
    p = std::get<Pressure>(read);
  }
  return gauge(p, ambient()) - offset;
}

OrRefusal<ReadContent> read_with_doubt(const Case& problem, const ReadingBinding& binding,
                                       const GaugeReading& reading) {
  Case c = problem;
  const auto now = [&] { return ReadingModel(c, binding.gas, binding.measure).content(reading); };
  const auto nominal = now();
  if (const auto* no = refused(nominal)) return *no;
  ReadContent result;
  result.value = std::get<double>(nominal);
  double variance = 0;
  for (const auto& doubt : each_doubt(c)) {
    double sum = 0;
    int sides = 0;
    for (const double z : {1.0, -1.0}) {
      *doubt.z = z;
      const auto moved = now();
      if (const double* value = std::get_if<double>(&moved)) {
        sum += z * (*value - result.value);
        ++sides;
      }
    }
    *doubt.z = 0;
    const double change = sides > 0 ? sum / sides : 0.0;
    // A root is found to about 1e-15; smaller differences than this are its noise.
    constexpr double noise = 1e-12;
    if (!(std::abs(change) > noise * result.value)) continue;
    variance += change * change;
    result.budget.push_back({"reading", doubt.name, doubt.u, doubt.unit, change * change,
                             std::abs(change), doubt.is_record});
  }
  result.u = std::sqrt(variance);
  for (auto& line : result.budget) line.share /= variance;
  std::sort(result.budget.begin(), result.budget.end(),
            [](const auto& a, const auto& b) { return a.share > b.share; });
  return result;
}

}  // namespace capsigh
