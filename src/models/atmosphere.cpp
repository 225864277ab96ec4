#include "capsigh/models/atmosphere.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {

StandardAtmosphere StandardAtmosphere::from(const Record& record) {
  const auto value = [&](std::size_t i) { return record.values[i].value; };
  StandardAtmosphere law;
  law.sea_level = from_si<Pressure>(value(0) * record.factor);
  law.temperature = value(1);
  law.lapse_rate = value(2);
  law.exponent = value(3) / (value(4) * value(2));
  return law;
}

Pressure StandardAtmosphere::operator()(Length altitude) const {
  const double left = std::max(1.0 - lapse_rate * altitude.value() / temperature, 0.0);
  return sea_level * std::pow(left, exponent);
}

}  // namespace capsigh
