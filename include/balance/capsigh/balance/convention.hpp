// Conventions by which trades read CO2 from pressure and temperature. The convention is the
// specification: it enters as one factor, relation over composition, evaluated in its range and
// carried outward from the edge. It has no doubt of its own; what composition doubts cancels out.
#pragma once

#include <memory>
#include <variant>

#include "capsigh/constants/cited.hpp"
#include "capsigh/models/relation_asbc.hpp"
#include "capsigh/models/relation_mebak.hpp"
#include "capsigh/models/relation_oiv.hpp"
#include "capsigh/quantity/validity.hpp"

namespace capsigh {

struct Medium;

/// What pure water would hold at the same temperature and pressure (custom of soft drinks).
struct WaterEquivalent {
  std::shared_ptr<const Medium> water;
};

using RelationForm =
    std::variant<std::monostate, AsbcRelation, MebakRelation, OivRelation, WaterEquivalent>;

struct Convention {
  RelationForm relation;
  const Record* record = nullptr;  ///< none: by composition
  Interval temperature;            ///< K, where the relation holds
  Interval pressure;               ///< Pa absolute
  Pressure least_partial{};        ///< CO2 below which the relation is not read

  [[nodiscard]] bool in_force() const { return record != nullptr; }
};

/// F = b_relation/b_composition at the same temperature and pressure of pure CO2.
struct ConventionFactor {
  static constexpr LawInfo<2> info{"convention over composition",
                                   "F = b_relation/b_composition",
                                   {"b_relation", "b_composition"},
                                   "F"};
  Fraction operator()(Molality by_relation, Molality by_composition) const {
    return by_relation / by_composition;
  }
};

/// b as tested = F b by composition.
struct ContentAsTested {
  static constexpr LawInfo<2> info{"content as tested", "b = F b", {"F", "b"}, "b"};
  Molality operator()(Fraction factor, Molality b) const { return factor * b; }
};

}  // namespace capsigh
