// Verdicts by JCGM 106: how probable it is that the true value lies inside the limits, and which
// measured values are accepted.
//
//   P = Φ((U − y)/u) − Φ((L − y)/u)
//
// normal, k = 1. Worked values (JCGM 106): y −5.47, u 0.05, upper limit −5.40: 0.919; y 13.6,
// u 1.8, 12.5 to 16.3: 0.66.
#pragma once

#include <optional>

#include "capsigh/quantity/validity.hpp"

namespace capsigh {

enum class Verdict { inside, outside, undecided };

struct Judgement {
  Verdict verdict = Verdict::undecided;
  double probability = 0;  ///< of conformity
};

/// Guarded: inside at a probability of conformity of at least 1 − risk, outside at most risk, else
/// undecided (guarded acceptance and rejection, JCGM 106 8.3). Not guarded: values are compared
/// (simple acceptance, 8.2).
struct JudgingRule {
  bool guarded = true;
  double risk = 0;  ///< 0 to 0.5
};

/// Probability that a value y with standard uncertainty u lies inside the limits; 0 or 1 where
/// there is no doubt.
double conformity(double y, double u, const Interval& limits);

Judgement judge(double y, double u, const Interval& limits, const JudgingRule& rule);

/// The measured values that are accepted.
struct AcceptanceZone {
  Interval values;              ///< where `empty` is false
  bool empty = false;           ///< the doubt is so large that no value is accepted
  double guard_band = 0;        ///< from a limit to the edge of the zone
  double best_probability = 1;  ///< of conformity, at the best value there is
  double u_to_open = 0;         ///< of an empty zone: below this standard uncertainty it opens
};

/// The zone of a rule. Limits need at least one end; u in their unit. Errors: none.
AcceptanceZone acceptance_zone(double u, const Interval& limits, const JudgingRule& rule);

/// The standard uncertainty at which an undecided value would be decided: the largest one, at most
/// u. nullopt where y stands on a limit, so that none decides.
std::optional<double> u_to_decide(double y, double u, const Interval& limits,
                                  const JudgingRule& rule);

}  // namespace capsigh
