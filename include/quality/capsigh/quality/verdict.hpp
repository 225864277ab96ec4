// Verdicts by JCGM 106: how probable it is that the true value lies inside the limits.
//
//   P = Φ((U − y)/u) − Φ((L − y)/u)
//
// normal, k = 1. Worked values (JCGM 106): y −5.47, u 0.05, upper limit −5.40: 0.919; y 13.6,
// u 1.8, 12.5 to 16.3: 0.66.
#pragma once

#include "capsigh/quantity/validity.hpp"

namespace capsigh {

enum class Verdict { inside, outside, undecided };

struct Judgement {
  Verdict verdict = Verdict::undecided;
  double probability = 0;  ///< of conformity
};

/// Probability that a value y with standard uncertainty u lies inside the limits; 0 or 1 where
/// there is no doubt.
double conformity(double y, double u, const Interval& limits);

/// Inside if the probability of conformity is at least 1 − risk, outside if it is at most risk,
/// else undecided (guarded acceptance and rejection).
Judgement judge(double y, double u, const Interval& limits, double risk);

}  // namespace capsigh
