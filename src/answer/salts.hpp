// Salts by formula: which ions a formula splits into, and what it weighs.
#pragma once

#include <string>
#include <vector>

#include "capsigh/constants/library.hpp"

namespace capsigh::answer_detail {

struct IonCount {
  const Record* ion = nullptr;  ///< record ion.*
  double count = 0;             ///< a formula unit
};

/// What a formula means. `ions` is empty where it is no salt of known ions; `neutral` then names
/// the formula that would be one, if the same two ions make one.
struct Salt {
  std::vector<IonCount> ions;
  double molar_mass = 0;  ///< kg/mol
  std::string neutral;
};

Salt read_salt(const Library& library, const std::string& formula);

}  // namespace capsigh::answer_detail
