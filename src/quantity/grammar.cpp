#include "capsigh/quantity/grammar.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <vector>

#include "capsigh/quantity/finding.hpp"

namespace capsigh {
namespace {

using enum Dimension;

// What people write for a unit that is called otherwise here.
struct Alias {
  std::string_view written;
  std::string_view meant;
};
constexpr auto kAliases = std::to_array<Alias>({
    {"C", "degC"},
    {"F", "degF"},
    {"celsius", "degC"},
    {"gal", "US gal' or 'imp gal"},
    {"fl oz", "US fl oz' or 'imp fl oz"},
    {"bbl", "US bbl' or 'UK bbl"},
    {"l", "L"},
    {"ml", "mL"},
    {"hl", "hL"},
    {"cl", "cL"},
    {"g/l", "g/L"},
    {"mg/l", "mg/L"},
    {"volumes", "vol"},
    {"v/v", "vol"},
    {"feet", "ft"},
    {"inch", "in"},
    {"lbs", "lb"},
    {"Bar", "bar"},
    {"PSI", "psi"},
    {"sec", "s"},
    {"minutes", "min"},
    {"hr", "h"},
    {"hours", "h"},
    {"day", "d"},
    {"days", "d"},
    {"week", "wk"},
    {"weeks", "wk"},
    {"hl/h", "hL/h"},
    {"l/min", "L/min"},
    {"cm²", "cm2"},
    {"m²", "m2"},
    {"m³/h", "m3/h"},
});

constexpr bool is_space(char c) { return c == ' ' || c == '\t'; }
constexpr bool is_digit(char c) { return c >= '0' && c <= '9'; }

// A position in the text; all reading goes forward through it.
struct Scanner {
  std::string_view text;
  std::size_t at = 0;

  void skip_spaces() {
    while (at < text.size() && is_space(text[at])) ++at;
  }
  [[nodiscard]] bool done() const { return at >= text.size(); }
  [[nodiscard]] std::string_view rest() const { return text.substr(at); }
};

std::string join_units(std::span<const Dimension> dimensions) {
  std::string list;
  for (const auto& unit : unit_table()) {
    if (std::find(dimensions.begin(), dimensions.end(), unit.dimension) == dimensions.end()) {
      continue;
    }
    if (!list.empty()) list += ", ";
    list += unit.text;
  }
  return list;
}

std::string join_names(std::span<const Dimension> dimensions) {
  std::string list;
  for (const auto d : dimensions) {
    if (!list.empty()) list += " or ";
    list += dimension_name(d);
  }
  return list;
}

GrammarFault fault(std::size_t offset, std::size_t length, std::string code, std::string message,
                   const Wanted& wanted) {
  return {offset,
          std::max<std::size_t>(length, 1),
          std::move(code),
          std::move(message),
          fmt::format("a number and a unit: {}", join_units(wanted.dimensions)),
          std::string(wanted.example)};
}

// The plus-minus sign at the scanner, in either spelling: its length, or 0.
std::size_t plus_minus_length(std::string_view rest) {
  if (rest.starts_with("±")) return std::string_view("±").size();
  if (rest.starts_with("+/-")) return 3;
  return 0;
}

// The second number of a fraction such as 3/4 (pipe sizes), or 0.
double read_divisor(Scanner& in) {
  const std::string_view rest = in.rest();
  if (rest.size() < 2 || rest[0] != '/' || !is_digit(rest[1])) return 0;
  double divisor = 0;
  const auto [end, error] = std::from_chars(rest.data() + 1, rest.data() + rest.size(), divisor);
  if (error != std::errc{} || !(divisor > 0)) return 0;
  in.at += static_cast<std::size_t>(end - rest.data());
  return divisor;
}

std::variant<double, GrammarFault> read_number(Scanner& in, const Wanted& wanted) {
  in.skip_spaces();
  const std::size_t start = in.at;
  std::string_view rest = in.rest();
  const bool sign = !rest.empty() && (rest.front() == '+' || rest.front() == '-');
  const std::string_view digits = sign ? rest.substr(1) : rest;
  if (digits.empty() || !(is_digit(digits.front()) || digits.front() == '.')) {
    return fault(start, rest.size(), "number-missing",
                 rest.empty() ? "there is no number here"
                              : fmt::format("'{}' does not begin with a number", rest),
                 wanted);
  }
  if (rest.front() == '+') rest.remove_prefix(1);
  double value = 0;
  const auto [end, error] = std::from_chars(rest.data(), rest.data() + rest.size(), value);
  const auto length = static_cast<std::size_t>(end - in.text.data()) - start;
  if (error == std::errc::result_out_of_range) {
    return fault(start, length, "number-out-of-range",
                 fmt::format("'{}' is too large or too small for any real quantity",
                             in.text.substr(start, length)),
                 wanted);
  }
  if (error != std::errc{}) {
    return fault(start, rest.size(), "number-missing",
                 fmt::format("'{}' does not begin with a number", rest), wanted);
  }
  in.at = start + length;
  if (const double divisor = read_divisor(in); divisor > 0) value /= divisor;
  const bool comma =
      in.at + 1 < in.text.size() && in.text[in.at] == ',' && is_digit(in.text[in.at + 1]);
  std::size_t behind = 0;
  while (comma && in.at + 1 + behind < in.text.size() && is_digit(in.text[in.at + 1 + behind])) {
    ++behind;
  }
  if (comma && behind == 3 && std::abs(value) >= 1) {
    return fault(start, length + 1 + behind, "comma-in-number",
                 fmt::format("a comma is neither a decimal sign nor a separator of thousands here: "
                             "write {0}{1} or {0}.{1}",
                             in.text.substr(start, length), in.text.substr(in.at + 1, behind)),
                 wanted);
  }
  if (comma) {
    return fault(start, length + 2, "decimal-comma",
                 "the decimal sign is a point here, not a comma", wanted);
  }
  return value;
}

// The unit's text as written up to ± or the end, runs of spaces made one.
std::string read_unit_text(Scanner& in, std::size_t& start, std::size_t& length) {
  in.skip_spaces();
  start = in.at;
  std::string text;
  while (!in.done() && plus_minus_length(in.rest()) == 0) {
    const char c = in.text[in.at++];
    if (is_space(c)) {
      if (!text.empty() && text.back() != ' ') text += ' ';
    } else {
      text += c;
    }
  }
  length = in.at - start;
  while (!text.empty() && text.back() == ' ') {
    text.pop_back();
  }
  while (length > 0 && is_space(in.text[start + length - 1])) --length;
  return text;
}

Reference split_reference(std::string& unit_text) {
  const std::size_t space = unit_text.rfind(' ');
  if (space == std::string::npos) return Reference::none;
  const std::string word = unit_text.substr(space + 1);
  Reference reference = Reference::none;
  if (word == "gauge") reference = Reference::gauge;
  if (word == "abs" || word == "absolute") reference = Reference::absolute;
  if (reference != Reference::none) unit_text.resize(space);
  return reference;
}

const Unit* unit_among(std::string_view text, std::span<const Dimension> dimensions) {
  for (const auto d : dimensions) {
    if (const Unit* unit = find_unit(text, d)) return unit;
  }
  return nullptr;
}

GrammarFault unit_fault(const std::string& unit_text, std::size_t start, std::size_t length,
                        const Wanted& wanted) {
  if (unit_text.empty()) {
    return fault(start, 1, "unit-missing", "the number has no unit", wanted);
  }
  for (const std::string_view broken : {"Â", "+-", "\xEF\xBF\xBD", "?"}) {
    if (unit_text.find(broken) == std::string::npos) continue;
    return fault(start, length, "plus-minus-broken",
                 fmt::format("'{}' is not understood; if a ± came through broken here, write '+/-'",
                             unit_text),
                 wanted);
  }
  if (unit_text == "°") {
    return fault(start, length, "degree-of-what", "'°' alone does not say which degree is meant",
                 wanted);
  }
  const auto elsewhere = std::find_if(unit_table().begin(), unit_table().end(),
                                      [&](const Unit& u) { return u.text == unit_text; });
  if (elsewhere != unit_table().end()) {
    return fault(start, length, "unit-wrong-kind",
                 fmt::format("'{}' is a unit of {}, not of {}", unit_text,
                             dimension_name(elsewhere->dimension), join_names(wanted.dimensions)),
                 wanted);
  }
  for (const auto& alias : kAliases) {
    if (alias.written != unit_text) continue;
    return fault(
        start, length, "unit-unknown",
        fmt::format("'{}' is no unit known here; did you mean '{}'?", unit_text, alias.meant),
        wanted);
  }
  std::vector<std::string> names;
  for (const auto& unit : unit_table()) {
    if (unit_among(unit.text, wanted.dimensions) != nullptr) names.emplace_back(unit.text);
  }
  const auto near = nearest_name(unit_text, names);
  return fault(start, length, "unit-unknown",
               near
                   ? fmt::format("'{}' is no unit known here; did you mean '{}'?", unit_text, *near)
                   : fmt::format("'{}' is no unit known here", unit_text),
               wanted);
}

// Rules of a pressure's reference; nullopt when all is well.
std::optional<GrammarFault> reference_fault(const ParsedQuantity& q, std::size_t start,
                                            std::size_t length, const Wanted& wanted) {
  if (q.dimension != pressure) {
    if (q.reference == Reference::none) return std::nullopt;
    return fault(start, length, "reference-misplaced", "only a pressure is gauge or abs", wanted);
  }
  if (wanted.absolute_by_nature) {
    if (q.reference != Reference::gauge) return std::nullopt;
    return fault(start, length, "reference-misplaced",
                 "this pressure is absolute by nature and cannot be a gauge reading", wanted);
  }
  if (q.reference != Reference::none) return std::nullopt;
  auto f = fault(start, length, "pressure-reference-missing",
                 "the pressure does not say whether it is a gauge reading or absolute", wanted);
  f.expected = "'gauge' (what a gauge shows, 0 in the open) or 'abs' behind the unit";
  return f;
}

std::variant<double, GrammarFault> read_plus_minus(Scanner& in, Dimension of,
                                                   const Wanted& wanted) {
  const auto number = read_number(in, wanted);
  if (const auto* bad = std::get_if<GrammarFault>(&number)) return *bad;
  std::size_t start = 0;
  std::size_t length = 0;
  std::string text = read_unit_text(in, start, length);
  split_reference(text);
  const Dimension difference = of == temperature ? temperature_difference : of;
  const Unit* unit = find_unit(text, difference);
  // "10.5 % ± 0.1 Brix": two spellings of the same per cent.
  if (unit == nullptr && (of == fraction || of == mass_fraction)) {
    unit = unit_among(text, wanted.dimensions);
  }
  if (unit == nullptr) {
    const std::array only{difference};
    Wanted narrowed = wanted;
    narrowed.dimensions = only;
    return unit_fault(text, start, length, narrowed);
  }
  if (!in.done()) {
    return fault(in.at, in.text.size() - in.at, "text-left-over",
                 fmt::format("'{}' was not expected here", in.rest()), wanted);
  }
  const double value = std::get<double>(number) * unit->factor;
  if (!(value > 0)) {
    return fault(start, length, "plus-minus-not-positive",
                 "what stands behind ± must be greater than zero", wanted);
  }
  return value;
}

}  // namespace

std::variant<ParsedQuantity, GrammarFault> parse_quantity(std::string_view text,
                                                          const Wanted& wanted) {
  Scanner in{text};
  const auto number = read_number(in, wanted);
  if (const auto* bad = std::get_if<GrammarFault>(&number)) return *bad;
  std::size_t start = 0;
  std::size_t length = 0;
  std::string unit_text = read_unit_text(in, start, length);
  ParsedQuantity q;
  q.reference = split_reference(unit_text);
  const Unit* unit = unit_among(unit_text, wanted.dimensions);
  if (unit == nullptr) return unit_fault(unit_text, start, length, wanted);
  q.dimension = unit->dimension;
  if (unit->reference != Reference::none) {
    if (q.reference != Reference::none && q.reference != unit->reference) {
      return fault(start, length, "reference-contradicts",
                   fmt::format("'{}' and the word behind it contradict each other", unit->text),
                   wanted);
    }
    q.reference = unit->reference;
  }
  q.value = std::get<double>(number) * unit->factor + unit->offset;
  if (!std::isfinite(q.value)) {
    return fault(0, text.size(), "number-out-of-range", "the quantity is too large", wanted);
  }
  if (auto bad = reference_fault(q, start, length, wanted)) return *bad;
  if (const std::size_t sign = plus_minus_length(in.rest()); sign > 0) {
    in.at += sign;
    const auto tolerance = read_plus_minus(in, q.dimension, wanted);
    if (const auto* bad = std::get_if<GrammarFault>(&tolerance)) return *bad;
    q.plus_minus = std::get<double>(tolerance);
  }
  return q;
}

double in_unit(double si, const Unit& unit) { return (si - unit.offset) / unit.factor; }
double difference_in_unit(double si, const Unit& unit) { return si / unit.factor; }

namespace {

// "-0.00" says no more than "0.00".
std::string without_negative_zero(std::string text) {
  const bool zero = text.find_first_of("123456789") == std::string::npos;
  if (zero && text.starts_with('-')) text.erase(0, 1);
  return text;
}

int decimals_for(double magnitude, int digits) {
  const int exponent = static_cast<int>(std::floor(std::log10(magnitude)));
  return digits - 1 - exponent;
}

std::string fixed(double value, int decimals) {
  if (decimals >= 0) return without_negative_zero(fmt::format("{:.{}f}", value, decimals));
  const double step = std::pow(10.0, -decimals);
  return without_negative_zero(fmt::format("{:.0f}", std::round(value / step) * step));
}

constexpr int kUncertaintyDigits = 2;  // JCGM 100, 7.2.6: at most two significant digits
constexpr int kMachineDigits = 9;

}  // namespace

Rounded rounded(double value, double expanded_uncertainty) {
  constexpr int digits_without_doubt = 4;
  constexpr int most_digits = 5;
  if (!(expanded_uncertainty > 0)) return {significant(value, digits_without_doubt), ""};
  int decimals = decimals_for(expanded_uncertainty, kUncertaintyDigits);
  // 0.0996 rounds to 0.10: one decimal fewer keeps two significant digits.
  const double at_decimals =
      std::round(expanded_uncertainty * std::pow(10.0, decimals)) / std::pow(10.0, decimals);
  decimals = decimals_for(at_decimals * (1 + 1e-12), kUncertaintyDigits);
  // A doubt that would call for more digits comes from conversions alone: it would pretend to a
  // knowledge that nobody has.
  if (value != 0 && decimals > decimals_for(std::abs(value), most_digits)) {
    return {significant(value, digits_without_doubt), ""};
  }
  return {fixed(value, decimals), fixed(expanded_uncertainty, decimals)};
}

namespace {

std::string rounded_by(double value, double doubt, double (*direction)(double)) {
  if (!(doubt > 0)) return significant(value, kUncertaintyDigits + 2);
  const int decimals = decimals_for(doubt, kUncertaintyDigits);
  const double step = std::pow(10.0, -decimals);
  // What is a multiple already, but for the last bits, stays.
  constexpr double slack = 1e-9;
  return fixed(direction(value / step + (direction(0.5) > 0 ? -slack : slack)) * step, decimals);
}

}  // namespace

std::string rounded_up(double value, double doubt) {
  return rounded_by(value, doubt, [](double x) { return std::ceil(x); });
}

std::string rounded_down(double value, double doubt) {
  return rounded_by(value, doubt, [](double x) { return std::floor(x); });
}

std::string significant(double value, int digits) {
  if (value == 0) return fixed(0, digits - 1);
  const double magnitude = std::abs(value);
  constexpr double small = 1e-4;
  if (magnitude < small) return fmt::format("{:.{}e}", value, digits - 1);
  int decimals = decimals_for(magnitude, digits);
  const double at_decimals =
      std::round(magnitude * std::pow(10.0, decimals)) / std::pow(10.0, decimals);
  decimals = decimals_for(at_decimals * (1 + 1e-12), digits);
  return fixed(value, decimals);
}

std::string shortest(double value) { return fmt::format("{}", value == 0 ? 0.0 : value); }

namespace {

double kept_digits(double value, int digits) {
  if (value == 0) return 0;
  const std::string text = fmt::format("{:.{}e}", value, digits - 1);
  double kept = 0;
  std::from_chars(text.data(), text.data() + text.size(), kept);
  return kept;
}

}  // namespace

double for_machines(double value) { return kept_digits(value, kMachineDigits); }

double doubt_for_machines(double value) {
  constexpr int digits = 6;
  return kept_digits(value, digits);
}

}  // namespace capsigh
