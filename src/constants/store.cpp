#include "store.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <boost/uuid/detail/sha1.hpp>
#include <charconv>
#include <filesystem>
#include <fstream>
#include <sstream>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

constexpr std::size_t kLargestTable = std::size_t{1} << 20U;

struct ConstantUnit {
  std::string_view text;
  double factor;
};

// Units of constants, which no recipe uses, and their SI factors (exact).
constexpr double kAtm = 101325;
constexpr auto kConstantUnits = std::to_array<ConstantUnit>({
    {"1", 1},
    {"%", 1e-2},
    {"Pa", 1},
    {"hPa", 1e2},
    {"bar", 1e5},
    {"MPa", 1e6},
    {"atm", kAtm},
    {"K", 1},
    {"m", 1},
    {"m/s2", 1},
    {"K/m", 1},
    {"K kg/mol", 1},
    {"J/(mol K)", 1},
    {"g/mol", 1e-3},
    {"cm3/mol", 1e-6},
    {"L/mol", 1e-3},
    {"mL/g", 1e-3},
    {"kJ/mol", 1e3},
    {"kJ/(kg K)", 1e3},
    {"mN/m", 1e-3},
    {"ppm", 1e-6},
    {"g/g", 1},
    {"%/bar", 1e-2 / 1e5},
    {"mL/d", 1e-6 / 86400},
    {"wk", 7.0 * 86400},
    {"m/s", 1},
    {"1/s", 1},
    {"kg/m3", 1},
    {"mol/(kg atm)", 1 / kAtm},
    {"mol/(L atm)", 1e3 / kAtm},
    {"mol/(m3 Pa)", 1},
});

constexpr auto kOrigins = std::to_array<std::string_view>(
    {"read", "public code", "from memory", "estimated here", "defined here"});

const ConstantUnit* constant_unit(std::string_view text) {
  const auto* it = std::find_if(kConstantUnits.begin(), kConstantUnits.end(),
                                [&](const auto& u) { return u.text == text; });
  return it == kConstantUnits.end() ? nullptr : it;
}

bool read_double(std::string_view digits, double& value) {
  const auto [end, error] = std::from_chars(digits.data(), digits.data() + digits.size(), value);
  return error == std::errc{} && end == digits.data() + digits.size();
}

Finding fault(const Place& place, std::string code, std::string message, std::string expected) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  f.place = place;
  return f;
}

}  // namespace

// Reads the table of one record; every complaint goes to `findings`.
class RecordReader {
 public:
  RecordReader(RecordStore& store, const Node& table, Findings& findings)
      : store_(store), table_(table), findings_(findings) {}

  void read_source() {
    check_keys({"key", "citation"});
    Source source{text("key", true), text("citation", true)};
    store_.sources_.push_back(source);
  }

  void read_record() {
    check_keys({"key", "form", "symbols", "values", "unit", "definition", "reference", "scale",
                "range", "limit", "uncertainty", "uncertainty_basis", "source", "locator", "origin",
                "note", "parts", "assumed"});
    Record r;
    r.key = text("key", true);
    r.form = text("form", true);
    r.symbols = list("symbols");
    r.values = numbers();
    r.unit = text("unit", true);
    r.factor = unit_factor(r.unit);
    r.definition = text("definition", true);
    r.reference = text("reference", false);
    r.scale = text("scale", false);
    r.range = boxes("range", true, r.range_text);
    std::string_view unused;
    r.limit = boxes("limit", false, unused);
    r.uncertainty = uncertainty();
    r.source = text("source", true);
    r.locator = text("locator", true);
    r.origin = origin();
    r.note = text("note", false);
    r.parts = list("parts");
    const Member* assumed = table_.find("assumed");
    r.assumed = assumed != nullptr && assumed->value.boolean;
    if (r.symbols.size() != r.values.size()) {
      complain(table_.place, "record-symbols", "symbols and values differ in number",
               "one symbol a value");
    }
    if (!store_.places_.emplace(std::string(r.key), table_.place).second) {
      complain(table_.place, "record-twice", fmt::format("the record '{}' exists already", r.key),
               "each record once");
    }
    store_.records_.push_back(r);
  }

 private:
  void complain(const Place& place, std::string code, std::string message, std::string expected) {
    findings_.push_back(fault(place, std::move(code), std::move(message), std::move(expected)));
  }

  void check_keys(const std::vector<std::string>& known) {
    for (const auto& member : table_.members) {
      if (std::find(known.begin(), known.end(), member.key) != known.end()) continue;
      const auto near = nearest_name(member.key, known);
      complain(member.key_place, "unknown-key",
               fmt::format("'{}' is no key of a record{}", member.key,
                           near ? "; did you mean '" + *near + "'?" : ""),
               fmt::format("{}", fmt::join(known, ", ")));
    }
  }

  std::string_view text(std::string_view key, bool required) {
    const Member* member = table_.find(key);
    if (member == nullptr || member->value.text.empty()) {
      if (required || member != nullptr) {
        complain(member != nullptr ? member->value.place : table_.place, "record-incomplete",
                 fmt::format("a record needs '{}'", key), fmt::format("{} = \"...\"", key));
      }
      return {};
    }
    return store_.keep(member->value.text);
  }

  std::span<const std::string_view> list(std::string_view key) {
    auto& kept = store_.lists_.emplace_back();
    if (const Member* member = table_.find(key)) {
      for (const auto& item : member->value.items) kept.push_back(store_.keep(item.text));
    }
    return kept;
  }

  std::span<const Printed> numbers() {
    auto& kept = store_.numbers_.emplace_back();
    const Member* member = table_.find("values");
    if (member == nullptr) return kept;
    for (const auto& item : member->value.items) {
      Printed printed{store_.keep(item.text), 0};
      if (!read_double(printed.digits, printed.value)) {
        complain(item.place, "record-number", fmt::format("'{}' is not a number", item.text),
                 "the digits as printed, as a text");
      }
      kept.push_back(printed);
    }
    return kept;
  }

  double unit_factor(std::string_view unit) {
    if (const auto* known = constant_unit(unit)) return known->factor;
    if (!unit.empty()) {
      complain(table_.place, "record-unit", fmt::format("the unit '{}' is not known", unit),
               "a unit of the table in store.cpp");
    }
    return 1;
  }

  std::string_view origin() {
    const std::string_view value = text("origin", true);
    if (!value.empty() && std::find(kOrigins.begin(), kOrigins.end(), value) == kOrigins.end()) {
      complain(table_.place, "record-origin", fmt::format("'{}' is no origin", value),
               fmt::format("{}", fmt::join(kOrigins, ", ")));
    }
    return value;
  }

  StatedUncertainty uncertainty() {
    StatedUncertainty u;
    u.printed = text("uncertainty", true);
    if (u.printed == "exact") {
      u.kind = UncertaintyKind::exact;
    } else if (u.printed != "not stated" && !u.printed.empty()) {
      u.basis = text("uncertainty_basis", true);
      const std::size_t space = u.printed.find(' ');
      const auto* unit =
          space == std::string_view::npos ? nullptr : constant_unit(u.printed.substr(space + 1));
      if (unit == nullptr || !read_double(u.printed.substr(0, space), u.value) || u.value <= 0) {
        complain(table_.place, "record-uncertainty",
                 fmt::format("'{}' is no uncertainty", u.printed),
                 "\"0.7 %\", \"1.5 cm3/mol\", \"exact\" or \"not stated\"");
        return u;
      }
      u.kind = unit->text == "%" ? UncertaintyKind::relative : UncertaintyKind::absolute;
      u.value *= unit->factor;
    }
    return u;
  }

  std::span<const ValidityBox> boxes(std::string_view key, bool required,
                                     std::string_view& range_text) {
    auto& kept = store_.boxes_.emplace_back();
    const Member* member = table_.find(key);
    if (member == nullptr) {
      if (required) text(key, true);
      return kept;
    }
    if (member->value.kind == Node::Kind::text && member->value.text == "everywhere") {
      range_text = store_.keep("everywhere");
      return kept;
    }
    std::string written;
    for (const auto& item : member->value.items) {
      if (!written.empty()) written += ", or ";
      kept.push_back(box(item, written));
    }
    if (kept.empty()) {
      complain(member->value.place, "record-range", fmt::format("'{}' names no range", key),
               "\"everywhere\" or [{ temperature = [\"0 degC\", \"40 degC\"] }]");
    }
    range_text = store_.keep(written);
    return kept;
  }

  ValidityBox box(const Node& item, std::string& written) {
    ValidityBox box;
    bool first = true;
    for (const auto& member : item.members) {
      const bool is_temperature = member.key == "temperature";
      const Dimension dimension = is_temperature ? Dimension::temperature : Dimension::pressure;
      Interval& interval = is_temperature ? box.temperature : box.pressure;
      if (member.value.items.size() != 2 || (!is_temperature && member.key != "pressure")) {
        complain(member.key_place, "record-range",
                 fmt::format("'{}' is no interval of a range", member.key),
                 "temperature or pressure = [\"low\", \"high\"]");
        continue;
      }
      interval.low = bound(member.value.items[0], dimension);
      interval.high = bound(member.value.items[1], dimension);
      written += fmt::format("{}{} to {}", first ? "" : " and ", member.value.items[0].text,
                             member.value.items[1].text);
      first = false;
    }
    return box;
  }

  double bound(const Node& node, Dimension dimension) {
    const std::array wanted{dimension};
    const auto parsed = parse_quantity(
        node.text, {.dimensions = wanted, .absolute_by_nature = true, .example = "40 degC"});
    if (const auto* q = std::get_if<ParsedQuantity>(&parsed)) return q->value;
    complain(node.place, "record-range", std::get<GrammarFault>(parsed).message,
             "a quantity such as 40 degC");
    return 0;
  }

  RecordStore& store_;
  const Node& table_;
  Findings& findings_;
};

std::string_view RecordStore::keep(std::string text) {
  return texts_.emplace_back(std::move(text));
}

Findings RecordStore::add(std::string_view text, const std::string& file) {
  all_text_ += text;
  auto document = parse_document(text, file, {.bytes = kLargestTable, .depth = 64});
  if (!document) return document.findings;
  Findings findings;
  for (const auto& member : document->members) {
    const bool sources = member.key == "source";
    if (!sources && member.key != "record") {
      findings.push_back(fault(member.key_place, "unknown-key",
                               fmt::format("'{}' is not expected here", member.key),
                               "[[record]] or [[source]]"));
      continue;
    }
    for (const auto& item : member.value.items) {
      RecordReader reader(*this, item, findings);
      sources ? reader.read_source() : reader.read_record();
    }
  }
  return findings;
}

Findings RecordStore::finish() {
  const auto by_key = [](const auto& a, const auto& b) { return a.key < b.key; };
  std::sort(records_.begin(), records_.end(), by_key);
  std::sort(sources_.begin(), sources_.end(), by_key);
  Findings findings;
  for (const auto& record : records_) {
    const Place& place = places_.find(record.key)->second;
    const bool has_source = std::any_of(sources_.begin(), sources_.end(),
                                        [&](const Source& s) { return s.key == record.source; });
    if (!has_source) {
      findings.push_back(fault(
          place, "record-source",
          fmt::format("'{}' cites '{}', which no [[source]] explains", record.key, record.source),
          "a [[source]] of that key"));
    }
    for (const auto part : record.parts) {
      if (places_.contains(part)) continue;
      findings.push_back(
          fault(place, "record-parts",
                fmt::format("'{}' names the part '{}', which is no record", record.key, part),
                "the key of a record"));
    }
  }
  digest_ = sha1_digest(all_text_);
  return findings;
}

std::string sha1_digest(std::string_view text) {
  boost::uuids::detail::sha1 hash;
  hash.process_bytes(text.data(), text.size());
  boost::uuids::detail::sha1::digest_type words;
  hash.get_digest(words);
  std::string hex = "sha1:";
  for (const auto word : words) hex += fmt::format("{:08x}", word);
  return hex;
}

Findings read_directory(RecordStore& store, const std::string& directory) {
  namespace fs = std::filesystem;
  const auto unreadable = [](const std::string& path, std::string why) {
    return fault(Place{path, 0, 0, 1, ""}, "unreadable", std::move(why),
                 "a directory with the *.toml tables");
  };
  std::error_code error;
  std::vector<fs::path> files;
  for (const auto& entry : fs::directory_iterator(directory, error)) {
    if (entry.path().extension() == ".toml") files.push_back(entry.path());
  }
  if (error) return {unreadable(directory, error.message())};
  if (files.empty()) return {unreadable(directory, "there is no *.toml in it")};
  std::sort(files.begin(), files.end());
  Findings findings;
  for (const auto& path : files) {
    std::ifstream in(path, std::ios::binary);
    std::ostringstream text;
    text << in.rdbuf();
    if (!in) {
      findings.push_back(unreadable(path.string(), "the file cannot be read"));
      continue;
    }
    auto more = store.add(text.str(), path.string());
    findings.insert(findings.end(), more.begin(), more.end());
  }
  if (findings.empty()) findings = store.finish();
  return findings;
}

}  // namespace capsigh
