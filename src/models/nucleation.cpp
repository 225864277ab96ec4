#include "capsigh/models/nucleation.hpp"

#include <cmath>

namespace capsigh {

WaterSurfaceTension WaterSurfaceTension::from(const Record& record) {
  return {record.values[0].value * record.factor, record.values[1].value, record.values[2].value,
          from_si<Temperature>(record.values[3].value)};
}

SurfaceTension WaterSurfaceTension::operator()(Temperature t) const {
  const double theta = 1.0 - t.kelvin() / critical_temperature.kelvin();
  return from_si<SurfaceTension>(b0 * std::pow(theta, mu) * (1.0 + b * theta));
}

}  // namespace capsigh
