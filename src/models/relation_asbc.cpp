#include "capsigh/models/relation_asbc.hpp"

#include <cmath>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {

AsbcRelation AsbcRelation::from(const Record& record) {
  return {record.values[0].value, record.values[1].value, record.values[2].value,
          record.values[3].value};
}

Fraction AsbcRelation::operator()(Temperature t, Pressure p) const {
  // Kernel: psi and °F, as the table was made.
  const double psi = in_unit(p.value(), *find_unit("psi", Dimension::pressure));
  const double fahrenheit = in_unit(t.kelvin(), *find_unit("degF", Dimension::temperature));
  constexpr double freezing = 32;
  return psi * (a + b * std::exp(-(fahrenheit - freezing) / c)) - d;
}

}  // namespace capsigh
