// Verdicts and doubts of a text report.
#include <algorithm>
#include <cmath>

#include "text_page.hpp"

namespace capsigh::render_detail {
namespace {

constexpr double kPercent = 100;

Unit content_unit(ContentMeasure measure, double at) {
  constexpr double trace = 0.1;
  switch (measure) {
    case ContentMeasure::volumes: return unit("vol", Dimension::gas_volumes);
    case ContentMeasure::mass_concentration:
      return unit(at < trace ? "mg/L" : "g/L", Dimension::mass_concentration);
    case ContentMeasure::amount_concentration:
      return unit("mol/L", Dimension::amount_concentration);
    case ContentMeasure::molality: return unit("mol/kg", Dimension::molality);
    case ContentMeasure::mass_fraction: return unit("mg/kg", Dimension::mass_fraction);
  }
  return unit("vol", Dimension::gas_volumes);
}

// "3.680 to 3.720", rounded so that it never widens.
std::string zone_text(const Interval& zone, const Unit& in, double guard) {
  const bool low = std::isfinite(zone.low);
  const bool high = std::isfinite(zone.high);
  const std::string from = low ? rounded_up(in_unit(zone.low, in), guard) : "";
  const std::string to = high ? rounded_down(in_unit(zone.high, in), guard) : "";
  if (!high) return "from " + from;
  return low ? from + " to " + to : "up to " + to;
}

}  // namespace

void TextPage::judged(const JudgedTarget& j) {
  const std::string_view verdict = j.verdict == Verdict::inside    ? "inside"
                                   : j.verdict == Verdict::outside ? "OUTSIDE"
                                                                   : "UNDECIDED";
  line(fmt::format("{} against {}", j.gas, j.wish), std::string(verdict),
       !j.doubt_stated
           ? std::string("values compared, no doubt stated")
           : fmt::format("probability of conformity {:.1f} %{}", kPercent * j.probability,
                         j.guarded ? "" : ", values compared"));
  if (j.doubt_stated && j.guarded) acceptance(j);
}

void TextPage::acceptance(const JudgedTarget& j) {
  const auto& zone = j.zone;
  if (zone.empty) {
    out += wrapped("    ", fmt::format("no content would be accepted: at best, in the middle, the "
                                       "probability is {:.1f} %",
                                       kPercent * zone.best_probability));
  } else {
    const double nearest = std::min(std::abs(zone.values.low), std::abs(zone.values.high));
    const Unit in = content_unit(j.measure, nearest);
    const double guard = difference_in_unit(zone.guard_band, in);
    line("  accepted at this doubt",
         fmt::format("{} {}", zone_text(zone.values, in, guard), in.text),
         fmt::format("guard band {} {}", significant(guard, 2), in.text));
  }
  if (j.advice.by != Advice::By::nothing) {
    out += wrapped("    ", advice_text(j.advice, zone.empty ? "open the zone" : "decide", asked_));
  }
}

// Ranked, for the figures that answer the question; all others are in the machine-readable form.
void TextPage::doubts(const Report& report) {
  if (report.main_doubts.empty()) return;
  section("Where the doubt comes from");
  for (const auto& d : report.main_doubts) {
    out += wrapped("  " + padded(figure_label(d.of), kLabel), shares_text(d.lines));
    if (d.nonlinear) {
      out += wrapped("    ", "not in proportion to its inputs: --monte-carlo tells its doubt");
    }
    out += wrapped("    ", advice_text(d.to_halve, "halve it", asked_));
  }
}

void TextPage::drawn(const Report& report) {
  if (!report.monte_carlo) return;
  const auto& run = *report.monte_carlo;
  section(fmt::format("Monte Carlo, {} draws, seed {}", run.draws, run.seed));
  out += wrapped("  ", fmt::format("u is drawn, not of first order. Below, the interval that holds "
                                   "{:.0f} % of the draws; {} of them had no answer.",
                                   kPercent * run.coverage, run.unanswered));
  each_figure(report.answer, [&](const FigurePath& path, const auto& figure, const JsonUnit& json) {
    const bool main = std::any_of(report.main_doubts.begin(), report.main_doubts.end(),
                                  [&](const MainDoubt& d) { return d.of == path.text(); });
    if (main && figure.low && figure.high) interval(path.text(), figure, json);
  });
}

template <class Q>
void TextPage::interval(const std::string& path, const Figure<Q>& figure, const JsonUnit& json) {
  const auto [dimension, own] = shown_as(json);
  for (const auto* u : units(dimension, own)) {
    const double doubt = difference_in_unit(si_value(figure.u), *u);
    line(figure_label(path),
         fmt::format("{} to {} {}{}", rounded_down(in_unit(si_value(*figure.low), *u), doubt),
                     rounded_up(in_unit(si_value(*figure.high), *u), doubt), u->text,
                     path.ends_with("gauge") ? " gauge" : ""),
         fmt::format("u {} (first order {})", significant(doubt, 2),
                     significant(difference_in_unit(si_value(figure.u_first), *u), 2)));
  }
}

}  // namespace capsigh::render_detail
