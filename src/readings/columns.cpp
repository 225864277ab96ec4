#include "capsigh/readings/columns.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

constexpr std::array<std::string_view, 7> kMeanings{"temperature", "pressure", "ambient", "air",
                                                    "content",     "time",     "id"};
constexpr std::array kContentDimensions{Dimension::gas_volumes, Dimension::mass_concentration,
                                        Dimension::amount_concentration, Dimension::molality,
                                        Dimension::mass_fraction};
constexpr std::array kPressure{Dimension::pressure};
constexpr std::array kTemperature{Dimension::temperature};
constexpr std::array kVolume{Dimension::volume};

ContentMeasure measure_of(Dimension d) {
  switch (d) {
    case Dimension::mass_concentration: return ContentMeasure::mass_concentration;
    case Dimension::amount_concentration: return ContentMeasure::amount_concentration;
    case Dimension::molality: return ContentMeasure::molality;
    case Dimension::mass_fraction: return ContentMeasure::mass_fraction;
    default: return ContentMeasure::volumes;
  }
}

std::string_view trimmed(std::string_view text) {
  const auto blank = [](char c) { return c == ' ' || c == '\t' || c == '\r'; };
  while (!text.empty() && blank(text.front())) text.remove_prefix(1);
  while (!text.empty() && blank(text.back())) text.remove_suffix(1);
  return text;
}

std::string lower(std::string_view text) {
  std::string all(text);
  for (char& c : all) {
    if (c >= 'A' && c <= 'Z') c = static_cast<char>(c - 'A' + 'a');
  }
  return all;
}

// "temperature [degC]" or "Temperature (degC)": its name in lower case, and what stands in
// brackets.
struct Meaning {
  std::string name;
  std::string unit;
};

Meaning meaning_of(std::string_view text) {
  text = trimmed(text);
  for (const auto& [open, close] : {std::pair{'[', ']'}, std::pair{'(', ')'}}) {
    const std::size_t at = text.find(open);
    if (at != std::string_view::npos && text.back() == close) {
      return {lower(trimmed(text.substr(0, at))),
              std::string(trimmed(text.substr(at + 1, text.size() - at - 2)))};
    }
  }
  return {lower(text), ""};
}

bool means_something(const std::string& name) {
  return std::find(kMeanings.begin(), kMeanings.end(), name) != kMeanings.end();
}

bool is_number(std::string_view field) {
  field = trimmed(field);
  bool digit = false;
  for (const char c : field) {
    digit = digit || (c >= '0' && c <= '9');
    if (!((c >= '0' && c <= '9') || c == '.' || c == ',' || c == '-' || c == '+')) return false;
  }
  return digit;
}

class ColumnFinder {
 public:
  ColumnFinder(const std::string& header, const Dialect& dialect, const ColumnWishes& wishes,
               const std::string& file)
      : header_(header), wishes_(wishes), file_(file) {
    columns_.names = split_record(trimmed(header), dialect.delimiter);
    columns_.count = columns_.names.size();
    for (auto& name : columns_.names) name = trimmed(name);
  }

  Outcome<Columns> run() {
    if (no_header()) return {{}, findings_};
    check_twice();
    for (const auto& mapped : wishes_.columns) check_mapped(mapped);
    for (std::size_t i = 0; i < columns_.count; ++i) take(i);
    for (const auto& name : wishes_.group_by) {
      if (const auto at = wished(name, "judging.group_by")) columns_.groups.push_back(*at);
    }
    if (wishes_.subgroup) columns_.label = wished(*wishes_.subgroup, "judging.subgroup");
    if (findings_.empty()) check_complete();
    if (has_error(findings_)) return {{}, findings_};
    return {std::move(columns_), {}};
  }

 private:
  void complain(std::string code, std::string message, std::string expected, std::string example,
                const std::string& at = "") {
    Finding f;
    f.code = std::move(code);
    f.message = std::move(message);
    f.expected = std::move(expected);
    f.example = std::move(example);
    const std::size_t found = at.empty() ? std::string::npos : header_.find(at);
    f.place = Place{file_, 1, found == std::string::npos ? 1 : found + 1,
                    found == std::string::npos ? 1 : at.size(), std::string(trimmed(header_))};
    findings_.push_back(std::move(f));
  }

  bool no_header() {
    if (trimmed(header_).empty()) {
      complain("no-readings", "there is nothing in it", "a header and readings",
               "temperature [degC],pressure [bar gauge]\n4.1,2.31");
      return true;
    }
    const auto numbers = std::count_if(columns_.names.begin(), columns_.names.end(), is_number);
    if (numbers == 0) return false;
    complain("no-header", "the first line holds readings, not a header",
             "a first line that names the columns and their units",
             "temperature [degC],pressure [bar gauge]");
    return true;
  }

  void check_twice() {
    for (std::size_t i = 0; i < columns_.count; ++i) {
      for (std::size_t j = 0; j < i; ++j) {
        if (columns_.names[i].empty() || columns_.names[i] != columns_.names[j]) continue;
        complain(
            "column-twice",
            fmt::format("columns {} and {} are both called '{}'", j + 1, i + 1, columns_.names[i]),
            "a name of its own for every column", "", columns_.names[i]);
      }
    }
  }

  void check_mapped(const ColumnWishes::Mapped& mapped) {
    static_cast<void>(wished(mapped.header, "judging.columns"));
    const auto meaning = meaning_of(mapped.meaning.text);
    if (means_something(meaning.name)) return;
    Finding f;
    f.code = "column-meaning";
    f.message = fmt::format("'{}' is no meaning of a column", mapped.meaning.text);
    f.expected = "temperature, pressure, ambient, air or content with a unit, time, or id";
    f.example = "columns = { \"Temp (F)\" = \"temperature [degF]\" }";
    f.place = mapped.meaning.place;
    findings_.push_back(std::move(f));
  }

  // The place of a column that the recipe names.
  std::optional<std::size_t> wished(const LocatedText& name, const std::string& key) {
    const auto& names = columns_.names;
    const auto it = std::find(names.begin(), names.end(), name.text);
    if (it != names.end()) return static_cast<std::size_t>(it - names.begin());
    Finding f;
    f.code = "column-missing";
    f.message =
        fmt::format("{} names the column '{}', which {} does not have", key, name.text, file_);
    std::string all;
    for (const auto& n : names) all += (all.empty() ? "" : ", ") + n;
    f.expected = "one of " + all;
    if (const auto near = nearest_name(name.text, names)) f.expected += "; nearest: " + *near;
    f.place = name.place;
    findings_.push_back(std::move(f));
    return std::nullopt;
  }

  void take(std::size_t at) {
    const std::string& name = columns_.names[at];
    const auto mapped =
        std::find_if(wishes_.columns.begin(), wishes_.columns.end(),
                     [&](const ColumnWishes::Mapped& m) { return m.header.text == name; });
    const bool by_recipe = mapped != wishes_.columns.end();
    const auto meaning = meaning_of(by_recipe ? mapped->meaning.text : name);
    if (!means_something(meaning.name)) return;
    // A column that the recipe maps takes the place of one that only has the name.
    if (!by_recipe && mapped_elsewhere(meaning.name)) return;
    if (meaning.name == "id") return;
    if (std::find(taken_.begin(), taken_.end(), meaning.name) != taken_.end()) {
      complain("column-twice", fmt::format("two columns give the {}", meaning.name),
               "one, or [judging] columns that says which", "", name);
      return;
    }
    taken_.push_back(meaning.name);
    if (meaning.name == "time") {
      take_time(at, meaning, name);
    } else if (meaning.name == "temperature") {
      columns_.temperature = number(at, meaning, name, kTemperature, "degC");
    } else if (meaning.name == "pressure") {
      columns_.pressure = number(at, meaning, name, kPressure, "bar gauge");
    } else if (meaning.name == "ambient") {
      columns_.ambient = number(at, meaning, name, kPressure, "hPa", true);
    } else if (meaning.name == "air") {
      columns_.air = number(at, meaning, name, kVolume, "mL");
    } else {
      columns_.content = number(at, meaning, name, kContentDimensions, "vol");
    }
  }

  bool mapped_elsewhere(const std::string& meaning) const {
    return std::any_of(wishes_.columns.begin(), wishes_.columns.end(),
                       [&](const auto& m) { return meaning_of(m.meaning.text).name == meaning; });
  }

  void take_time(std::size_t at, const Meaning& meaning, const std::string& name) {
    columns_.time = at;
    const std::string order = lower(meaning.unit);
    if (order == "d/m/y") {
      columns_.dates = DateOrder::day_first;
    } else if (order == "m/d/y") {
      columns_.dates = DateOrder::month_first;
    } else if (!order.empty()) {
      complain("column-unit", fmt::format("'{}' is no order of a date", meaning.unit),
               "time [d/m/y], time [m/d/y], or time alone for ISO 8601", "time [d/m/y]", name);
    }
  }

  std::optional<NumberColumn> number(std::size_t at, const Meaning& meaning,
                                     const std::string& name, std::span<const Dimension> dimensions,
                                     std::string_view example, bool absolute_by_nature = false) {
    const std::string right = fmt::format("{} [{}]", meaning.name, example);
    if (meaning.unit.empty()) {
      complain("column-unit", fmt::format("the column '{}' has no unit", name),
               "the unit in brackets, or [judging] columns that gives it", right, name);
      return std::nullopt;
    }
    // The one unit grammar reads two numbers in that unit: they give factor and offset.
    const Wanted wanted{dimensions, absolute_by_nature, example};
    const auto one = parse_quantity("1 " + meaning.unit, wanted);
    const auto zero = parse_quantity("0 " + meaning.unit, wanted);
    const auto* high = std::get_if<ParsedQuantity>(&one);
    const auto* low = std::get_if<ParsedQuantity>(&zero);
    if (high == nullptr || low == nullptr || high->plus_minus) {
      const auto* fault = std::get_if<GrammarFault>(&one);
      complain("column-unit",
               fmt::format("the unit of the column '{}': {}", name,
                           fault != nullptr ? fault->message : "a unit has no ±"),
               fault != nullptr ? fault->expected : "a unit alone", right, name);
      return std::nullopt;
    }
    if (meaning.name == "pressure") columns_.gauge = high->reference == Reference::gauge;
    if (meaning.name == "content") columns_.content_measure = measure_of(high->dimension);
    return NumberColumn{at, high->value - low->value, low->value, meaning.unit};
  }

  void check_complete() {
    const bool reads = columns_.temperature && columns_.pressure;
    if (reads || columns_.content) return;
    const std::string missing = columns_.temperature ? "pressure"
                                : columns_.pressure  ? "temperature"
                                                     : "temperature and no pressure";
    complain("column-missing", fmt::format("no column gives a {}", missing),
             "temperature and pressure, or content, with units in the header; or [judging] columns "
             "in the recipe that says which columns they are",
             "temperature [degC],pressure [bar gauge]\ncolumns = { \"Temp (F)\" = \"temperature "
             "[degF]\", \"P\" = \"pressure [psi gauge]\" }");
  }

  const std::string& header_;
  const ColumnWishes& wishes_;
  const std::string& file_;
  Columns columns_;
  std::vector<std::string> taken_;
  Findings findings_;
};

}  // namespace

Outcome<Columns> find_columns(const std::string& header, const Dialect& dialect,
                              const ColumnWishes& wishes, const std::string& file) {
  return ColumnFinder(header, dialect, wishes, file).run();
}

}  // namespace capsigh
