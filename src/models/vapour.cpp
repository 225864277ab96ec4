#include "capsigh/models/vapour.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {

WaterVapourPressure WaterVapourPressure::from(const Record& record) {
  WaterVapourPressure law;
  for (std::size_t i = 0; i < law.a.size(); ++i) law.a[i] = record.values[i].value;
  law.critical_temperature = from_si<Temperature>(record.values[6].value);
  law.critical_pressure = from_si<Pressure>(record.values[7].value * record.factor);
  return law;
}

Pressure WaterVapourPressure::operator()(Temperature t) const {
  // Kernel: T in K, tau dimensionless.
  const double tc = critical_temperature.kelvin();
  const double tau = std::max(1.0 - t.kelvin() / tc, 0.0);
  const double root = std::sqrt(tau);
  const double tau3 = tau * tau * tau;
  const double sum = a[0] * tau + a[1] * tau * root + a[2] * tau3 + a[3] * tau3 * root +
                     a[4] * tau3 * tau + a[5] * tau3 * tau3 * tau * root;
  return critical_pressure * std::exp(tc / t.kelvin() * sum);
}

}  // namespace capsigh
