// The loops that take exponentials, for whole blocks: through glibc's vector functions where the
// processor has AVX2, chosen when the program runs.
#include <cstddef>  // says which C library this is
#if defined(__x86_64__) && defined(__GLIBC__) && defined(__GNUC__) && !defined(__clang__)
#define CAPSIGH_VECTOR_LOOPS 1
// Says that vector forms of these functions exist (libmvec); their errors are at most 4 units in
// the last place. Declared before the header that declares them without.
extern "C" {
__attribute__((__simd__("notinbranch"))) double exp(double) noexcept;
__attribute__((__simd__("notinbranch"))) double erfc(double) noexcept;
}
#endif

#include <algorithm>
#include <cmath>
#include <numbers>

#include "table.hpp"

namespace capsigh::readings_detail {
namespace {

[[gnu::always_inline]] inline void table_loop(
    std::size_t n, const Piece* const* pieces, const Form& form, double u_t, double u_p,
    const double* __restrict t, const double* __restrict p, double* __restrict exponent,
    double* __restrict factor, double* __restrict variance) {
  for (std::size_t i = 0; i < n; ++i) {
    const Row row = row_of(*pieces[i], form, t[i], p[i]);
    const double of_t = row.by_temperature * u_t;
    const double of_p = row.by_pressure * u_p;
    exponent[i] = row.exponent;
    factor[i] = row.factor;
    variance[i] = of_t * of_t + of_p * of_p + std::max(row.other_variance, 0.0);
  }
}

// exponent in, content out; relative variance in, standard uncertainty out.
[[gnu::always_inline]] inline void finish_loop(std::size_t n, double* __restrict content,
                                               double* __restrict u,
                                               const double* __restrict factor) {
  for (std::size_t i = 0; i < n; ++i) {
    const double c = factor[i] * ::exp(content[i]);
    content[i] = c;
    u[i] = c * std::sqrt(u[i]);
  }
}

[[gnu::always_inline]] inline void contents_loop(ReadingBlock& b, const Form& form, double u_t,
                                                 double u_p) {
  table_loop(b.padded(), b.pieces.data(), form, u_t, u_p, b.temperature.data(), b.pressure.data(),
             b.content.data(), b.probability.data(), b.u.data());
  finish_loop(b.padded(), b.content.data(), b.u.data(), b.probability.data());
}

[[gnu::always_inline]] inline void conformity_loop(std::size_t n, const double* __restrict content,
                                                   const double* __restrict u,
                                                   double* __restrict probability, double low,
                                                   double high) {
  for (std::size_t i = 0; i < n; ++i) {
    // Without doubt the scale is a step: 1 inside and at the limits, 0 outside.
    const double scale = u[i] > 0 ? 1.0 / (std::numbers::sqrt2 * u[i]) : 1e300;
    // Beyond 10 nothing is left to tell, and the vector functions become slow.
    const double over_low = std::clamp((low - content[i]) * scale, -10.0, 10.0);
    const double over_high = std::clamp((high - content[i]) * scale, -10.0, 10.0);
    const double p = 0.5 * (::erfc(over_low) - ::erfc(over_high));
    const double step = content[i] >= low && content[i] <= high ? 1.0 : 0.0;
    probability[i] = u[i] > 0 ? p : step;
  }
}

}  // namespace

#ifdef CAPSIGH_VECTOR_LOOPS

namespace {

[[gnu::target("avx2")]] void contents_avx2(ReadingBlock& block, const Form& form, double u_t,
                                           double u_p) {
  contents_loop(block, form, u_t, u_p);
}

[[gnu::target("avx2")]] void conformity_avx2(std::size_t n, const double* content, const double* u,
                                             double* probability, double low, double high) {
  conformity_loop(n, content, u, probability, low, high);
}

bool has_avx2() {
  static const bool has = __builtin_cpu_supports("avx2") != 0;
  return has;
}

}  // namespace

void contents(ReadingBlock& block, const Form& form, double u_temperature, double u_pressure) {
  if (has_avx2()) return contents_avx2(block, form, u_temperature, u_pressure);
  contents_loop(block, form, u_temperature, u_pressure);
}

void conformity(std::size_t n, const double* content, const double* u, double* probability,
                double low, double high) {
  if (has_avx2()) return conformity_avx2(n, content, u, probability, low, high);
  conformity_loop(n, content, u, probability, low, high);
}

#else

void contents(ReadingBlock& block, const Form& form, double u_temperature, double u_pressure) {
  contents_loop(block, form, u_temperature, u_pressure);
}

void conformity(std::size_t n, const double* content, const double* u, double* probability,
                double low, double high) {
  conformity_loop(n, content, u, probability, low, high);
}

#endif

}  // namespace capsigh::readings_detail
