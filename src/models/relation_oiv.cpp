#include "capsigh/models/relation_oiv.hpp"

#include <cmath>

namespace capsigh {

OivRelation OivRelation::from(const Record& record, GasConstant r) {
  const auto value = [&](std::size_t i) { return record.values[i].value; };
  return {value(0), value(1), value(2), value(3), value(4), value(5), r};
}

MassConcentration OivRelation::operator()(Temperature t, Pressure p, Fraction ethanol_by_volume,
                                          MassConcentration sugar) const {
  // Kernel: Pa, % vol, g/L.
  const double at_20 =
      k * p.value() * (a - b * 100.0 * ethanol_by_volume.value()) * (1.0 - s * sugar.value());
  const double warmth =
      std::exp(enthalpy / r.value() * (1.0 / t.kelvin() - 1.0 / reference_temperature));
  return from_si<MassConcentration>(at_20 * warmth);
}

}  // namespace capsigh
