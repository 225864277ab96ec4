// Content from thousands of readings a millisecond: a table sampled from the laws of the answer
// room, never a second copy of them.
//
// In pressure the form is exact. At one temperature every law in force has the shape
//   g(p) = exp(a - s p) (p - q)
// (Dalton, fugacity and pressure on Henry's constant: q the vapour pressure; a trade's relation: q
// where it reads nothing), and content as tested is
//   c = g(p) F(x),  F(x) = g_relation(x)/g_pure(x),  x = y (p - q) + q, held inside the range
// Three contents at one temperature give a, s and q. In temperature a, s, q are polynomials through
// Chebyshev nodes on pieces of at most one kelvin, split at every edge where a record takes over
// or a range ends. Each piece is compared with the laws when it is made; one that does not agree to
// 1e-9 is not used, and its rows are answered by the laws themselves.
#pragma once

#include <array>
#include <atomic>
#include <cstdint>
#include <memory>
#include <mutex>
#include <optional>
#include <vector>

#include "capsigh/answer/case.hpp"
#include "capsigh/balance/refusal.hpp"
#include "capsigh/readings/laws.hpp"

namespace capsigh {

/// Standard uncertainties of the instruments behind a reading.
struct InstrumentDoubt {
  TemperatureDifference temperature{};
  Pressure gauge{};
  Pressure ambient{};
};

/// One reading's content and what moves it; derivatives relative: d ln c/dT (1/K), d ln c/dp
/// (1/Pa).
struct Sensitivity {
  double content = 0;
  double by_temperature = 0;
  double by_pressure = 0;
  double other_variance = 0;  ///< relative, of all doubts but the instruments'
};

namespace readings_detail {

// Functions of temperature in one piece, side by side so that a row reads one run of memory.
enum Function : std::size_t { ln_k, slope, zero, ln_f, slope_f, zero_f, pole_f, spare };
inline constexpr std::size_t kFunctions = 8;
inline constexpr std::size_t kVariances = 4;  // relative variance of the rest: v0 + v1 p + v2 p²
inline constexpr std::size_t kOrder = 5;      // coefficients of a polynomial

// What is the same for every piece: share of the gas, and where a convention is read (Pa).
struct Form {
  double share = 1;
  double low = 0;
  double high = 0;
  double least_partial = 0;
};

struct alignas(64) Piece {
  double low = 0;     // K
  double high = 0;    // K
  double middle = 0;  // K
  double most = 0;    // Pa, up to which nothing condenses and the gas law has a meaning
  bool by_laws = false;
  bool tested = false;  // a convention's factor applies
  double coefficient[kOrder][kFunctions] = {};
  double variance[2][kVariances] = {};
};

}  // namespace readings_detail

/// Readings as columns of plain doubles in SI units, padded to a multiple of kLanes so that the
/// last bits of a row do not depend on where a block ends.
class ReadingBlock {
 public:
  static constexpr std::size_t kLanes = 8;

  /// Room for `rows` rows; the padding repeats harmless values.
  void resize(std::size_t rows);
  [[nodiscard]] std::size_t size() const { return size_; }
  [[nodiscard]] std::size_t padded() const { return temperature.size(); }

  std::vector<double> temperature;  ///< K, corrected
  std::vector<double> pressure;     ///< Pa absolute, corrected
  std::vector<double> content;      ///< SI units of the measure
  std::vector<double> u;            ///< standard uncertainty of the content
  std::vector<double> probability;  ///< of conformity, 0 to 1
  std::vector<std::uint8_t> inside_model;
  std::vector<const readings_detail::Piece*> pieces;  ///< the kernel's own

 private:
  std::size_t size_ = 0;
};

/// The table of one case, one gas and one measure. Pieces are made when first needed; a piece does
/// not depend on which row asked for it. Safe to use from several threads.
class Kernel {
 public:
  explicit Kernel(const ReadingLaws& laws);
  Kernel(const Kernel&) = delete;
  Kernel& operator=(const Kernel&) = delete;
  ~Kernel();

  /// Content and u of every row; a row outside the model is marked and has neither.
  void evaluate(ReadingBlock& block, const InstrumentDoubt& doubt) const;

  /// The same for one reading inside the model, with its parts.
  [[nodiscard]] Sensitivity sensitivity(double kelvin, double pascal) const;

  /// Why a reading has no content, if so.
  [[nodiscard]] std::optional<Refusal> refusal(double kelvin, double pascal) const;

  /// Probability that each content lies inside the limits (SI units of the measure), JCGM 106.
  static void conformity(ReadingBlock& block, const Interval& limits);

  /// Pieces answered by the laws because the table did not agree; for tests.
  [[nodiscard]] std::size_t distrusted() const { return distrusted_.load(); }

 private:
  using Piece = readings_detail::Piece;

  [[nodiscard]] const Piece* piece(double kelvin) const;
  [[nodiscard]] std::unique_ptr<Piece> make(std::size_t index) const;
  [[nodiscard]] std::array<double, 4> factor_at(const ReadingLaws::At& at) const;
  [[nodiscard]] bool agrees(const Piece& piece) const;
  [[nodiscard]] Sensitivity by_laws(double kelvin, double pascal) const;

  const ReadingLaws& laws_;
  readings_detail::Form form_;
  std::vector<double> edges_;          // K, ascending; piece i lies between i and i + 1
  std::vector<std::uint32_t> bucket_;  // first piece of each bucket of kBucket kelvin
  mutable std::vector<std::atomic<const Piece*>> pieces_;
  mutable std::vector<std::unique_ptr<Piece>> owned_;
  mutable std::mutex making_;
  mutable std::atomic<std::size_t> distrusted_{0};
};

}  // namespace capsigh
