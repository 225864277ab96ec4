#include "capsigh/answer/doubt.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

constexpr std::string_view kFarSearch = "container.safe_temperature";

Finding far_search(std::string_view figure) {
  Finding f;
  f.severity = Severity::caution;
  f.code = "found-out-of-range";
  f.message = fmt::format(
      "{} lies where formulas leave their range: it is a hint, with more doubt than is shown",
      figure);
  return f;
}

std::string quantity_text(double si, std::string_view unit, Dimension dimension) {
  return fmt::format("{} {}", significant(in_unit(si, *find_unit(unit, dimension)), 4), unit);
}

// The conditions a law was used at, for a message.
std::string conditions_text(const Conditions& c, const ValidityBox& box) {
  std::string text;
  if (c.temperature && box.temperature.bounded()) {
    text += quantity_text(c.temperature->kelvin(), "°C", Dimension::temperature);
  }
  if (c.pressure && box.pressure.bounded()) {
    if (!text.empty()) text += " and ";
    text += quantity_text(c.pressure->value(), "bar", Dimension::pressure) + " abs";
  }
  return text;
}

// A range in one unit a kind, for a message.
std::string range_in_words(const Record& record) {
  const auto interval = [](const Interval& i, std::string_view unit, Dimension dimension) {
    const auto& in = *find_unit(unit, dimension);
    return fmt::format("{} to {}", significant(in_unit(i.low, in), 4),
                       quantity_text(i.high, unit, dimension));
  };
  std::string text;
  for (const auto& box : record.range) {
    if (!text.empty()) text += ", or ";
    if (box.temperature.bounded()) {
      text += interval(box.temperature, "°C", Dimension::temperature);
    }
    if (!box.pressure.bounded()) continue;
    if (box.temperature.bounded()) text += " and ";
    text += interval(box.pressure, "bar", Dimension::pressure) + " abs";
  }
  return text;
}

void widen(Case& c, const Record* record, double factor) {
  each_record_doubt(c, [&](RecordDoubt& doubt) {
    if (doubt.record == record) doubt.widening = factor;
  });
}

}  // namespace

Findings judge_ranges(Case& c, const Trace& trace, double widening_per_width) {
  struct Worst {
    double widths = 0;
    Conditions conditions;
  };
  std::map<const Record*, Worst> worst;
  std::string_view beyond;
  for (const auto& chain : trace.chains) {
    // What is searched for far away from every other figure must not widen theirs.
    const bool far = chain.figure == kFarSearch;
    for (const auto& step : chain.steps) {
      const Record* judged = step.record != nullptr ? step.record : step.definition;
      if (judged == nullptr) continue;
      const double widths = widths_outside(judged->range, step.conditions);
      if (widths <= 0) continue;
      if (far) {
        beyond = chain.figure;
        continue;
      }
      auto& entry = worst[judged];
      if (widths > entry.widths) entry = {widths, step.conditions};
    }
  }
  Findings cautions;
  for (const auto& [record, entry] : worst) {
    const bool definition = record->uncertainty.kind == UncertaintyKind::exact;
    const double factor = 1.0 + widening_per_width * entry.widths;
    if (!definition) widen(c, record, factor);
    const auto& box = nearest_box(record->range, entry.conditions);
    Finding f;
    f.severity = Severity::caution;
    f.code = "out-of-range";
    const std::string at = conditions_text(entry.conditions, box);
    f.message =
        definition ? fmt::format(
                         "{} is read at {} (CO2 and vapour), outside its range of {}; continued "
                         "from the edge by composition",
                         record->key, at, range_in_words(*record))
                   : fmt::format(
                         "{} is used at {}, outside its range of {}; extrapolated, its uncertainty "
                         "taken {} times",
                         record->key, at, range_in_words(*record), significant(factor, 3));
    cautions.push_back(std::move(f));
  }
  std::sort(cautions.begin(), cautions.end(),
            [](const Finding& a, const Finding& b) { return a.message < b.message; });
  if (!beyond.empty()) cautions.push_back(far_search(beyond));
  return cautions;
}

}  // namespace capsigh
