#include "capsigh/models/expansion.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {

Temperature AdiabaticExpansion::operator()(Temperature t, Pressure before, Pressure after,
                                           Fraction gamma) const {
  const double ratio = std::min((after / before).value(), 1.0);
  const double exponent = (gamma.value() - 1.0) / gamma.value();
  return from_si<Temperature>(t.kelvin() * std::pow(ratio, exponent));
}

SublimationPressure SublimationPressure::from(const Record& record) {
  SublimationPressure law;
  for (std::size_t i = 0; i < law.a.size(); ++i) law.a[i] = record.values[i].value;
  law.triple_temperature = from_si<Temperature>(record.values[3].value);
  law.triple_pressure = from_si<Pressure>(record.values[4].value * record.factor);
  return law;
}

Pressure SublimationPressure::operator()(Temperature t) const {
  if (t >= triple_temperature) return triple_pressure;
  const double theta = 1.0 - t.kelvin() / triple_temperature.kelvin();
  const double sum = a[0] * theta + a[1] * std::pow(theta, 1.9) + a[2] * std::pow(theta, 2.9);
  return triple_pressure * std::exp(sum * triple_temperature.kelvin() / t.kelvin());
}

}  // namespace capsigh
