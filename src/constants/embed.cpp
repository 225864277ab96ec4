// Build-time tool: reads constants/*.toml, refuses what is not in order, and writes them as
// constexpr C++ tables with the printed digits kept as text.
#include <fmt/format.h>
#include <fmt/os.h>

#include <cstdio>
#include <exception>
#include <limits>

#include "store.hpp"

namespace {

using namespace capsigh;

std::string literal(std::string_view text) { return fmt::format("R\"_x_({})_x_\"", text); }

std::string number(double value) {
  if (value == std::numeric_limits<double>::infinity()) return "kInfinity";
  if (value == -std::numeric_limits<double>::infinity()) return "-kInfinity";
  return fmt::format("{:.17g}", value);
}

template <class List, class Format>
std::string array(std::string_view type, const std::string& name, const List& list,
                  Format&& format) {
  if (list.empty()) return "";
  std::string items;
  for (const auto& item : list) items += format(item) + ", ";
  return fmt::format("constexpr {} {}[] = {{{}}};\n", type, name, items);
}

std::string span_of(const std::string& name, bool empty) { return empty ? "{}" : name; }

std::string box(const ValidityBox& b) {
  return fmt::format("{{{{{}, {}}}, {{{}, {}}}}}", number(b.temperature.low),
                     number(b.temperature.high), number(b.pressure.low), number(b.pressure.high));
}

std::string kind(UncertaintyKind k) {
  switch (k) {
    case UncertaintyKind::exact: return "exact";
    case UncertaintyKind::relative: return "relative";
    case UncertaintyKind::absolute: return "absolute";
    case UncertaintyKind::not_stated: return "not_stated";
  }
  return "not_stated";
}

void write_record(fmt::ostream& out, std::string& table, const Record& r, std::size_t index) {
  const std::string name = fmt::format("r{}", index);
  const auto text = [](std::string_view s) { return literal(s); };
  const auto printed = [](const Printed& p) {
    return fmt::format("{{{}, {}}}", literal(p.digits), number(p.value));
  };
  out.print("{}", array("std::string_view", name + "_symbols", r.symbols, text));
  out.print("{}", array("Printed", name + "_values", r.values, printed));
  out.print("{}", array("ValidityBox", name + "_range", r.range, box));
  out.print("{}", array("ValidityBox", name + "_limit", r.limit, box));
  out.print("{}", array("std::string_view", name + "_parts", r.parts, text));
  table += fmt::format(
      "    {{{}, {}, {}, {}, {}, {}, {}, {}, {}, {}, {}, {},\n"
      "     {{UncertaintyKind::{}, {}, {}, {}}}, {}, {}, {}, {}, {}, {}}},\n",
      literal(r.key), literal(r.form), span_of(name + "_symbols", r.symbols.empty()),
      span_of(name + "_values", r.values.empty()), literal(r.unit), number(r.factor),
      literal(r.definition), literal(r.reference), literal(r.scale), literal(r.range_text),
      span_of(name + "_range", r.range.empty()), span_of(name + "_limit", r.limit.empty()),
      kind(r.uncertainty.kind), literal(r.uncertainty.printed), number(r.uncertainty.value),
      literal(r.uncertainty.basis), literal(r.source), literal(r.locator), literal(r.origin),
      literal(r.note), span_of(name + "_parts", r.parts.empty()), r.assumed);
}

void write(const RecordStore& store, const char* path) {
  auto out = fmt::output_file(path);
  out.print(
      "// Generated from constants/*.toml; do not edit.\n"
      "#include \"capsigh/constants/library.hpp\"\n\n"
      "namespace capsigh {{\nnamespace {{\n\n"
      "[[maybe_unused]] constexpr double kInfinity ="
      " std::numeric_limits<double>::infinity();\n");
  std::string table;
  std::size_t index = 0;
  for (const auto& record : store.records()) write_record(out, table, record, index++);
  out.print("constexpr Record kRecords[] = {{\n{}}};\n", table);
  std::string sources;
  for (const auto& s : store.sources()) {
    sources += fmt::format("    {{{}, {}}},\n", literal(s.key), literal(s.citation));
  }
  out.print(
      "constexpr Source kSources[] = {{\n{}}};\n\n}}  // namespace\n\n"
      "const Library& built_in_library() {{\n"
      "  static const Library library(kRecords, kSources, \"{}\");\n"
      "  return library;\n}}\n\n}}  // namespace capsigh\n",
      sources, store.digest());
}

}  // namespace

int main(int argc, char** argv) {
  if (argc != 3) {
    fmt::print(stderr, "usage: capsigh_embed DIRECTORY OUTPUT.cpp\n");
    return 2;
  }
  try {
    capsigh::RecordStore store;
    const auto findings = capsigh::read_directory(store, argv[1]);
    for (const auto& f : findings) {
      fmt::print(stderr, "{}:{}:{}: error: {}; expected {}\n", f.place->file, f.place->line,
                 f.place->column, f.message, f.expected);
    }
    if (!findings.empty()) return 1;
    write(store, argv[2]);
  } catch (const std::exception& e) {
    fmt::print(stderr, "capsigh_embed: {}\n", e.what());
    return 1;
  }
  return 0;
}
