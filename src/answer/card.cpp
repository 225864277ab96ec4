#include "capsigh/answer/card.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "capsigh/answer/solve.hpp"
#include "records.hpp"

namespace capsigh {
namespace {

using answer_detail::constant;

Finding problem(std::string code, std::string message, std::string example, Place place) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.example = std::move(example);
  f.place = std::move(place);
  return f;
}

// Decimals that show every multiple of a step.
int decimals_of(double step) {
  constexpr int most = 6;
  constexpr double whole = 1e-6;
  double scaled = step;
  for (int d = 0; d < most; ++d, scaled *= 10) {
    if (std::abs(scaled - std::round(scaled)) < whole * scaled) return d;
  }
  return most;
}

class CardMaker {
 public:
  CardMaker(const Recipe& recipe, const ReadingBinding& binding, const Library& library,
            const CardOptions& options)
      : recipe_(recipe),
        b_(binding),
        c_(binding.binding.problem),
        widening_(library.at("assumed.widening").values[0].value) {
    card_.rule = b_.rule;
    choose_units(library, options);
  }

  Outcome<Card> make() {
    const auto& from = *recipe_.card->from->value;
    const double step = recipe_.card->step->value->value();
    const double span = (*recipe_.card->to->value - from).value();
    constexpr double rounding = 1e-9;
    const auto last = static_cast<std::size_t>(std::floor(span / step + rounding));
    for (std::size_t i = 0; i <= last; ++i) {
      const auto t = from + from_si<TemperatureDifference>(step * static_cast<double>(i));
      card_.rows.push_back(row(t));
    }
    const bool any = std::any_of(card_.rows.begin(), card_.rows.end(),
                                 [](const CardRow& r) { return !r.refused; });
    if (!any) {
      Finding f = explain(*refusal_);
      f.place = recipe_.card->from->source.place;
      return {{}, {f}};
    }
    card_.complete = std::all_of(card_.rows.begin(), card_.rows.end(), [](const CardRow& r) {
      return !r.refused && !r.empty && !r.between_marks;
    });
    return {std::move(card_), {}};
  }

 private:
  void choose_units(const Library& library, const CardOptions& options) {
    const auto* given =
        recipe_.gauge && recipe_.gauge->graduation ? &*recipe_.gauge->graduation : nullptr;
    const Unit* own = given == nullptr ? find_unit("bar", Dimension::pressure)
                                       : written_unit(given->source.text, Dimension::pressure);
    card_.pressure = options.pressure != nullptr ? options.pressure : own;
    const Pressure graduation =
        given == nullptr ? constant<Pressure>(library, "assumed.graduation") : *given->value;
    card_.step = difference_in_unit(graduation.value(), *card_.pressure);
    // Marks of the gauge have odd values in another unit: the next finer round step there.
    if (card_.pressure != own) card_.step = std::pow(10.0, std::floor(std::log10(card_.step)));
    card_.decimals = decimals_of(card_.step);
    if (given == nullptr) {
      Finding f;
      f.severity = Severity::assumption;
      f.code = "graduation-assumed";
      f.message = "no gauge.graduation: limits are rounded inward to 0.01 bar";
      card_.assumptions.push_back(std::move(f));
    }
    card_.temperature = options.temperature != nullptr
                            ? options.temperature
                            : written_unit(recipe_.card->from->source.text, Dimension::temperature);
    const double step = difference_in_unit(recipe_.card->step->value->value(), *card_.temperature);
    const double first = in_unit(recipe_.card->from->value->kelvin(), *card_.temperature);
    constexpr int most = 2;
    card_.temperature_decimals =
        std::min(most, std::max(decimals_of(step), decimals_of(std::abs(first))));
  }

  // The laws at a reading: cautions about their ranges, and records widened by them.
  Case at_reading(Temperature shown, GaugePressure pressure) {
    Case point = c_;
    point.targets.clear();
    point.container.reset();
    const auto corrected =
        ReadingModel(c_, b_.gas, b_.measure).corrected({shown, pressure, {}, {}});
    if (refused(corrected) != nullptr) return c_;
    const auto& r = std::get<CorrectedReading>(corrected);
    point.contact.temperature = exactly(r.temperature);
    point.contact.gauge_pressure.reset();
    point.contact.absolute_pressure = exactly(r.pressure);
    Trace trace;
    if (const auto solved = solve(point, &trace); refused(solved) != nullptr) return c_;
    for (auto& caution : judge_ranges(point, trace, widening_)) note_once(std::move(caution));
    Case widened = c_;
    widened.medium = point.medium;
    return widened;
  }

  // One caution a record: the first row that leaves its range names it.
  void note_once(Finding caution) {
    const auto subject = [](const Finding& f) { return f.message.substr(0, f.message.find(' ')); };
    const bool known = std::any_of(
        card_.cautions.begin(), card_.cautions.end(),
        [&](const Finding& f) { return f.code == caution.code && subject(f) == subject(caution); });
    if (!known) card_.cautions.push_back(std::move(caution));
  }

  CardRow row(Temperature shown) {
    CardRow r;
    r.shown = in_unit(shown.kelvin(), *card_.temperature);
    const double start = b_.target.value_or(std::isfinite(b_.accepted.low)    ? b_.accepted.low
                                            : std::isfinite(b_.accepted.high) ? b_.accepted.high
                                                                              : 0.0);
    const ReadingModel model(c_, b_.gas, b_.measure);
    const auto middle = model.pressure(shown, start);
    if (const auto* no = refused(middle)) return refuse(r, *no);
    const Case here = at_reading(shown, std::get<GaugePressure>(middle));
    const auto at_start =
        read_with_doubt(here, b_, {shown, std::get<GaugePressure>(middle), {}, {}});
    if (const auto* no = refused(at_start)) return refuse(r, *no);
    r.u = std::get<ReadContent>(at_start).u;
    card_.doubt_stated = card_.doubt_stated || r.u > 0;
    const auto zone = acceptance_zone(r.u, b_.accepted, b_.rule);
    if (zone.empty) {
      r.empty = true;
      if (card_.advice.by == Advice::By::nothing) {
        card_.advice = advise(std::get<ReadContent>(at_start).budget, zone.u_to_open / r.u);
      }
      return r;
    }
    for (const bool upper : {false, true}) {
      if (!std::isfinite(upper ? b_.accepted.high : b_.accepted.low)) continue;
      const auto limit = edge(here, shown, upper ? zone.values.high : zone.values.low, upper, r);
      if (r.empty || r.refused) return r;
      const auto p = model.pressure(shown, limit);
      if (const auto* no = refused(p)) return refuse(r, *no);
      const double value = in_unit(si_value(std::get<GaugePressure>(p)), *card_.pressure);
      (upper ? r.exact_high : r.exact_low) = value;
      (upper ? r.highest : r.lowest) = inward(value, upper);
    }
    if (b_.target) {
      const double value = in_unit(si_value(std::get<GaugePressure>(middle)), *card_.pressure);
      r.target = std::round(value / card_.step) * card_.step;
    }
    r.between_marks = r.lowest && r.highest && *r.lowest > *r.highest;
    return r;
  }

  // The edge of the acceptance zone at the doubt that holds there.
  double edge(const Case& here, Temperature shown, double first, bool upper, CardRow& r) {
    double limit = first;
    if (!b_.rule.guarded) return limit;
    const ReadingModel model(c_, b_.gas, b_.measure);
    // The doubt changes by a few per cent of itself over the zone: three rounds leave 1e-5 of the
    // guard band, far below a mark of any gauge.
    constexpr int rounds = 3;
    for (int i = 0; i < rounds; ++i) {
      const auto p = model.pressure(shown, limit);
      if (const auto* no = refused(p)) {
        refuse(r, *no);
        return limit;
      }
      const auto read = read_with_doubt(here, b_, {shown, std::get<GaugePressure>(p), {}, {}});
      if (const auto* no = refused(read)) {
        refuse(r, *no);
        return limit;
      }
      const auto zone = acceptance_zone(std::get<ReadContent>(read).u, b_.accepted, b_.rule);
      if (zone.empty) {
        r.empty = true;
        return limit;
      }
      limit = upper ? zone.values.high : zone.values.low;
    }
    return limit;
  }

  CardRow& refuse(CardRow& r, const Refusal& no) {
    r.refused = no.code;
    if (!refusal_) refusal_ = no;
    return r;
  }

  [[nodiscard]] double inward(double value, bool upper) const {
    // What is a mark already, but for the last bits, stays.
    constexpr double slack = 1e-9;
    const double marks = value / card_.step;
    return (upper ? std::floor(marks + slack) : std::ceil(marks - slack)) * card_.step;
  }

  const Recipe& recipe_;
  const ReadingBinding& b_;
  const Case& c_;
  double widening_;
  std::optional<Refusal> refusal_;
  Card card_;
};

// What the card needs beyond a readable recipe.
Findings lacking(const Recipe& recipe) {
  Findings all;
  const Place whole{recipe.file, 0, 0, 1, ""};
  if (!recipe.card) {
    all.push_back(
        problem("card-missing", "a card needs its temperatures: [card] with from, to, step",
                "[card]\nfrom = \"34 degF\"\nto = \"60 degF\"\nstep = \"1 degF\"", whole));
  }
  const bool judges =
      std::any_of(recipe.target.begin(), recipe.target.end(), [](const GivenTarget& t) {
        return t.is_maximum || t.is_minimum || t.content.amount.plus_minus;
      });
  if (!judges) {
    all.push_back(
        problem("card-without-tolerance", "a card needs a [target] with a tolerance or a limit",
                "[target]\nCO2 = \"3.70 vol ± 0.10 vol\"",
                recipe.target.empty() ? whole : recipe.target[0].content.amount.source.place));
  }
  return all;
}

void describe(const Recipe& recipe, const ReadingBinding& b, Card& card) {
  const auto& binding = b.binding;
  card.title = recipe.title;
  card.about = recipe.about;
  card.liquid = binding.liquid;
  card.relation = relation_name(binding.relation);
  card.gas = binding.problem.medium.gases[b.gas].name;
  card.wish = b.wish;
  card.doubt_not_stated = binding.doubt_not_stated;
  const auto& ambient = binding.problem.ambient;
  card.ambient =
      ambient.altitude ? ambient.atmosphere(ambient.altitude->best) : ambient.stated.best;
  for (const auto& [key, text] : recipe.inputs) {
    if (key.starts_with("gauge.")) card.instruments.emplace_back(key, text);
  }
  for (const auto& note : binding.notes) {
    auto& list = note.severity == Severity::assumption ? card.assumptions : card.cautions;
    list.push_back(note);
  }
}

Findings ranges_as_errors(const Findings& cautions, const Place& place) {
  Findings errors;
  for (const auto& caution : cautions) {
    if (caution.code != "out-of-range") continue;
    errors.push_back(caution);
    errors.back().severity = Severity::error;
    errors.back().place = place;
  }
  return errors;
}

}  // namespace

Outcome<Card> card(const Outcome<Recipe>& recipe, std::string_view recipe_text,
                   const Library& library, const CardOptions& options) {
  Findings findings = recipe.findings;
  if (!recipe) return {{}, findings};
  if (recipe->readable) {
    const auto missing = lacking(*recipe);
    findings.insert(findings.end(), missing.begin(), missing.end());
  }
  const auto binding = bind_readings(*recipe, library);
  findings.insert(findings.end(), binding.findings.begin(), binding.findings.end());
  if (has_error(findings) || !binding) return {{}, findings};
  CardMaker maker(*recipe, *binding, library, options);
  auto made = maker.make();
  if (!made) return made;
  Card& card = *made.value;
  if (options.strict) {
    const auto errors = ranges_as_errors(card.cautions, recipe->card->place);
    if (!errors.empty()) return {{}, errors};
  }
  describe(*recipe, *binding, card);
  card.audit.version = version();
  card.audit.recipe_digest = sha1_digest(recipe_text);
  card.audit.constants_digest = library.digest();
  card.audit.inputs = recipe->inputs;
  return made;
}

}  // namespace capsigh
