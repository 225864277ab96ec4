#include <fmt/chrono.h>
#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <ctime>

#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/summary.hpp"
#include "summary_words.hpp"
#include "wrap.hpp"

namespace capsigh {
namespace render_detail {

std::string time_text(double seconds) {
  const auto whole = static_cast<std::time_t>(std::floor(seconds));
  return fmt::format("{:%Y-%m-%d %H:%M:%S}", fmt::gmtime(whole));
}

std::string_view test_words(RunsTest test) {
  switch (test) {
    case RunsTest::beyond_limits: return "beyond a control limit";
    case RunsTest::one_side: return "a run on one side of the centre";
    case RunsTest::trend: return "a trend, steadily up or down";
    case RunsTest::alternating: return "alternating up and down";
    case RunsTest::two_of_three: return "two of three beyond 2 sigma";
    case RunsTest::four_of_five: return "four of five beyond 1 sigma";
    case RunsTest::within_one_sigma: return "too many within 1 sigma";
    case RunsTest::outside_one_sigma: return "too many outside 1 sigma";
  }
  return "";
}

std::string_view chart_words(ChartKind kind) {
  switch (kind) {
    case ChartKind::individuals: return "individuals and moving range";
    case ChartKind::mean_range: return "means and ranges";
    case ChartKind::mean_deviation: return "means and standard deviations";
  }
  return "";
}

std::string group_words(const SummaryPlan& plan, std::string_view group) {
  std::string text;
  for (const auto& name : plan.group_by) {
    const std::size_t end = group.find(kGroupSeparator);
    text += fmt::format("{}{} {}", text.empty() ? "" : ", ", name, group.substr(0, end));
    group = end == std::string_view::npos ? std::string_view{} : group.substr(end + 1);
  }
  return text;
}

}  // namespace render_detail

namespace {

using render_detail::chart_words;
using render_detail::group_words;
using render_detail::padded;
using render_detail::printable;
using render_detail::test_words;
using render_detail::time_text;
using render_detail::wrapped;

constexpr std::size_t kLabel = 24;
constexpr std::size_t kGroup = 16;

std::string value_text(double v) { return significant(v, 5); }
std::string spread_text(double v) { return significant(v, 3); }

std::string counted(std::uint64_t n, std::string_view what) {
  return fmt::format("{} {}", n, what);
}

std::uint64_t signals_of(const ChartFigures& chart) {
  std::uint64_t n = chart.spread_signals.count;
  for (const auto& s : chart.signals) n += s.count;
  return n;
}

class SummaryText {
 public:
  explicit SummaryText(const Summary& summary) : s_(summary), plan_(summary.plan) {}

  std::string write() {
    out_ = plan_.title.empty() ? "Readings\n" : printable(plan_.title) + ": readings\n";
    const auto all = figures(s_.overall, plan_);
    line("Rows", fmt::format("{}{}", s_.rows,
                             s_.rejected > 0 ? fmt::format(", {} of them rejected", s_.rejected)
                                             : std::string()));
    stream(all);
    groups();
    out_ += "\n";
    out_ += wrapped("  ",
                    "A signal counts at the point that completes its pattern. The ± of a drift is "
                    "one standard uncertainty, from the scatter about the line; its 95 % interval "
                    "stands in brackets.");
    return std::move(out_);
  }

 private:
  void line(std::string_view label, const std::string& text) {
    const bool long_label = render_detail::columns(label) >= kLabel;
    out_ += wrapped("  " + padded(label, kLabel) + (long_label ? " " : ""), text);
  }

  void stream(const StreamFigures& f) {
    verdicts(f);
    if (f.mean) {
      line(fmt::format("Mean of {}", plan_.quantity),
           fmt::format("{} {}{}", value_text(*f.mean), plan_.unit,
                       f.deviation ? ", standard deviation " + spread_text(*f.deviation) : ""));
      line("Lowest, highest",
           fmt::format("{} to {} {}", value_text(*f.least), value_text(*f.greatest), plan_.unit));
    }
    capability(f);
    drift(f);
    for (const auto& chart : f.charts) chart_lines(chart);
  }

  void verdicts(const StreamFigures& f) {
    if (plan_.wish.empty()) return;
    std::string text = counted(f.verdicts.inside, "inside");
    if (f.verdicts.outside > 0) text += ", " + counted(f.verdicts.outside, "OUTSIDE");
    if (f.verdicts.undecided > 0) text += ", " + counted(f.verdicts.undecided, "UNDECIDED");
    line("Against " + printable(plan_.wish), text);
  }

  void capability(const StreamFigures& f) {
    if (!f.capability) return;
    const auto index = [](const Index& i) {
      return fmt::format("{:.2f} ({:.2f} to {:.2f})", i.value, i.low, i.high);
    };
    std::string text;
    if (f.capability->cp) text = "Cp " + index(*f.capability->cp) + ", ";
    line("Capability, 95 %", text + "Cpk " + index(f.capability->cpk));
  }

  void drift(const StreamFigures& f) {
    if (!f.drift) return;
    const auto& d = *f.drift;
    const auto [slope, plus_minus] = rounded(d.slope, d.u);
    std::string text =
        fmt::format("{} {}{} {} per hour ({} to {})", slope, plus_minus.empty() ? "" : "± ",
                    plus_minus, plan_.unit, spread_text(d.low), spread_text(d.high));
    if (f.hours_to_limit) {
      text += fmt::format("; at this rate the mean leaves the tolerance {} h after the last row",
                          significant(*f.hours_to_limit, 2));
    }
    line("Drift", text);
  }

  void limits(std::string_view label, const ControlLimits& l, int digits) {
    line(label,
         fmt::format("{} | {} | {} {}", significant(l.low, digits), significant(l.centre, digits),
                     significant(l.high, digits), plan_.unit));
  }

  void chart_lines(const ChartFigures& chart) {
    const bool single = chart.kind == ChartKind::individuals;
    std::string title = fmt::format("Chart of {}", chart_words(chart.kind));
    if (!single) {
      title += chart.size > 0 ? fmt::format(", {} a subgroup", chart.size)
                              : std::string(", subgroups of varying size");
    }
    out_ += fmt::format("  {}\n", title);
    limits(single ? "  values" : "  means", chart.limits.location, 5);
    limits(chart.kind == ChartKind::individuals  ? "  moving range"
           : chart.kind == ChartKind::mean_range ? "  range"
                                                 : "  standard deviation",
           chart.limits.spread, 3);
    line("  limits", origin(chart));
    const auto& first = chart.signals;
    for (std::size_t i = 0; i < kRunsTests; ++i) {
      signal_line(test_words(static_cast<RunsTest>(i)), first[i]);
    }
    signal_line(single ? "moving range beyond its limit" : "spread beyond its limits",
                chart.spread_signals);
    if (signals_of(chart) == 0) line("  signals", "none: in control as far as the tests see");
  }

  std::string origin(const ChartFigures& chart) const {
    if (chart.established) return fmt::format("established; {} points tested", chart.points);
    std::string text = fmt::format("from these {} points", chart.points);
    if (chart.points < plan_.preliminary) {
      text += fmt::format(", preliminary: fewer than {}", plan_.preliminary);
    }
    if (chart.tested < chart.points) text += fmt::format("; the last {} tested", chart.tested);
    return text;
  }

  void signal_line(std::string_view what, const Signals& signals) {
    if (signals.count == 0) return;
    constexpr std::size_t shown = 3;
    std::string text =
        fmt::format("{} {}: row", signals.count, signals.count == 1 ? "point" : "points");
    for (std::size_t i = 0; i < std::min(shown, signals.first.size()); ++i) {
      const auto& v = signals.first[i];
      text += fmt::format("{} {}{}", i == 0 ? "" : ",", v.row,
                          v.time ? " (" + time_text(*v.time) + ")" : "");
    }
    if (signals.count > shown) text += ", ...";
    out_ += wrapped(fmt::format("  ! {}, ", what), text);
  }

  // A long name has a line of its own.
  [[nodiscard]] std::string group_cell(std::string_view group) const {
    const auto name = printable(group_words(plan_, group));
    if (render_detail::columns(name) <= kGroup) return padded(name, kGroup);
    return name + "\n" + std::string(kGroup + 2, ' ');
  }

  void groups() {
    if (s_.groups.empty()) return;
    out_ += fmt::format("\nBy {}\n", fmt::join(plan_.group_by, ", "));
    out_ += fmt::format("  {}{:>7}{:>10}{:>10}{:>7}{:>9}{:>10}{:>9}\n", padded("", kGroup), "rows",
                        "mean", "s", "Cpk", "outside", "undecided", "signals");
    for (const auto& [group, state] : s_.groups) {
      const auto f = figures(state, plan_);
      std::uint64_t signals = 0;
      if (!f.charts.empty()) signals = signals_of(f.charts.front());
      out_ += fmt::format("  {}{:>7}{:>10}{:>10}{:>7}{:>9}{:>10}{:>9}\n", group_cell(group),
                          f.count, f.mean ? value_text(*f.mean) : "",
                          f.deviation ? spread_text(*f.deviation) : "",
                          f.capability ? fmt::format("{:.2f}", f.capability->cpk.value) : "",
                          f.verdicts.outside, f.verdicts.undecided, signals);
    }
    for (const auto& [group, state] : s_.groups) {
      const auto f = figures(state, plan_);
      const bool quiet = std::all_of(f.charts.begin(), f.charts.end(),
                                     [](const auto& c) { return signals_of(c) == 0; });
      if (quiet) continue;
      out_ += fmt::format("\n{}\n", printable(group_words(plan_, group)));
      stream(f);
    }
  }

  const Summary& s_;
  const SummaryPlan& plan_;
  std::string out_;
};

}  // namespace

std::string text_summary(const Summary& summary) { return SummaryText(summary).write(); }

}  // namespace capsigh
