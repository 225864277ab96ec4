// Which instrument would decide an undecided reading.
#pragma once

#include <string>
#include <unordered_map>

#include "capsigh/readings/plan.hpp"

namespace capsigh::readings_detail {

// In words: "gauge ± 0.012 bar", the limit of error with which the same content would be inside or
// outside beyond doubt. Keeps what it has said: two digits come again and again.
class DecidingInstrument {
 public:
  DecidingInstrument(const ReadingPlan& plan, const Columns& columns);

  // Content and its standard uncertainty u in SI units of the measure.
  const std::string& of(double kelvin, double pascal, double content, double u);

 private:
  enum class Which : unsigned { gauge, thermometer };
  const std::string& say(Which which, double limit_of_error);

  const ReadingPlan& plan_;
  double z_;  // standard uncertainties from a limit at which the risk is met
  std::string gauge_unit_;
  std::string thermometer_unit_;
  double gauge_factor_ = 1;
  double thermometer_factor_ = 1;
  std::unordered_map<unsigned, std::string> said_;
};

}  // namespace capsigh::readings_detail
