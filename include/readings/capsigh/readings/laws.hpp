// The laws a kernel is sampled from: content of one gas in one measure at temperature and pressure,
// as `solve` has it for the same case, and what its doubts other than the instruments leave open.
#pragma once

#include <array>
#include <optional>
#include <vector>

#include "capsigh/answer/case.hpp"
#include "capsigh/balance/refusal.hpp"

namespace capsigh {

/// Samples of one case. Owns its copy, whose doubts it moves; content() is safe from several
/// threads, the doubts are moved under the kernel's lock only.
class ReadingLaws {
 public:
  /// `gas` counts in the order of the case's medium.
  ReadingLaws(Case problem, std::size_t gas, ContentMeasure measure);

  /// One temperature, everything worked out that does not depend on pressure.
  struct At {
    AtTemperature at;
    GasMixture mixture;
    AtTemperature edge;  ///< where the convention is read
    GasMixture pure;     ///< of the gas alone there
  };
  [[nodiscard]] At at(Temperature t) const;

  /// Content in SI units of the measure at a total absolute pressure (Pa).
  [[nodiscard]] double content(const At& at, double pascal) const;
  /// The same without the trade's convention.
  [[nodiscard]] double by_composition(const At& at, double pascal) const;
  /// What the convention reads over the pure gas at its own temperature, and composition there.
  [[nodiscard]] double relation_over_pure(const At& at, double pascal) const;
  [[nodiscard]] double composition_over_pure(const At& at, double pascal) const;

  /// SI units of a measure per mol/kg.
  [[nodiscard]] double per_molality(ContentMeasure measure) const;

  /// Whether a convention applies to the gas; the pressures between which it is read (Pa).
  [[nodiscard]] bool tested() const;
  [[nodiscard]] double least_partial() const;
  [[nodiscard]] Interval convention_pressure() const;
  [[nodiscard]] double share() const { return shares_[gas_].value(); }

  /// Why there is no content, if so.
  [[nodiscard]] std::optional<Refusal> refusal(const At& at, double pascal) const;
  [[nodiscard]] double pressure_limit() const;
  [[nodiscard]] Interval temperature_limits() const;
  /// Pressure above which the gas condenses, infinite where it does not (Pa).
  [[nodiscard]] double condenses_at(const At& at) const;

  /// Temperatures at which a record takes over or a range ends, K.
  [[nodiscard]] std::vector<double> edges() const;

  /// Relative variance of the content at each pressure from every doubt but the instruments'.
  [[nodiscard]] std::array<double, 3> other_variance(Temperature t,
                                                     const std::array<double, 3>& pascal) const;

 private:
  Case problem_;
  Medium composition_;  // the same without a convention
  Shares shares_;
  Shares pure_;
  Liquid liquid_;
  std::size_t gas_;
  ContentMeasure measure_;
  double per_molality_ = 0;  // SI units of the measure per mol/kg
};

}  // namespace capsigh
