#include "capsigh/readings/laws.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "capsigh/balance/contact.hpp"
#include "capsigh/models/solution.hpp"

namespace capsigh {
namespace {

// One mol/kg in SI units of the measure.
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

bool of_instrument(const Doubt& doubt) {
  return doubt.name == "contact.ambient" || doubt.name == "contact.altitude" ||
         doubt.name.starts_with("gauge.") || doubt.name.starts_with("container.");
}

}  // namespace

ReadingLaws::ReadingLaws(Case problem, std::size_t gas, ContentMeasure measure)
    : problem_(std::move(problem)),
      composition_(problem_.medium),
      shares_(contact_shares(problem_)),
      pure_(problem_.medium.size(), Fraction(0.0)),
      liquid_(compose(problem_.medium.liquid, problem_.medium.content_temperature)),
      gas_(gas),
      measure_(measure) {
  composition_.convention = {};
  pure_[gas_] = Fraction(1.0);
  per_molality_ = of_one_molal(problem_, gas_, measure_, liquid_);
}

ReadingLaws::At ReadingLaws::at(Temperature t) const {
  const Medium& m = problem_.medium;
  At state{at_temperature(m, liquid_, t), {}, {}, {}};
  state.mixture = mix(m, state.at, shares_);
  if (tested()) {
    const Interval& range = m.convention.temperature;
    const double edge = std::clamp(t.kelvin(), range.low, range.high);
    state.edge = at_temperature(m, liquid_, from_si<Temperature>(edge));
    state.pure = mix(m, state.edge, pure_);
  }
  return state;
}

double ReadingLaws::content(const At& at, double pascal) const {
  return per_molality_ * capsigh::content(nullptr, problem_.medium, at.at, at.mixture,
                                          from_si<Pressure>(pascal), gas_)
                             .value();
}

double ReadingLaws::by_composition(const At& at, double pascal) const {
  return per_molality_ *
         capsigh::content(nullptr, composition_, at.at, at.mixture, from_si<Pressure>(pascal), gas_)
             .value();
}

double ReadingLaws::relation_over_pure(const At& at, double pascal) const {
  return capsigh::content(nullptr, problem_.medium, at.edge, at.pure, from_si<Pressure>(pascal),
                          gas_)
      .value();
}

double ReadingLaws::composition_over_pure(const At& at, double pascal) const {
  return capsigh::content(nullptr, composition_, at.edge, at.pure, from_si<Pressure>(pascal), gas_)
      .value();
}

double ReadingLaws::per_molality(ContentMeasure measure) const {
  return of_one_molal(problem_, gas_, measure, liquid_);
}

bool ReadingLaws::tested() const {
  return problem_.medium.convention.in_force() && gas_ == problem_.medium.co2;
}

double ReadingLaws::least_partial() const {
  return problem_.medium.convention.least_partial.value();
}

Interval ReadingLaws::convention_pressure() const { return problem_.medium.convention.pressure; }

std::optional<Refusal> ReadingLaws::refusal(const At& at, double pascal) const {
  return pressure_refusal(problem_.medium, at.at, shares_, from_si<Pressure>(pascal));
}

double ReadingLaws::pressure_limit() const { return problem_.medium.pressure_limit.value(); }

Interval ReadingLaws::temperature_limits() const { return problem_.medium.temperature_search; }

double ReadingLaws::condenses_at(const At& at) const {
  const Medium& m = problem_.medium;
  if (m.co2 >= m.size() || !(shares_[m.co2].value() > 0)) {
    return std::numeric_limits<double>::infinity();
  }
  return at.at.vapour.value() + m.condensation(at.at.t).value() / shares_[m.co2].value();
}

std::vector<double> ReadingLaws::edges() const {
  const Medium& m = problem_.medium;
  std::vector<double> all;
  const auto take = [&](const Interval& range) {
    all.push_back(range.low);
    all.push_back(range.high);
  };
  const auto take_record = [&](const Record* record) {
    if (record == nullptr) return;
    for (const auto& box : record->range) take(box.temperature);
  };
  Medium copy = m;
  each_record_doubt(copy, [&](RecordDoubt& doubt) { take_record(doubt.record); });
  take_record(m.convention.record);
  if (tested()) take(m.convention.temperature);
  for (const auto& gas : m.gases) {
    for (const auto& overlap : gas.henry.overlaps) {
      take(overlap);
      all.push_back(overlap.high + overlap.width());  // where a record's doubt reaches its own
    }
  }
  if (const auto* equivalent = std::get_if<WaterEquivalent>(&m.convention.relation)) {
    for (const auto& gas : equivalent->water->gases) {
      for (const auto& overlap : gas.henry.overlaps) take(overlap);
    }
  }
  return all;
}

std::array<double, 3> ReadingLaws::other_variance(Temperature t,
                                                  const std::array<double, 3>& pascal) const {
  Case moved = problem_;
  std::array<double, 3> variance{};
  const auto ln_contents = [&] {
    const ReadingLaws laws(moved, gas_, measure_);
    const At state = laws.at(t);
    std::array<double, 3> ln{};
    for (std::size_t i = 0; i < ln.size(); ++i) ln[i] = std::log(laws.content(state, pascal[i]));
    return ln;
  };
  for (const auto& doubt : each_doubt(moved)) {
    if (of_instrument(doubt)) continue;
    *doubt.z = 1;
    const auto up = ln_contents();
    *doubt.z = -1;
    const auto down = ln_contents();
    *doubt.z = 0;
    for (std::size_t i = 0; i < variance.size(); ++i) {
      const double half = 0.5 * (up[i] - down[i]);
      if (std::isfinite(half)) variance[i] += half * half;
    }
  }
  return variance;
}

}  // namespace capsigh
