// Why a balance has no answer: typed, with the value that is impossible and the bound it broke.
#pragma once

#include <variant>

namespace capsigh {

enum class RefusalCode {
  boils,                    ///< pressure at or below the liquid's vapour pressure
  pressure_beyond_model,    ///< pressure past where the gas law may be used at all
  no_pressure_holds,        ///< no pressure inside the model dissolves that much
  no_temperature_holds,     ///< no temperature inside the search dissolves that much
  container_without_space,  ///< the container is full of liquid
  nothing_of_that_gas,      ///< a content of a gas the headspace does not hold
};

/// value and bound in SI units (Pa, K, m³ or 1, by the code).
struct Refusal {
  RefusalCode code{};
  double value = 0;
  double bound = 0;
};

template <class T>
using OrRefusal = std::variant<T, Refusal>;

template <class T>
const Refusal* refused(const OrRefusal<T>& result) {
  return std::get_if<Refusal>(&result);
}

}  // namespace capsigh
