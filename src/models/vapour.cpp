#include "capsigh/models/vapour.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

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

Pressure EthanolVapourPressure::operator()(Temperature t) const {
  return from_si<Pressure>(factor * std::pow(10.0, a - b / (t.kelvin() + c)));
}

double VanLaar::ethanol(double x_ethanol) const {
  const double x_water = 1.0 - x_ethanol;
  if (x_water <= 0) return 1.0;
  const double d = 1.0 + a12 * x_ethanol / (a21 * x_water);
  return std::exp(a12 / (d * d));
}

double VanLaar::water(double x_ethanol) const {
  if (x_ethanol <= 0) return 1.0;
  const double d = 1.0 + a21 * (1.0 - x_ethanol) / (a12 * x_ethanol);
  return std::exp(a21 / (d * d));
}

Pressure CarbonDioxideVapourPressure::operator()(Temperature t) const {
  const double tc = critical_temperature.kelvin();
  const double tau = 1.0 - t.kelvin() / tc;
  if (tau <= 0) return from_si<Pressure>(std::numeric_limits<double>::infinity());
  const double sum =
      a[0] * tau + a[1] * tau * std::sqrt(tau) + a[2] * tau * tau + a[3] * std::pow(tau, 4);
  return critical_pressure * std::exp(tc / t.kelvin() * sum);
}

}  // namespace capsigh
