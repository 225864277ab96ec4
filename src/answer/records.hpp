// Records into laws: the choice of which record serves where.
#pragma once

#include "capsigh/balance/medium.hpp"
#include "capsigh/constants/library.hpp"

namespace capsigh::answer_detail {

/// The medium "water with these gases", every law from the library.
Medium water_with(const Library& library, const std::vector<std::string>& gases);

/// A constant record as a quantity.
template <class Q>
Q constant(const Library& library, std::string_view key) {
  const Record& record = library.at(key);
  return from_si<Q>(record.values[0].value * record.factor);
}

}  // namespace capsigh::answer_detail
