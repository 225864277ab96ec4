// Second opinions: the same case by composition and by the other relations of its trade.
#pragma once

#include <string>
#include <vector>

#include "capsigh/answer/bind.hpp"
#include "capsigh/answer/figures.hpp"
#include "capsigh/constants/library.hpp"

namespace capsigh {

/// What another relation says of one figure, beside what the report says.
struct SecondOpinion {
  std::string relation;  ///< "composition", "asbc", ...
  std::string quantity;  ///< path of the figure
  double value = 0;      ///< in `unit`
  JsonUnit unit;
  double difference = 0;  ///< per cent of the main figure
};

/// Opinions on what was solved for: the content, or the pressure or temperature that holds it.
/// Empty for a liquid without a relation of its trade.
std::vector<SecondOpinion> second_opinions(const Binding& binding, const Answer& answer,
                                           const Library& library);

/// The name of a relation's record: "asbc"; "composition" for none.
std::string relation_name(const Record* relation);

}  // namespace capsigh
