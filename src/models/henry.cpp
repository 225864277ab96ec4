#include "capsigh/models/henry.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh {

MolalHenryConstant ThreeTermHenry::per_mass(Temperature t) const {
  const double hundreds = t.kelvin() / 100.0;  // the form counts T in hundreds of kelvin
  return from_si<MolalHenryConstant>(factor *
                                     std::exp(a[0] + a[1] / hundreds + a[2] * std::log(hundreds)));
}

HenryConstant ThreeTermHenry::operator()(Temperature t, MassDensity water, Pressure) const {
  return per_mass(t) * water;
}

Pressure InversePowersHenry::per_mole_fraction(Temperature t) const {
  const double inverse = 1.0 / t.kelvin();
  return from_si<Pressure>(factor * std::exp(a[0] + (a[1] + a[2] * inverse) * inverse));
}

HenryConstant InversePowersHenry::operator()(Temperature t, MassDensity water, Pressure) const {
  return water / (water_molar_mass * per_mole_fraction(t));
}

Pressure HighTemperatureHenry::per_mole_fraction(Temperature t, Pressure vapour) const {
  const double reduced = t.kelvin() / critical_temperature.kelvin();
  const double tau = 1.0 - reduced;
  const double exponent = (a[0] + a[1] * std::pow(tau, 0.355)) / reduced +
                          a[2] * std::pow(reduced, -0.41) * std::exp(tau);
  return vapour * std::exp(exponent);
}

HenryConstant HighTemperatureHenry::operator()(Temperature t, MassDensity water,
                                               Pressure vapour) const {
  return water / (water_molar_mass * per_mole_fraction(t, vapour));
}

double MoleFractionHenry::mole_fraction(Temperature t) const {
  const double x = t.kelvin() / theta;
  return std::exp(a[0] + a[1] / x + a[2] * std::log(x) + a[3] * x);
}

HenryConstant MoleFractionHenry::operator()(Temperature t, MassDensity water, Pressure) const {
  const double x = mole_fraction(t);
  return x / (1.0 - x) * water / (water_molar_mass * partial_pressure);
}

HenryConstant TwoTermHenry::operator()(Temperature t, MassDensity, Pressure) const {
  return from_si<HenryConstant>(factor * scale * k0 *
                                std::exp(d * (1.0 / t.kelvin() - 1.0 / reference_temperature)));
}

MolarEnergy EnthalpyOfSolution::operator()(HenryConstant k_cold, Temperature cold,
                                           HenryConstant k_warm, Temperature warm) const {
  const double ratio = std::log(k_cold.value() / k_warm.value());
  return from_si<MolarEnergy>(-r.value() * ratio / (1.0 / cold.kelvin() - 1.0 / warm.kelvin()));
}

double smoothstep(double x, double from, double to) {
  const double s = std::clamp((x - from) / (to - from), 0.0, 1.0);
  return s * s * (3.0 - 2.0 * s);
}

HenryConstant JoinedHenry::operator()(HenryConstant first, HenryConstant second,
                                      Fraction weight) const {
  const double w = weight.value();
  return from_si<HenryConstant>(
      std::exp((1.0 - w) * std::log(first.value()) + w * std::log(second.value())));
}

HenryConstant PressureOnHenry::operator()(HenryConstant k, MolarVolume v, Pressure p,
                                          Pressure reference, Temperature t) const {
  // Kernel: v in m³/mol, p in Pa, R in J/(mol K), T in K.
  const double exponent = -v.value() * (p - reference).value() / (r.value() * t.kelvin());
  return k * std::exp(exponent);
}

}  // namespace capsigh
