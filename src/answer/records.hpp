// Records into laws: the choice of which record serves where.
#pragma once

#include "capsigh/balance/medium.hpp"
#include "capsigh/constants/library.hpp"

namespace capsigh::answer_detail {

/// The medium of a liquid with these gases, every law from the library. `relation` is the
/// convention in force for CO2, or nullptr.
Medium medium_of(const Library& library, LiquidModel liquid, const std::vector<std::string>& gases,
                 const Record* relation);

/// The convention of a relation's record (nullptr: none), in that medium.
Convention convention_of(const Library& library, const Record* relation, const Medium& medium);

template <class Q>
CitedConstant<Q> cited_constant(const Record& record) {
  return {{from_si<Q>(record.values[0].value * record.factor)}, doubt_of(record)};
}

/// A constant record as a quantity.
template <class Q>
Q constant(const Library& library, std::string_view key) {
  const Record& record = library.at(key);
  return from_si<Q>(record.values[0].value * record.factor);
}

}  // namespace capsigh::answer_detail
