// (Case) → Answer: pure.
#pragma once

#include "capsigh/answer/case.hpp"
#include "capsigh/answer/figures.hpp"
#include "capsigh/balance/refusal.hpp"

namespace capsigh {

/// Solves a case at its current z. With a trace, every main figure's chain is noted, evaluated once
/// more at the solution; its last step is the figure.
OrRefusal<Answer> solve(const Case& c, Trace* trace = nullptr);

/// A refusal in words.
Finding explain(const Refusal& refusal);

}  // namespace capsigh
