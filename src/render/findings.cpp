#include <fmt/format.h>

#include <algorithm>
#include <limits>

#include "capsigh/render/render.hpp"
#include "wrap.hpp"

namespace capsigh {
namespace {

using render_detail::columns;
using render_detail::printable;

std::string where(const Place& place) {
  if (place.line == 0) return place.file;
  return fmt::format("{}:{}:{}", place.file, place.line, place.column);
}

// The line of the file and carets under the offending text; long lines are cut around it.
std::string picture(const Place& place) {
  constexpr std::size_t longest = 200;
  if (place.line == 0 || place.line_text.size() > longest) return "";
  const std::string line = printable(place.line_text);
  const std::size_t start = std::min(place.column > 0 ? place.column - 1 : 0, line.size());
  const std::size_t end = std::min(start + place.length, line.size());
  const std::string gutter = fmt::format("{:>5} | ", place.line);
  const std::size_t carets = std::max<std::size_t>(columns(line.substr(start, end - start)), 1);
  return fmt::format("{}{}\n{}{}{}\n", gutter, line, std::string(gutter.size(), ' '),
                     std::string(columns(line.substr(0, start)), ' '), std::string(carets, '^'));
}

void labelled(std::string& out, std::string_view label, const std::string& text) {
  if (text.empty()) return;
  std::string_view rest = text;
  bool first = true;
  while (!rest.empty()) {
    const std::size_t newline = rest.find('\n');
    out += fmt::format("  {}{}\n",
                       first ? fmt::format("{}: ", label) : std::string(label.size() + 2, ' '),
                       rest.substr(0, newline));
    rest = newline == std::string_view::npos ? std::string_view{} : rest.substr(newline + 1);
    first = false;
  }
}

std::string one(const Finding& f) {
  const std::string_view severity = f.severity == Severity::error     ? "error"
                                    : f.severity == Severity::caution ? "caution"
                                                                      : "assumed";
  std::string out;
  out += f.place ? where(*f.place) + ": " : "";
  out += fmt::format("{}: {} [{}]\n", severity, printable(f.message), f.code);
  if (f.place) out += picture(*f.place);
  if (f.conflicts_with) {
    out += fmt::format("  against {}:\n{}", where(*f.conflicts_with), picture(*f.conflicts_with));
  }
  labelled(out, "expected", f.expected);
  labelled(out, "for example", f.example);
  return out;
}

}  // namespace

std::string text_findings(const Findings& findings) {
  // In the order of the file; findings without a line last, in their own order.
  Findings ordered = findings;
  const auto line = [](const Finding& f) {
    constexpr auto last = std::numeric_limits<std::size_t>::max();
    return f.place && f.place->line > 0 ? f.place->line : last;
  };
  std::stable_sort(ordered.begin(), ordered.end(),
                   [&](const Finding& a, const Finding& b) { return line(a) < line(b); });
  std::string out;
  for (const auto& f : ordered) out += one(f);
  return out;
}

}  // namespace capsigh
