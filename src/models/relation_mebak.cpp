#include "capsigh/models/relation_mebak.hpp"

#include <cmath>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {

MebakRelation MebakRelation::from(const Record& record) {
  return {record.values[0].value, record.values[1].value};
}

Fraction MebakRelation::operator()(Temperature t, Pressure p) const {
  // Kernel: bar, K, per cent by mass.
  const double bar = in_unit(p.value(), *find_unit("bar", Dimension::pressure));
  return bar * std::exp(a + b / t.kelvin()) / 100.0;
}

}  // namespace capsigh
