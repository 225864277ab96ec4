// Uncertainty by JCGM 100, first order: each doubt moved by one standard uncertainty to either
// side.
#pragma once

#include <string>
#include <vector>

#include "capsigh/answer/case.hpp"
#include "capsigh/answer/figures.hpp"

namespace capsigh {

/// What one doubt contributes to the standard uncertainty of one figure.
struct BudgetLine {
  std::string of;     ///< path of the figure
  std::string input;  ///< key of an input or of a record
  double u = 0;       ///< standard uncertainty of the input, in `u_unit`
  std::string u_unit;
  double share = 0;         ///< of the figure's variance
  double contribution = 0;  ///< to the figure's standard uncertainty, in the figure's JSON unit
  bool is_record = false;
};

/// The budget of the main figures, largest share first; an error for every doubt so wide that no
/// answer exists on either side of it.
struct Propagation {
  std::vector<BudgetLine> budget;
  Findings findings;
};

/// Sets u of every figure of `answer` (solved from `c` at z = 0).
Propagation propagate(Case& c, Answer& answer);

/// Judges the range of every record in the trace at the nominal point: a caution where it is left,
/// with value and bounds, and the record's u widened in `c`: by 1 + w d, d the distance outside in
/// widths of the range and w the record assumed.widening.
Findings judge_ranges(Case& c, const Trace& trace, double widening_per_width);

}  // namespace capsigh
