// Capability of a process against its tolerance: Cp and Cpk with 95 % intervals.
//
//   Cp  = (U − L)/(6 s)                      interval: Cp √(χ²_q(ν)/ν), ν = n − 1
//   Cpk = min(U − x̄, x̄ − L)/(3 s)            interval: Cpk ± z √(1/(9 n) + Cpk²/(2 ν))
//
// ISO 22514-2 and -4 (from memory), NIST/SEMATECH e-Handbook 6.1.6; the interval of Cpk by Bissell,
// Applied Statistics 39 (1990) 331. s is the standard deviation of all values: where the chart
// finds the process not in control, the same figures are its performance indices Pp and Ppk.
// Worked value: L 8, U 20, x̄ 16, s 2: Cp 1.0, Cpk 0.667.
#pragma once

#include <optional>

#include "capsigh/quality/moments.hpp"
#include "capsigh/quantity/validity.hpp"

namespace capsigh {

struct Index {
  double value = 0;
  double low = 0;  ///< 95 % interval
  double high = 0;
};

struct Capability {
  std::optional<Index> cp;  ///< needs both limits
  Index cpk;
};

/// From count, mean and standard deviation; nullopt below two values, without a limit or where
/// s = 0.
std::optional<Capability> capability(double count, double mean, double deviation,
                                     const Interval& limits);
std::optional<Capability> capability(const Moments& moments, const Interval& limits);

}  // namespace capsigh
