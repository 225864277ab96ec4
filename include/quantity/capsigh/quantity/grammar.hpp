// The one unit grammar: "2.3 bar gauge ± 0.05 bar" in and out. Conversion and rounding live here
// and nowhere else. A new unit is one row of unit_table.cpp.
#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <variant>

#include "capsigh/quantity/units.hpp"

namespace capsigh {

enum class Dimension {
  pressure,
  temperature,
  temperature_difference,
  volume,
  length,
  mass,
  fraction,
  gas_volumes,  ///< volumes of gas per volume of liquid
  mass_concentration,
  amount_concentration,
  molality,
  mass_fraction,
  sugar_scale,  ///< Brix and Plato: mass fraction of dissolved solids
  volume_fraction,
  density,
  duration,
  area,
  mass_flow,
  volume_flow,
  normal_volume_flow,  ///< of gas at 0 °C and 101.325 kPa, as volume of that state
  rate,                ///< per time
  stretch,             ///< growth of a container's volume per pressure
  transmission,        ///< of gas at 0 °C and 101.325 kPa through a wall
};

/// The name of a dimension in a sentence: "temperature".
std::string_view dimension_name(Dimension d);

enum class Reference { none, gauge, absolute };

/// One unit: value in SI = factor · number + offset.

struct Unit {
  std::string_view text;
  Dimension dimension;
  double factor;
  double offset = 0;
  Reference reference = Reference::none;
};

/// Every unit the grammar knows.
std::span<const Unit> unit_table();
/// The unit of that name in that dimension, or nullptr.
const Unit* find_unit(std::string_view text, Dimension dimension);

/// A quantity as read: SI value, and the ± behind it as an SI difference.
struct ParsedQuantity {
  double value = 0;
  Dimension dimension{};
  Reference reference = Reference::none;
  std::optional<double> plus_minus;
};

/// What is wrong with a quantity's text, and where in it (bytes).
struct GrammarFault {
  std::size_t offset = 0;
  std::size_t length = 1;
  std::string code;
  std::string message;
  std::string expected;
  std::string example;
};

/// What a reader expects: the dimensions it takes, whether a pressure must say gauge or abs, and an
/// example for its messages.
struct Wanted {
  std::span<const Dimension> dimensions;
  bool absolute_by_nature = false;  ///< a bare pressure is absolute, and gauge is refused
  std::string_view example;
};

/// Reads "NUMBER UNIT [gauge|abs] [± NUMBER UNIT]". Never throws on any bytes.
std::variant<ParsedQuantity, GrammarFault> parse_quantity(std::string_view text,
                                                          const Wanted& wanted);

/// The unit a quantity that has been read is written in ("psi" of "0.5 psi", "vol" of "3.70 vol ±
/// 0.10 vol"), or nullptr.
const Unit* written_unit(std::string_view quantity, Dimension dimension);

/// A number in a unit from its SI value; of a difference, without the unit's offset.
double in_unit(double si, const Unit& unit);
double difference_in_unit(double si, const Unit& unit);

/// Value and expanded uncertainty, rounded together to two significant digits of the uncertainty
/// (JCGM 100, 7.2.6).
struct Rounded {
  std::string value;
  std::string plus_minus;  ///< empty where there is no doubt
};
Rounded rounded(double value, double expanded_uncertainty);

/// A value at the decimals of two significant digits of `doubt`, rounded up or down: for limits
/// that must not widen. Without doubt: four significant digits.
std::string rounded_up(double value, double doubt);
std::string rounded_down(double value, double doubt);

/// A number with that many significant digits, trailing zeros kept, never "-0".
std::string significant(double value, int digits);
/// The shortest text that reads back as the same number.
std::string shortest(double value);
/// A number kept to nine significant digits, as machine-readable output carries it: the last bits
/// that differ between compilers are not information.
double for_machines(double value);
/// The same for an uncertainty or a share, which come from differences: six digits.
double doubt_for_machines(double value);

}  // namespace capsigh
