#include <fmt/format.h>

#include <algorithm>

#include "capsigh/render/render.hpp"
#include "wrap.hpp"

namespace capsigh {
namespace {

using render_detail::wrapped;

std::string record_text(const Record& r, const Library& library) {
  std::string values;
  for (std::size_t i = 0; i < r.values.size(); ++i) {
    if (!values.empty()) values += ", ";
    values += fmt::format("{} = {}", r.symbols[i], r.values[i].digits);
  }
  std::string out = fmt::format("{}{}\n", r.key, r.assumed ? "  (assumed)" : "");
  const auto row = [&](std::string_view label, std::string_view text) {
    if (!text.empty()) out += wrapped(fmt::format("  {:<12} ", label), text);
  };
  row("meaning", r.definition);
  row("values", values);
  row("unit", r.unit == "1" ? std::string_view{} : r.unit);
  row("reference", r.reference);
  row("scale", r.scale);
  row("range", r.range_text);
  row("u (k = 1)", r.uncertainty.printed);
  row("u from", r.uncertainty.basis);
  row("source", library.source(r.source)->citation);
  row("locator", r.locator);
  row("origin", r.origin);
  row("parts", fmt::format("{}", fmt::join(r.parts, ", ")));
  row("note", r.note);
  return out + "\n";
}

}  // namespace

bool record_matches(const Record& record, const std::string& name) {
  if (name.empty() || record.key == name) return true;
  // A whole part of the key: "CO2", "henry", "henry.CO2".
  return fmt::format(".{}.", record.key).find(fmt::format(".{}.", name)) != std::string::npos;
}

bool constants_match(const Library& library, const std::string& name) {
  const auto records = library.records();
  return std::any_of(records.begin(), records.end(),
                     [&](const Record& r) { return record_matches(r, name); });
}

std::string text_constants(const Library& library, const std::string& name) {
  std::string out = fmt::format("constants {}\n\n", library.digest());
  for (const auto& record : library.records()) {
    if (record_matches(record, name)) out += record_text(record, library);
  }
  return out;
}

}  // namespace capsigh
