#include "deciding.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <boost/math/distributions/normal.hpp>
#include <cmath>

namespace capsigh::readings_detail {
namespace {

// Nobody sells an instrument ten times as good for the same place.
constexpr double kAttainable = 0.1;

// The unit of a gauge column without what says that it is one: "bar gauge" is "bar", "psig" "psi".
std::string plain_unit(const std::string& unit) {
  std::string word = unit.substr(0, unit.find(' '));
  const Unit* known = find_unit(word, Dimension::pressure);
  if (known != nullptr && known->reference != Reference::none) word.pop_back();
  return word;
}

double root(double square) { return std::sqrt(std::max(square, 0.0)); }

}  // namespace

DecidingInstrument::DecidingInstrument(const ReadingPlan& plan, const Columns& columns)
    : plan_(plan),
      z_(plan.rule.guarded ? quantile(boost::math::normal(), 1.0 - plan.rule.risk) : 1.0) {
  if (!columns.pressure || !columns.temperature) return;
  gauge_unit_ = plain_unit(columns.pressure->unit);
  gauge_factor_ = columns.pressure->factor;
  thermometer_factor_ = columns.temperature->factor;
  thermometer_unit_ = thermometer_factor_ == 1 ? "K" : columns.temperature->unit;
}

// Two significant digits, never more than the value.
const std::string& DecidingInstrument::say(Which which, double limit_of_error) {
  const bool gauge = which == Which::gauge;
  const double value = limit_of_error / (gauge ? gauge_factor_ : thermometer_factor_);
  const double exponent = std::floor(std::log10(value)) - 1.0;
  const double digit = std::pow(10.0, exponent);
  const double mantissa = std::floor(value / digit * (1 + 1e-12));
  constexpr unsigned exponents = 64;
  constexpr unsigned mantissas = 128;
  const auto key = (static_cast<unsigned>(which) * exponents +
                    static_cast<unsigned>(std::clamp(exponent + 32.0, 0.0, 63.0))) *
                       mantissas +
                   static_cast<unsigned>(mantissa);
  auto& text = said_[key];
  if (text.empty()) {
    text = fmt::format("{} ± {} {}", gauge ? "gauge" : "thermometer",
                       significant(mantissa * digit, 2), gauge ? gauge_unit_ : thermometer_unit_);
  }
  return text;
}

const std::string& DecidingInstrument::of(double kelvin, double pascal, double content, double u) {
  static const std::string both = "gauge and thermometer together";
  static const std::string none = "no instrument: too near the limit";
  const auto s = plan_.kernel->sensitivity(kelvin, pascal);
  const Interval& limits = plan_.limits;
  const double wanted =
      std::min(std::abs(content - limits.low), std::abs(content - limits.high)) / z_;
  const double by_gauge = content * std::abs(s.by_pressure) * plan_.doubt.gauge.value();
  const double by_thermometer =
      content * std::abs(s.by_temperature) * plan_.doubt.temperature.value();
  const double others = u * u - by_gauge * by_gauge - by_thermometer * by_thermometer;
  const double room = wanted * wanted - others;
  // Of the two, the one that has to improve less.
  const double gauge = by_gauge > 0 ? root(room - by_thermometer * by_thermometer) / by_gauge : 0;
  const double thermometer =
      by_thermometer > 0 ? root(room - by_gauge * by_gauge) / by_thermometer : 0;
  // A limit of error is rectangular: a = u √3.
  const double limit = std::sqrt(3.0);
  if (gauge >= std::max(thermometer, kAttainable)) {
    return say(Which::gauge, limit * plan_.doubt.gauge.value() * gauge);
  }
  if (thermometer >= kAttainable) {
    return say(Which::thermometer, limit * plan_.doubt.temperature.value() * thermometer);
  }
  return root(room) >= kAttainable * std::hypot(by_gauge, by_thermometer) ? both : none;
}

}  // namespace capsigh::readings_detail
