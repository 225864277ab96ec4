#include <fmt/format.h>

#include <algorithm>

#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/render.hpp"
#include "text_life.hpp"
#include "text_package.hpp"
#include "text_page.hpp"

namespace capsigh {
namespace {

using render_detail::padded;
using render_detail::printable;
using render_detail::TextPage;
using render_detail::wrapped;

class TextReport {
 public:
  TextReport(const Report& report, const TextOptions& options)
      : r_(report), a_(report.answer), options_(options), page_(options.units) {}

  std::string write() {
    heading();
    asked();
    answer();
    condition();
    render_detail::package_states(page_, a_.package);
    render_detail::package_shelf(page_, a_.package);
    opening();
    render_detail::conditioning_section(page_, r_);
    render_detail::supply_section(page_, r_);
    page_.doubts(r_);
    page_.drawn(r_);
    if (options_.with_trace) trace();
    notes();
    sources();
    audit();
    return std::move(page_.out);
  }

 private:
  void heading() {
    page_.out += r_.title.empty() ? "Untitled recipe\n" : printable(r_.title) + "\n";
    for (const auto& [key, text] : r_.about)
      page_.out += wrapped("  " + printable(key) + ": ", printable(text));
    page_.out +=
        wrapped("  ", fmt::format("{} under {}. Figures are value ± U, expanded uncertainty, "
                                  "k = 2. A content is per litre of degassed liquid at 20 °C; "
                                  "vol is real gas at 0 °C and 1 atm.",
                                  r_.liquid, fmt::format("{}", fmt::join(r_.gases, ", "))));
  }

  // What was asked, in the recipe's own words.
  void asked() {
    page_.section("Asked");
    for (const auto& [key, text] : r_.audit.inputs) {
      if (key != "title" && !key.starts_with("about."))
        page_.out += wrapped("  " + padded(printable(key), 38), printable(text));
    }
  }

  // The answer first; how it came about stands below.
  void answer() {
    page_.section("Answer");
    for (const auto& b : a_.blend) {
      page_.line(fmt::format("{} in the gas", b.gas),
                 page_.in_units(b.share, Dimension::fraction, "%"));
    }
    if (r_.solved_for_temperature) page_.line("Temperature needed", page_.celsius(a_.temperature));
    render_detail::life_answers(page_, r_);
    const bool conditioned = a_.conditioning.dose.asked;
    if (r_.solved_for_pressure && !conditioned)
      page_.pressures("Pressure needed", a_.pressure_gauge, a_.pressure_absolute);
    if (conditioned || (!r_.solved_for_temperature && !r_.solved_for_pressure)) {
      for (const auto& g : a_.gases) page_.gas(g);
    }
    if (!r_.solved_for_pressure && a_.blend.empty()) saturation();
    render_detail::package_answer(page_, r_);
    if (a_.opening_pressure.asked && differs_from_container(a_.opening_temperature)) {
      page_.line("  when opened",
                 page_.in_units(a_.opening_pressure, Dimension::pressure, "bar", " gauge"),
                 "at " + page_.celsius(a_.opening_temperature));
      render_detail::rating(page_, a_.opening_margin, a_.opening_temperature);
    }
    for (const auto& j : r_.judged) page_.judged(j);
    if (a_.wine_gauge.asked) {
      page_.line("Gauge at 20 °C, for the class",
                 page_.in_units(a_.wine_gauge, Dimension::pressure, "bar", " gauge"),
                 r_.wine_class);
    }
    opinions();
  }

  [[nodiscard]] bool differs_from_container(const Figure<Temperature>& t) const {
    const auto& at = a_.package.at;
    return at.empty() || !(at.front().temperature.value == t.value);
  }

  void condition() {
    page_.section(a_.conditioning.dose.asked ? "The conditioned liquid by itself, at saturation"
                                             : "Where liquid and gas meet");
    page_.line("Temperature", page_.celsius(a_.temperature));
    page_.pressures("Pressure", a_.pressure_gauge, a_.pressure_absolute);
    page_.line("Ambient pressure", page_.in_units(a_.ambient, Dimension::pressure, "hPa", " abs"));
    page_.line("Vapour of water", page_.in_units(a_.vapour, Dimension::pressure, "kPa"));
    if (a_.ethanol.asked) {
      page_.line("Vapour of ethanol", page_.in_units(a_.ethanol, Dimension::pressure, "kPa"));
    }
    for (const auto& g : a_.gases) {
      page_.line(fmt::format("Partial pressure of {}", g.gas),
                 page_.in_units(g.partial_pressure, Dimension::pressure, "bar"));
    }
    for (const auto& g : a_.gases) page_.gas(g);
  }

  // What the figures in the report are, and what they would be by another reading.
  void opinions() {
    if (r_.relation == "composition" && r_.second_opinion.empty()) return;
    page_.line("CO2 is read here", basis_text(r_.relation));
    for (const auto& o : r_.second_opinion) opinion(o);
  }

  void opinion(const SecondOpinion& o) {
    const auto [dimension, own] = TextPage::shown_as(o.unit);
    const bool pressure = dimension == Dimension::pressure;
    const double si = o.value * o.unit.factor + o.unit.offset;
    std::string value;
    for (const auto* u : page_.units(dimension, own)) {
      if (!value.empty()) value += " = ";
      value += fmt::format("{} {}{}", significant(in_unit(si, *u), 4), u->text,
                           pressure ? " gauge" : "");
    }
    if (!o.quantity.starts_with("dissolved.")) value += " needed";
    const std::string basis =
        o.relation == "water" ? "as tested, as water" : basis_text(o.relation);
    page_.line("  " + basis, value, fmt::format("{:+.1f} %", o.difference));
  }

  static std::string basis_text(const std::string& relation) {
    if (relation == "composition") return "true, by composition";
    if (relation == "water") return "as tested, as water would hold";
    std::string name = relation;
    std::transform(name.begin(), name.end(), name.begin(),
                   [](unsigned char c) { return static_cast<char>(std::toupper(c)); });
    return "as tested, by " + name;
  }

  void saturation() {
    for (std::size_t i = 0; i < a_.saturation.size(); ++i) {
      const auto& s = a_.saturation[i];
      const std::string content = i < r_.targets.size() ? r_.targets[i].second : "";
      const std::string label = fmt::format("{} of {} needs", content, s.gas);
      if (s.unreachable) page_.line(label, "nothing brings it, see cautions");
      if (s.pressure_gauge.asked) page_.pressures(label, s.pressure_gauge, s.pressure_absolute);
      if (s.temperature.asked && !r_.solved_for_temperature)
        page_.line(label, page_.celsius(s.temperature));
    }
  }

  void opening() {
    if (a_.opening.empty()) return;
    const auto at = page_.celsius(a_.opening_temperature);
    page_.section(fmt::format("Lost on opening at {}, each on top of the one before", at));
    for (const auto& loss : a_.opening) {
      const bool co2 = loss.gas.empty();
      const std::string_view in = co2 ? "g" : "mg";
      const std::string name = co2 ? "CO2" : std::string(loss.gas);
      if (!a_.package.at.empty()) loss_line(name + " from the headspace", loss.headspace_loss, in);
      loss_line(name + " as fizz", loss.fizz_loss, in);
      loss_line(name + " going flat in air", loss.flat_loss, in);
    }
    render_detail::opened_rows(page_, r_);
  }

  // A gas other than CO2 that has nothing to lose needs no line.
  void loss_line(const std::string& label, const Figure<Mass>& loss, std::string_view in) {
    const bool silent = !label.starts_with("CO2") && loss.value.value() == 0;
    if (loss.asked && !silent) page_.line(label, page_.in_units(loss, Dimension::mass, in));
  }

  void trace() {
    for (const auto& chain : r_.trace.chains) {
      page_.section(fmt::format("How {} came about", chain.figure));
      for (const auto& step : chain.steps) trace_step(step);
    }
  }

  void trace_step(const TraceStep& step) {
    constexpr int digits = 6;
    page_.out +=
        wrapped("  ", fmt::format("{}: {} = {} {}", step.law, step.result.symbol,
                                  significant(step.result.value, digits), step.result.unit));
    if (!step.inputs.empty()) {
      std::string inputs;
      for (const auto& in : step.inputs) {
        if (!inputs.empty()) inputs += ", ";
        inputs += fmt::format("{} = {} {}", in.symbol, significant(in.value, digits), in.unit);
      }
      page_.out += wrapped("      from ", inputs);
    }
    if (step.inputs.size() > 1 || step.record != nullptr) {
      page_.out += wrapped("      by   ", step.equation);
    }
    if (step.record != nullptr) {
      page_.out += wrapped("      rec  ", fmt::format("{}, u {} [{}]", step.record->key,
                                                      step.record->uncertainty.printed,
                                                      source_number(step.record->source)));
    }
  }

  [[nodiscard]] std::size_t source_number(std::string_view key) const {
    const auto it = std::find_if(r_.sources.begin(), r_.sources.end(),
                                 [&](const CitedSource& s) { return s.key == key; });
    return static_cast<std::size_t>(it - r_.sources.begin()) + 1;
  }

  void notes() {
    if (!r_.cautions.empty()) page_.section("Cautions");
    for (const auto& c : r_.cautions) page_.out += wrapped("  ! ", c.message);
    if (!r_.assumptions.empty() || !r_.doubt_not_stated.empty()) page_.section("Assumed");
    for (const auto& a : r_.assumptions) page_.out += wrapped("  - ", a.message);
    if (!r_.doubt_not_stated.empty()) {
      page_.out += wrapped("  - ", fmt::format("doubt not stated, taken as exact: {}",
                                               fmt::join(r_.doubt_not_stated, ", ")));
    }
  }

  void sources() {
    page_.section("Sources");
    for (std::size_t i = 0; i < r_.sources.size(); ++i) {
      page_.out += wrapped(fmt::format("  [{}] ", i + 1), r_.sources[i].citation);
    }
  }

  void audit() {
    page_.section("Audit");
    page_.out += fmt::format("  {} {}\n", r_.audit.program, r_.audit.version);
    page_.out += fmt::format("  recipe    {}\n  constants {}\n", r_.audit.recipe_digest,
                             r_.audit.constants_digest);
    page_.out += "  inputs as understood: under Asked\n";
  }

  const Report& r_;
  const Answer& a_;
  const TextOptions& options_;
  TextPage page_;
};

}  // namespace

std::string text_report(const Report& report, const TextOptions& options) {
  return TextReport(report, options).write();
}

}  // namespace capsigh
