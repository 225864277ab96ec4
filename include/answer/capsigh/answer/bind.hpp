// (Recipe, Library) → Case. Records, ranges and defaults are chosen here, once.
#pragma once

#include "capsigh/answer/case.hpp"
#include "capsigh/constants/library.hpp"

namespace capsigh {

/// A case ready to solve, and what the choice of defaults has to say.
struct Binding {
  Case problem;
  std::string liquid;  ///< its name
  /// The trade's relation in force for CO2; nullptr: by composition.
  const Record* relation = nullptr;
  std::vector<const Record*> other_relations;  ///< of the same trade, for second opinions
  std::vector<std::string> doubt_not_stated;   ///< keys of inputs that count as exact
  Findings notes;                              ///< assumptions and cautions
  std::vector<const Record*> also_used;        ///< definitions that leave no step in a trace
};

/// Chooses records and defaults. Without a value, the findings say at which places of the recipe
/// what is wrong; values that could not be read count as given.
Outcome<Binding> bind(const Recipe& recipe, const Library& library);

/// The names of the gases and mixtures a recipe may use.
std::vector<std::string> gas_names(const Library& library);

}  // namespace capsigh
