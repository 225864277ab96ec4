#include "capsigh/answer/doubt.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>

#include "capsigh/answer/solve.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

// Every slot of an answer; one that was not asked is NaN, so that slots asked on one side of a
// doubt only are seen.
std::vector<double> flatten(const Answer& answer) {
  std::vector<double> values;
  each_figure(answer, [&](const FigurePath&, const auto& figure, const JsonUnit&) {
    values.push_back(figure.asked ? si_value(figure.value)
                                  : std::numeric_limits<double>::quiet_NaN());
  });
  return values;
}

// Solves with one doubt moved to z.
std::optional<std::vector<double>> moved(Case& c, const Doubt& doubt, double z) {
  *doubt.z = z;
  const auto result = solve(c);
  *doubt.z = 0;
  if (refused(result) != nullptr) return std::nullopt;
  return flatten(std::get<Answer>(result));
}

// What one doubt does to every figure: what one standard uncertainty moves it by, and the variance
// that its curvature adds (second order; infinite where only one side has an answer).
struct Sensitivity {
  std::vector<double> change;
  std::vector<double> curved;
};

// Of ½ f''(z² − 1): ¼ f''² Var z², where Var z² is 2 for a normal z and 4/5 for a rectangular one.
double variance_of_curvature(double second_difference, Shape shape) {
  const double variance_of_square = shape == Shape::rectangular ? 0.8 : 2.0;
  return 0.25 * second_difference * second_difference * variance_of_square;
}

// Half the way from z = −1 to +1; one-sided where only one side has an answer. nullopt: no side
// has one.
std::optional<Sensitivity> sensitivity(Case& c, const Doubt& doubt,
                                       const std::vector<double>& at_best) {
  const auto up = moved(c, doubt, 1.0);
  const auto down = moved(c, doubt, -1.0);
  if (!up && !down) return std::nullopt;
  // A root is found to about 1e-15; smaller differences than this are its noise, not a doubt.
  constexpr double noise = 1e-12;
  const auto side = [&](const std::optional<std::vector<double>>& values, std::size_t i) {
    return values && std::isfinite((*values)[i]);
  };
  Sensitivity s{std::vector<double>(at_best.size(), 0.0), std::vector<double>(at_best.size(), 0.0)};
  for (std::size_t i = 0; i < at_best.size(); ++i) {
    const double high = side(up, i) ? (*up)[i] : at_best[i];
    const double low = side(down, i) ? (*down)[i] : at_best[i];
    const double sides = (side(up, i) ? 1 : 0) + (side(down, i) ? 1 : 0);
    if (sides > 0) s.change[i] = (high - low) / sides;
    if (!(std::abs(s.change[i]) > noise * std::abs(at_best[i]))) s.change[i] = 0;
    const double second = high + low - 2 * at_best[i];
    if (sides == 1) s.curved[i] = std::numeric_limits<double>::infinity();
    if (sides == 2 && std::abs(second) > noise * std::abs(at_best[i])) {
      s.curved[i] = variance_of_curvature(second, doubt.shape);
    }
  }
  return s;
}

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

Finding too_wide(const Doubt& doubt) {
  Finding f;
  f.code = "doubt-too-wide";
  f.message =
      fmt::format("one standard uncertainty of {} to either side leads to no answer", doubt.name);
  f.expected = "a ± within which an answer exists";
  return f;
}

bool main_figure(const std::string& path) {
  if (path.find(".course.") != std::string::npos) return false;
  return path.ends_with(".safe_temperature") || path.ends_with(".largest_fill") ||
         path.ends_with(".until_limit") || path.ends_with(".oxygen.total") ||
         path.ends_with(".allowed_air") || path.ends_with(".volumes") ||
         path.ends_with(".mass_concentration") || path.ends_with(".pressure_gauge") ||
         path == "condition.temperature" || path.starts_with("saturation.") ||
         path.starts_with("blend.") || path.ends_with("_loss");
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

void widen(Medium& medium, const Record* record, double factor) {
  each_record_doubt(medium, [&](RecordDoubt& doubt) {
    if (doubt.record == record) doubt.widening = factor;
  });
}

}  // namespace

Propagation propagate(Case& c, Answer& answer) {
  const auto doubts = each_doubt(c);
  const auto at_best = flatten(answer);
  std::vector<std::vector<double>> changes;
  changes.reserve(doubts.size());
  std::vector<double> curved(at_best.size(), 0.0);
  Propagation result;
  for (const auto& doubt : doubts) {
    auto moved_by = sensitivity(c, doubt, at_best);
    if (!moved_by) {
      result.findings.push_back(too_wide(doubt));
      moved_by = {std::vector<double>(at_best.size(), 0.0),
                  std::vector<double>(at_best.size(), 0.0)};
    }
    for (std::size_t i = 0; i < curved.size(); ++i) curved[i] += moved_by->curved[i];
    changes.push_back(std::move(moved_by->change));
  }
  auto& budget = result.budget;
  std::size_t slot = 0;
  each_figure(answer, [&](const FigurePath& path, auto& figure, const JsonUnit& unit) {
    double variance = 0;
    for (const auto& change : changes) variance += change[slot] * change[slot];
    figure.u = from_si<std::decay_t<decltype(figure.u)>>(std::sqrt(variance));
    // Two per cent of the variance are one of u.
    constexpr double bends = 0.02;
    figure.nonlinear = figure.asked && curved[slot] > bends * variance;
    const std::string of = path.text();
    if (figure.asked && variance > 0 && main_figure(of)) {
      const auto first = static_cast<std::ptrdiff_t>(budget.size());
      for (std::size_t d = 0; d < doubts.size(); ++d) {
        const double share = changes[d][slot] * changes[d][slot] / variance;
        constexpr double negligible = 1e-6;
        if (share < negligible) continue;
        budget.push_back({of, doubts[d].name, doubts[d].u, doubts[d].unit, share,
                          std::abs(changes[d][slot]) / unit.factor, doubts[d].is_record});
      }
      std::sort(budget.begin() + first, budget.end(),
                [](const auto& a, const auto& b) { return a.share > b.share; });
    }
    ++slot;
  });
  return result;
}

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
    if (!definition) widen(c.medium, record, factor);
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
