#include <fmt/format.h>

#include <algorithm>

#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/render.hpp"
#include "wrap.hpp"

namespace capsigh {
namespace {

using render_detail::padded;
using render_detail::printable;
using render_detail::wrapped;

constexpr std::size_t kLabel = 30;
constexpr double kCoverage = 2;  // U = k u, k = 2 (JCGM 100, 6.2)

const Unit& unit(std::string_view name, Dimension dimension) { return *find_unit(name, dimension); }

// "1.58 ± 0.04 bar gauge"
template <class Q>
std::string shown(const Figure<Q>& figure, const Unit& in, std::string_view suffix = "") {
  const double value = in_unit(si_value(figure.value), in);
  const double expanded = kCoverage * difference_in_unit(si_value(figure.u), in);
  const auto [number, plus_minus] = rounded(value, expanded);
  return fmt::format("{}{}{} {}{}", number, plus_minus.empty() ? "" : " ± ", plus_minus, in.text,
                     suffix);
}

class TextReport {
 public:
  TextReport(const Report& report, const TextOptions& options)
      : r_(report), a_(report.answer), options_(options) {}

  std::string write() {
    heading();
    asked();
    answer();
    condition();
    container();
    opening();
    if (options_.with_trace) trace();
    notes();
    sources();
    audit();
    return std::move(out_);
  }

 private:
  // The units asked for of that dimension, else our own choice.
  [[nodiscard]] std::vector<const Unit*> units(Dimension dimension, std::string_view own) const {
    std::vector<const Unit*> asked;
    for (const auto* u : options_.units) {
      if (u->dimension == dimension) asked.push_back(u);
    }
    if (asked.empty()) asked.push_back(find_unit(own, dimension));
    return asked;
  }

  template <class Q>
  [[nodiscard]] std::string in_units(const Figure<Q>& figure, Dimension dimension,
                                     std::string_view own, std::string_view suffix = "") const {
    std::string text;
    for (const auto* u : units(dimension, own)) {
      if (!text.empty()) text += " = ";
      text += shown(figure, *u, suffix);
    }
    return text;
  }

  [[nodiscard]] std::string celsius(const Figure<Temperature>& t) const {
    return in_units(t, Dimension::temperature, "°C");
  }

  void pressures(std::string_view label, const Figure<GaugePressure>& gauge,
                 const Figure<Pressure>& absolute) {
    line(label, in_units(gauge, Dimension::pressure, "bar", " gauge"),
         in_units(absolute, Dimension::pressure, "bar", " abs"));
  }

  void line(std::string_view label, const std::string& value, const std::string& more = "") {
    constexpr std::size_t page = 80;
    constexpr std::size_t column = 24;
    std::string row = "  " + padded(label, kLabel);
    if (render_detail::columns(label) >= kLabel) row += ' ';
    const std::string both = row + padded(value, column) + "  " + more;
    if (more.empty()) {
      out_ += row + value + "\n";
    } else if (render_detail::columns(both) <= page) {
      out_ += both + "\n";
    } else {
      out_ += row + value + "\n" + std::string(kLabel + 2, ' ') + more + "\n";
    }
  }

  void section(std::string_view name) { out_ += fmt::format("\n{}\n", name); }

  void heading() {
    out_ += r_.title.empty() ? "Untitled recipe\n" : printable(r_.title) + "\n";
    for (const auto& [key, text] : r_.about)
      out_ += wrapped("  " + printable(key) + ": ", printable(text));
    out_ += wrapped("  ", fmt::format("{} under {}. Figures are value ± U, expanded uncertainty, "
                                      "k = 2. A content is per litre of degassed liquid at 20 °C; "
                                      "vol is real gas at 0 °C and 1 atm.",
                                      r_.liquid, fmt::format("{}", fmt::join(r_.gases, ", "))));
  }

  // What was asked, in the recipe's own words.
  void asked() {
    section("Asked");
    for (const auto& [key, text] : r_.audit.inputs) {
      const bool given = key.starts_with("contact.") || key.starts_with("target.") ||
                         key.starts_with("container.") || key.starts_with("opening.") ||
                         key.starts_with("liquid.") || key.starts_with("gas.");
      if (given) out_ += wrapped("  " + padded(printable(key), 38), printable(text));
    }
  }

  // The answer first; how it came about stands below.
  void answer() {
    section("Answer");
    for (const auto& b : a_.blend) {
      line(fmt::format("{} in the gas", b.gas), in_units(b.share, Dimension::fraction, "%"));
    }
    if (r_.solved_for_temperature) line("Temperature needed", celsius(a_.temperature));
    if (r_.solved_for_pressure)
      pressures("Pressure needed", a_.pressure_gauge, a_.pressure_absolute);
    if (!r_.solved_for_temperature && !r_.solved_for_pressure) {
      for (const auto& g : a_.gases) gas(g);
    }
    if (!r_.solved_for_pressure && a_.blend.empty()) saturation();
    for (const auto& c : a_.container) {
      pressures("In the closed package", c.pressure_gauge, c.pressure_absolute);
      rating(c.margin, c.temperature);
    }
    if (a_.opening_pressure.asked && differs_from_container(a_.opening_temperature)) {
      line("  when opened", in_units(a_.opening_pressure, Dimension::pressure, "bar", " gauge"),
           "at " + celsius(a_.opening_temperature));
      rating(a_.opening_margin, a_.opening_temperature);
    }
    for (const auto& j : r_.judged) judged(j);
    opinions();
  }

  [[nodiscard]] bool differs_from_container(const Figure<Temperature>& t) const {
    return a_.container.empty() || !(a_.container.front().temperature.value == t.value);
  }

  // A rating says nothing without the temperature.
  void rating(const Figure<Pressure>& margin, const Figure<Temperature>& at) {
    if (!margin.asked) return;
    const bool above = margin.value.value() < 0;
    line(above ? "  ABOVE ITS RATING, margin" : "  below its rating by",
         in_units(margin, Dimension::pressure, "bar"), "at " + celsius(at));
  }

  void judged(const JudgedTarget& j) {
    const std::string_view verdict = j.verdict == Verdict::inside    ? "inside"
                                     : j.verdict == Verdict::outside ? "OUTSIDE"
                                                                     : "UNDECIDED";
    constexpr double percent = 100;
    line(fmt::format("{} against {}", j.gas, j.wish), std::string(verdict),
         j.doubt_stated ? fmt::format("probability of conformity {:.1f} %", percent * j.probability)
                        : std::string("values compared, no doubt stated"));
  }

  void condition() {
    section("Where liquid and gas meet");
    line("Temperature", celsius(a_.temperature));
    pressures("Pressure", a_.pressure_gauge, a_.pressure_absolute);
    line("Ambient pressure", in_units(a_.ambient, Dimension::pressure, "hPa", " abs"));
    line("Vapour of water", in_units(a_.vapour, Dimension::pressure, "kPa"));
    if (a_.ethanol.asked) {
      line("Vapour of ethanol", in_units(a_.ethanol, Dimension::pressure, "kPa"));
    }
    for (const auto& g : a_.gases) {
      line(fmt::format("Partial pressure of {}", g.gas),
           in_units(g.partial_pressure, Dimension::pressure, "bar"));
    }
    for (const auto& g : a_.gases) gas(g);
  }

  // What the figures in the report are, and what they would be by another reading.
  void opinions() {
    if (r_.relation == "composition" && r_.second_opinion.empty()) return;
    line("CO2 is read here", basis_text(r_.relation));
    for (const auto& o : r_.second_opinion) opinion(o);
  }

  void opinion(const SecondOpinion& o) {
    const bool pressure = o.unit.ucum == json_unit::kilopascal.ucum;
    const double si = o.value * o.unit.factor + o.unit.offset;
    const auto dimension = pressure                                 ? Dimension::pressure
                           : o.unit.ucum == json_unit::celsius.ucum ? Dimension::temperature
                           : o.unit.ucum == json_unit::percent.ucum ? Dimension::fraction
                                                                    : Dimension::gas_volumes;
    const std::string_view own = pressure                              ? "bar"
                                 : dimension == Dimension::temperature ? "°C"
                                 : dimension == Dimension::fraction    ? "%"
                                                                       : "vol";
    std::string value;
    for (const auto* u : units(dimension, own)) {
      if (!value.empty()) value += " = ";
      value += fmt::format("{} {}{}", significant(in_unit(si, *u), 4), u->text,
                           pressure ? " gauge" : "");
    }
    line("  " + basis_text(o.relation), value, fmt::format("{:+.1f} %", o.difference));
  }

  static std::string basis_text(const std::string& relation) {
    if (relation == "composition") return "true, by composition";
    if (relation == "water") return "as tested, as water would hold";
    std::string name = relation;
    std::transform(name.begin(), name.end(), name.begin(),
                   [](unsigned char c) { return static_cast<char>(std::toupper(c)); });
    return "as tested, by " + name;
  }

  // Gases that are there in traces are read in mg/L; volumes would be a row of zeros.
  void gas(const GasFigures& g) {
    constexpr double trace = 0.1;
    const std::string label = fmt::format("Dissolved {}", g.gas);
    if (g.mass_concentration.value.value() < trace) {
      line(label, in_units(g.mass_concentration, Dimension::mass_concentration, "mg/L"));
      return;
    }
    line(label, shown(g.volumes, unit("vol", Dimension::gas_volumes)),
         in_units(g.mass_concentration, Dimension::mass_concentration, "g/L"));
  }

  void saturation() {
    for (std::size_t i = 0; i < a_.saturation.size(); ++i) {
      const auto& s = a_.saturation[i];
      const std::string content = i < r_.targets.size() ? r_.targets[i].second : "";
      const std::string label = fmt::format("{} of {} needs", content, s.gas);
      if (s.unreachable) line(label, "nothing brings it, see cautions");
      if (s.pressure_gauge.asked) pressures(label, s.pressure_gauge, s.pressure_absolute);
      if (s.temperature.asked && !r_.solved_for_temperature) line(label, celsius(s.temperature));
    }
  }

  void container() {
    if (a_.container.empty()) return;
    section("In the closed package, at equilibrium");
    for (const auto& c : a_.container) {
      line("Temperature", celsius(c.temperature));
      pressures("Pressure", c.pressure_gauge, c.pressure_absolute);
      line("Ullage", shown(c.ullage, unit("%", Dimension::fraction), " of brimful"));
      for (const auto& g : c.gases) gas(g);
    }
  }

  void opening() {
    if (a_.opening.empty()) return;
    const auto at = celsius(a_.opening_temperature);
    section(fmt::format("Lost on opening at {}, each on top of the one before", at));
    for (const auto& loss : a_.opening) {
      const bool co2 = loss.gas.empty();
      const auto& in = co2 ? unit("g", Dimension::mass) : unit("mg", Dimension::mass);
      const std::string name = co2 ? "CO2" : std::string(loss.gas);
      if (!a_.container.empty()) loss_line(name + " from the headspace", loss.headspace_loss, in);
      loss_line(name + " as fizz", loss.fizz_loss, in);
      loss_line(name + " going flat in air", loss.flat_loss, in);
    }
  }

  // A gas other than CO2 that has nothing to lose needs no line.
  void loss_line(const std::string& label, const Figure<Mass>& loss, const Unit& in) {
    const bool silent = !label.starts_with("CO2") && loss.value.value() == 0;
    if (loss.asked && !silent) line(label, shown(loss, in));
  }

  void trace() {
    for (const auto& chain : r_.trace.chains) {
      section(fmt::format("How {} came about", chain.figure));
      for (const auto& step : chain.steps) trace_step(step);
    }
  }

  void trace_step(const TraceStep& step) {
    constexpr int digits = 6;
    out_ += wrapped("  ", fmt::format("{}: {} = {} {}", step.law, step.result.symbol,
                                      significant(step.result.value, digits), step.result.unit));
    if (!step.inputs.empty()) {
      std::string inputs;
      for (const auto& in : step.inputs) {
        if (!inputs.empty()) inputs += ", ";
        inputs += fmt::format("{} = {} {}", in.symbol, significant(in.value, digits), in.unit);
      }
      out_ += wrapped("      from ", inputs);
    }
    if (step.inputs.size() > 1 || step.record != nullptr) {
      out_ += wrapped("      by   ", step.equation);
    }
    if (step.record != nullptr) {
      out_ += wrapped("      rec  ", fmt::format("{}, u {} [{}]", step.record->key,
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
    if (!r_.cautions.empty()) section("Cautions");
    for (const auto& c : r_.cautions) out_ += wrapped("  ! ", c.message);
    if (!r_.assumptions.empty() || !r_.doubt_not_stated.empty()) section("Assumed");
    for (const auto& a : r_.assumptions) out_ += wrapped("  - ", a.message);
    if (!r_.doubt_not_stated.empty()) {
      out_ += wrapped("  - ", fmt::format("doubt not stated, taken as exact: {}",
                                          fmt::join(r_.doubt_not_stated, ", ")));
    }
  }

  void sources() {
    section("Sources");
    for (std::size_t i = 0; i < r_.sources.size(); ++i) {
      out_ += wrapped(fmt::format("  [{}] ", i + 1), r_.sources[i].citation);
    }
  }

  void audit() {
    section("Audit");
    out_ += fmt::format("  {} {}\n", r_.audit.program, r_.audit.version);
    out_ += fmt::format("  recipe    {}\n  constants {}\n", r_.audit.recipe_digest,
                        r_.audit.constants_digest);
    out_ += "  inputs as understood: under Asked\n";
  }

  const Report& r_;
  const Answer& a_;
  const TextOptions& options_;
  std::string out_;
};

}  // namespace

std::string text_report(const Report& report, const TextOptions& options) {
  return TextReport(report, options).write();
}

}  // namespace capsigh
