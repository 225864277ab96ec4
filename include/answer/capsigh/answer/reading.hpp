// Content from a reading of gauge and thermometer, with its doubt.
//
// Reading + error + offset → temperature and absolute pressure; air in the package and the dead
// volume of the piercer taken off (balance/package_reading.hpp); then the liquid's content by the
// recipe's basis, as `solve` has it at that temperature and pressure. The content is that of the
// liquid in the closed package, before it was pierced, at the temperature read.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "capsigh/answer/bind.hpp"
#include "capsigh/answer/doubt.hpp"
#include "capsigh/balance/closed_container.hpp"
#include "capsigh/balance/package_reading.hpp"
#include "capsigh/quality/verdict.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh {

/// A recipe bound for readings: the contact holds a stand-in temperature and pressure (exact), in
/// whose place every reading puts its own.
struct ReadingBinding {
  Binding binding;
  std::size_t gas = 0;  ///< the one judged: the target's, else CO2
  ContentMeasure measure = ContentMeasure::volumes;
  const Unit* unit = nullptr;    ///< of contents, as the recipe writes its target
  std::string wish;              ///< the target in the recipe's words; empty: nothing is judged
  std::optional<double> target;  ///< in SI units of the measure; a limit has none
  Interval accepted;             ///< tolerance or limit, SI units of the measure
  JudgingRule rule;
};

/// Binds for readings or a card. `with_air`: readings bring air volumes, so that the medium has to
/// know air. Without a value the findings say why; they are all the faults that could be seen.
Outcome<ReadingBinding> bind_readings(const Recipe& recipe, const Library& library,
                                      bool with_air = false);

struct GaugeReading {
  Temperature temperature;          ///< as the thermometer shows it
  GaugePressure pressure;           ///< as the gauge shows it
  std::optional<Volume> air;        ///< in the package, at ambient pressure; needs a container
  std::optional<Pressure> ambient;  ///< where it was measured with the reading
};

/// Temperature and pressure at which the liquid's content is what the package held.
struct CorrectedReading {
  Temperature temperature;
  Pressure pressure{};  ///< absolute, without air, before piercing
};

struct ReadContent {
  double value = 0;                ///< SI units of the measure
  double u = 0;                    ///< standard uncertainty (JCGM 100, first order)
  std::vector<BudgetLine> budget;  ///< largest share first
};

/// Content, pressure and doubt of readings of one case at the current z of its doubts. Holds a
/// reference to the case; cheap to make once the case is bound. Refusals: those of the laws.
class ReadingModel {
 public:
  ReadingModel(const Case& c, std::size_t gas, ContentMeasure measure);

  [[nodiscard]] OrRefusal<CorrectedReading> corrected(const GaugeReading& reading) const;
  /// SI units of the measure.
  [[nodiscard]] OrRefusal<double> content(const GaugeReading& reading) const;
  /// The gauge reading at a thermometer reading and a content (SI units of the measure), without
  /// air in the package.
  [[nodiscard]] OrRefusal<GaugePressure> pressure(Temperature shown, double content) const;
  /// The package at a temperature, stretched by a total pressure; needs a container in the case.
  [[nodiscard]] PackageAt package(const AtTemperature& at, Pressure read) const;

 private:
  [[nodiscard]] Pressure ambient() const;
  [[nodiscard]] Volume dead() const;
  [[nodiscard]] OrRefusal<Pressure> pierced(const AtTemperature& at, Pressure closed) const;
  [[nodiscard]] Amount brought(Temperature t, Pressure ambient) const;
  [[nodiscard]] Pressure air_pressure(const PackageAt& package, Volume air, Pressure ambient) const;

  const Case& c_;
  Liquid liquid_;
  Shares shares_;
  std::size_t gas_;
  double per_molality_ = 0;
};

/// Content of a reading with its doubt and budget: every doubt of the case moved by ± 1.
OrRefusal<ReadContent> read_with_doubt(const Case& c, const ReadingBinding& binding,
                                       const GaugeReading& reading);

}  // namespace capsigh
