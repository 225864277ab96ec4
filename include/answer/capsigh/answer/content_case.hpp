// The content of a gas as a case knows it.
#pragma once

#include "capsigh/balance/medium.hpp"
#include "capsigh/quantity/uncertain.hpp"
#include "capsigh/recipe/recipe.hpp"

namespace capsigh {

/// The content of one gas in the measure it was given in; the number is in SI units of it.
struct ContentCase {
  std::size_t gas = 0;
  ContentMeasure measure = ContentMeasure::volumes;
  Uncertain<Fraction> amount;
  bool is_limit = false;     ///< of a target: a maximum or minimum, which nothing is solved for
  Interval accepted;         ///< of a target: what conforms, in SI units of the measure
  bool conditioned = false;  ///< made by fermentation: what the solver finds, not `amount`
};

}  // namespace capsigh
