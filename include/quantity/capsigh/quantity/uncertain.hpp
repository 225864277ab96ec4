// An input and what is known of its doubt (JCGM 100).
#pragma once

#include <string>

#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// How the doubt of an input is distributed; Monte Carlo draws by it.
enum class Shape { exact, rectangular, normal };

/// An input: best value, standard uncertainty u (k = 1), and z, the number of standard
/// uncertainties it currently stands away from best.
template <class Q>
struct Uncertain {
  Q best{};
  Difference<Q> u{};
  Shape shape = Shape::exact;
  double z = 0;

  [[nodiscard]] Q now() const { return best + u * z; }
};

/// An exact input.
template <class Q>
Uncertain<Q> exactly(Q best) {
  return {best, {}, Shape::exact, 0};
}

/// One thing in doubt: its name, the z that moves it and its size. `is_record` tells a record's
/// doubt (a model) from a recipe's (an instrument).
struct Doubt {
  std::string name;
  double* z = nullptr;
  double u = 0;  ///< standard uncertainty in `unit`
  std::string unit;
  Shape shape = Shape::normal;
  bool is_record = false;
};

}  // namespace capsigh
