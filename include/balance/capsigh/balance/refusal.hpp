// Why a balance has no answer: typed, with the value that is impossible and the bound it broke.
#pragma once

#include <variant>

namespace capsigh {

enum class RefusalCode {
  boils,                     ///< pressure at or below the liquid's vapour pressure
  temperature_beyond_model,  ///< temperature past where the liquid's laws may be used at all
  pressure_beyond_model,     ///< pressure past where the gas law may be used at all
  condenses,                 ///< partial pressure of CO2 at or above its own vapour pressure
  no_pressure_holds,         ///< no pressure inside the model dissolves that much
  no_temperature_holds,      ///< no temperature inside the search dissolves that much
  container_without_space,   ///< the container is full of liquid
  nothing_of_that_gas,       ///< a content of a gas the headspace does not hold
  no_blend_holds,            ///< not even the pure gas holds that content at that pressure
  air_exceeds_headspace,     ///< more air than the headspace has room for
  too_little_everywhere,  ///< up to the end of the search, more than that content stays dissolved
  nothing_to_condition,   ///< the liquid holds the wanted content before any sugar ferments
  no_number,              ///< a figure came out as no finite number
};

/// Which step of an answer was refused, so that a message can point at what asked for it.
enum class AskedBy { contact, saturation, closing, opening, conditioning, supply };

/// value and bound in SI units (Pa, K, m³ or 1, by the code).
struct Refusal {
  RefusalCode code{};
  double value = 0;
  double bound = 0;
  AskedBy asked_by = AskedBy::contact;
};

template <class T>
using OrRefusal = std::variant<T, Refusal>;

template <class T>
const Refusal* refused(const OrRefusal<T>& result) {
  return std::get_if<Refusal>(&result);
}

}  // namespace capsigh
