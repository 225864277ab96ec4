// Which instrument would make a doubt smaller.
#pragma once

#include <string>
#include <vector>

#include "capsigh/answer/doubt.hpp"

namespace capsigh {

/// One instrument: its limit of error now, and the one that would do, both in `unit` (SI).
struct Improvement {
  std::string input;  ///< key of the recipe
  double now = 0;
  double needed = 0;
  std::string unit;
};

/// How a standard uncertainty could come down to what is wanted.
struct Advice {
  enum class By {
    nothing,      ///< it is small enough
    instrument,   ///< one instrument will do: the one in `improvements`
    instruments,  ///< all of them together
    none,         ///< none will do: the published constants alone leave more
  };
  By by = By::nothing;
  std::vector<Improvement> improvements;
  /// What the doubt would be with perfect instruments, as a share of what it is.
  double records_alone = 0;
  bool inputs_stated = true;  ///< false: no input of the recipe has a ± that enters
};

/// `lines`: the budget of one figure; `wanted`: the standard uncertainty to reach, as a share of
/// what it is now. Limits of error count as rectangular (JCGM 100, 4.3.7).
Advice advise(const std::vector<BudgetLine>& lines, double wanted);

/// The lines of a budget that belong to one figure.
std::vector<BudgetLine> budget_of(const std::vector<BudgetLine>& budget, std::string_view figure);

}  // namespace capsigh
