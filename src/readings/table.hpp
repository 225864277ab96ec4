// One row of the kernel's table, and the loops over blocks. Plain doubles: K, Pa, 1/K, 1/Pa;
// content in SI units of the measure.
#pragma once

#include <algorithm>
#include <cmath>
#include <cstddef>

#include "capsigh/readings/kernel.hpp"

namespace capsigh::readings_detail {

// content = factor exp(exponent), and its relative derivatives.
struct Row {
  double exponent = 0;
  double factor = 0;
  double by_temperature = 0;
  double by_pressure = 0;
  double other_variance = 0;
  double above_vapour = 0;  // p less the pressure at which nothing is dissolved
};

inline double content_of(const Row& row) { return row.factor * std::exp(row.exponent); }

// All functions of temperature at once, and their slopes.
struct Values {
  double f[kFunctions];
  double slope[kFunctions];
};

[[gnu::always_inline]] inline void values_at(const Piece& piece, double tau, Values& out) {
  const auto& c = piece.coefficient;
  for (std::size_t i = 0; i < kFunctions; ++i) {
    out.f[i] = (((c[4][i] * tau + c[3][i]) * tau + c[2][i]) * tau + c[1][i]) * tau + c[0][i];
    out.slope[i] = ((4.0 * c[4][i] * tau + 3.0 * c[3][i]) * tau + 2.0 * c[2][i]) * tau + c[1][i];
  }
}

[[gnu::always_inline]] inline Row row_of(const Piece& piece, const Form& form, double t, double p) {
  const double tau = t - piece.middle;
  Values v;
  values_at(piece, tau, v);
  Row row;
  const double over = p - v.f[zero];
  const double inverse = 1.0 / over;
  row.above_vapour = over;
  row.exponent = v.f[ln_k] - v.f[slope] * p;
  row.factor = over;
  row.by_pressure = inverse - v.f[slope];
  row.by_temperature = v.slope[ln_k] - v.slope[slope] * p - v.slope[zero] * inverse;
  if (piece.tested) {
    // x: the total pressure over pure gas with the same partial pressure, held inside the range.
    const double wanted = form.share * over + v.f[zero];
    const double low = std::max(form.low, v.f[pole_f] + form.least_partial);
    const double x = std::clamp(wanted, low, std::max(low, form.high));
    const double over_zero = 1.0 / (x - v.f[zero_f]);
    const double over_pole = 1.0 / (x - v.f[pole_f]);
    const double by_x = over_zero - over_pole - v.f[slope_f];
    row.exponent += v.f[ln_f] - v.f[slope_f] * x;
    row.factor *= (x - v.f[zero_f]) * over_pole;
    row.by_temperature += v.slope[ln_f] - v.slope[slope_f] * x - v.slope[zero_f] * over_zero +
                          v.slope[pole_f] * over_pole;
    if (x == wanted) {
      row.by_pressure += form.share * by_x;
      row.by_temperature += (1.0 - form.share) * v.slope[zero] * by_x;
    } else if (x == low && low > form.low) {
      row.by_temperature += v.slope[pole_f] * by_x;
    }
  }
  const auto& w = piece.variance;
  row.other_variance =
      (w[0][0] + w[1][0] * tau) + ((w[0][1] + w[1][1] * tau) + (w[0][2] + w[1][2] * tau) * p) * p;
  return row;
}

// Content and u of every row of a block, padding too, from the pieces in it. `probability` is left
// with p less the pressure at which nothing is dissolved.
void contents(ReadingBlock& block, const Form& form, double u_temperature, double u_pressure);

// Probability that a normal value (content, u) lies between low and high.
void conformity(std::size_t n, const double* content, const double* u, double* probability,
                double low, double high);

}  // namespace capsigh::readings_detail
