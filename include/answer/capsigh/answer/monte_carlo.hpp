// The doubt of an answer by drawing (JCGM 101), where first order may not be enough.
#pragma once

#include <cstdint>
#include <functional>
#include <string>
#include <vector>

#include "capsigh/answer/case.hpp"
#include "capsigh/answer/figures.hpp"
#include "capsigh/quantity/finding.hpp"
#include "capsigh/quantity/validity.hpp"

namespace capsigh {

struct MonteCarloOptions {
  std::uint64_t draws = 0;  ///< none: first order alone
  std::uint64_t seed = 1;
  unsigned threads = 1;
  std::function<void(double share)> progress;
};

/// A content that is judged: its figure, what the SI value is divided by to be in the measure of
/// the target, how machines read that measure, and what conforms.
struct WatchedTarget {
  std::string path;
  double divisor = 1;
  JsonUnit unit;
  Interval accepted;
};

struct MonteCarloRun {
  std::uint64_t draws = 0;
  std::uint64_t seed = 0;
  std::uint64_t unanswered = 0;    ///< draws at which the whole has no answer
  double coverage = 0;             ///< probability of the intervals
  std::vector<double> conforming;  ///< share of the draws that conform, a watched target each
  Findings cautions;
};

/// Draws every doubt of the case and sets u and the coverage interval of every asked figure of
/// `answer`, which was solved from `c` at z = 0 and propagated in first order. A figure with more
/// than `most_unanswered` of its draws without an answer has no u; a caution says so, and where u
/// differs from first order by more than `agreement` (a share of it).
MonteCarloRun monte_carlo(const Case& c, Answer& answer, const MonteCarloOptions& options,
                          const std::vector<WatchedTarget>& watched, double coverage,
                          double most_unanswered, double agreement);

}  // namespace capsigh
