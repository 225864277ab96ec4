#include "capsigh/models/solution.hpp"

namespace capsigh {

WaterDensity WaterDensity::from(const Record& record, Temperature zero_celsius) {
  WaterDensity law;
  for (std::size_t i = 0; i < law.n.size(); ++i) law.n[i] = record.values[i].value;
  law.d1 = record.values[6].value;
  law.zero_celsius = zero_celsius;
  return law;
}

MassDensity WaterDensity::operator()(Temperature temperature) const {
  // Kernel: t in °C, density in kg/m³.
  const double t = (temperature - zero_celsius).value();
  double sum = 0;
  for (auto it = n.rbegin(); it != n.rend(); ++it) sum = sum * t + *it;
  return from_si<MassDensity>(sum / (1.0 + d1 * t));
}

}  // namespace capsigh
