#include "capsigh/models/real_gas.hpp"

#include <cmath>

namespace capsigh {
namespace {

// Horner's scheme, lowest power first.
template <std::size_t N>
double polynomial(const std::array<double, N>& c, double x) {
  double sum = 0;
  for (auto it = c.rbegin(); it != c.rend(); ++it) sum = sum * x + *it;
  return sum;
}

}  // namespace

MolarVolume PowerSeriesVirial::operator()(Temperature t) const {
  return from_si<MolarVolume>(factor * polynomial(c, t.kelvin()));
}

MolarVolume InverseTemperatureVirial::operator()(Temperature t) const {
  return from_si<MolarVolume>(factor * polynomial(a, reference_temperature / t.kelvin() - 1.0));
}

MolarVolume TsonopoulosVirial::operator()(Temperature t) const {
  const double x = critical_temperature.kelvin() / t.kelvin();  // 1/Tr
  const double x2 = x * x;
  const double x3 = x2 * x;
  const double x8 = x3 * x3 * x2;
  const double simple = f0[0] + f0[1] * x + f0[2] * x2 + f0[3] * x3 + f0[4] * x8;
  const double acentric = f1[0] + f1[1] * x2 + f1[2] * x3 + f1[3] * x8;
  return from_si<MolarVolume>(r.value() * critical_temperature.kelvin() /
                              critical_pressure.value() * (simple + acentric_factor * acentric));
}

MolarVolume CrossVirialExcess::operator()(Temperature t) const {
  return from_si<MolarVolume>(factor * (d0 + d1 * t.kelvin()));
}

Fraction FugacityCoefficient::operator()(MolarVolume b_star, Pressure p, Temperature t) const {
  return std::exp(b_star.value() * p.value() / (r.value() * t.kelvin()));
}

Fraction Compressibility::operator()(MolarVolume b_mix, Pressure p, Temperature t) const {
  return 1.0 + b_mix.value() * p.value() / (r.value() * t.kelvin());
}

MolarVolume MolarVolumeOfGas::operator()(Fraction z, Pressure p, Temperature t) const {
  return from_si<MolarVolume>(z.value() * r.value() * t.kelvin() / p.value());
}

Amount GasInHeadspace::operator()(Pressure p, Pressure vapour, Volume v, Fraction z,
                                  Temperature t) const {
  return from_si<Amount>((p - vapour).value() * v.value() / (z.value() * r.value() * t.kelvin()));
}

}  // namespace capsigh
