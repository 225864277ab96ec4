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

EthanolWaterDensity EthanolWaterDensity::from(const Record& record, Temperature zero_celsius) {
  EthanolWaterDensity law;
  law.zero_celsius = zero_celsius;
  std::size_t next = 0;
  const auto take = [&] { return record.values[next++].value; };
  for (auto& a : law.a) a = take();
  for (auto& b : law.b) b = take();
  constexpr std::array<std::size_t, 5> terms{11, 10, 9, 4, 2};  // R22's ragged table of C
  for (std::size_t i = 0; i < terms.size(); ++i) {
    for (std::size_t k = 0; k < terms[i]; ++k) law.c[i][k] = take();
  }
  return law;
}

MassDensity EthanolWaterDensity::operator()(Fraction by_mass, Temperature t) const {
  // Kernel: p dimensionless, dt in K, density in kg/m³.
  const double p = by_mass.value();
  const double celsius = (t - zero_celsius).value();
  const auto at = [&](double dt) {
    double sum = 0;
    for (auto it = a.rbegin(); it != a.rend(); ++it) sum = sum * p + *it;
    double power = 1;
    for (std::size_t i = 0; i < b.size(); ++i) {
      power *= dt;
      double mixed = 0;
      if (i < c.size()) {
        for (auto it = c[i].rbegin(); it != c[i].rend(); ++it) mixed = (mixed + *it) * p;
      }
      sum += power * (b[i] + mixed);
    }
    return sum;
  };
  if (celsius <= highest) return from_si<MassDensity>(at(celsius - reference));
  constexpr double step = 1e-3;  // K, for the slope at the end of the polynomial
  const double end = highest - reference;
  const double slope = (at(end) - at(end - step)) / step;
  return from_si<MassDensity>(at(end) + slope * (celsius - highest));
}

Fraction EthanolWaterDensity::by_mass(Fraction by_volume, Temperature twenty) const {
  // Strength by volume is mass fraction x density / density of ethanol; solved by iteration, which
  // contracts because the mixture's density changes by a fifth only.
  const MassDensity pure = (*this)(Fraction(1.0), twenty);
  Fraction p = by_volume;
  constexpr int rounds = 60;
  for (int i = 0; i < rounds; ++i) p = by_volume * pure / (*this)(p, twenty);
  return p;
}

Fraction SucroseGravity::operator()(Fraction by_mass) const {
  const double percent = 100.0 * by_mass.value();
  return 1.0 + percent / (a - b * percent / c);
}

}  // namespace capsigh
