#include "section.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

namespace capsigh::recipe_detail {
namespace {

constexpr std::array kContentDimensions{Dimension::gas_volumes, Dimension::mass_concentration,
                                        Dimension::amount_concentration, Dimension::molality,
                                        Dimension::mass_fraction};

ContentMeasure measure_of(Dimension dimension) {
  switch (dimension) {
    case Dimension::mass_concentration: return ContentMeasure::mass_concentration;
    case Dimension::amount_concentration: return ContentMeasure::amount_concentration;
    case Dimension::molality: return ContentMeasure::molality;
    case Dimension::mass_fraction: return ContentMeasure::mass_fraction;
    default: return ContentMeasure::volumes;
  }
}

}  // namespace

std::string Section::full_key(const std::string& key) const {
  return name_.empty() ? key : name_ + "." + key;
}

void Section::complain(const Place& place, std::string code, std::string message,
                       std::string expected, std::string example) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  f.example = std::move(example);
  f.place = place;
  findings_.push_back(std::move(f));
}

const Member* Section::take(const std::string& key) {
  known_.push_back(key);
  return table_.find(key);
}

void Section::finish() {
  for (const auto& member : table_.members) {
    if (std::find(known_.begin(), known_.end(), member.key) != known_.end()) continue;
    const auto near = nearest_name(member.key, known_);
    const std::string where = name_.empty() ? "a recipe" : fmt::format("[{}]", name_);
    complain(member.key_place, "unknown-key",
             near ? fmt::format("{} has no '{}'; did you mean '{}'?", where, member.key, *near)
                  : fmt::format("{} has no '{}'", where, member.key),
             fmt::format("{}", fmt::join(known_, ", ")), "");
  }
}

std::optional<ParsedQuantity> Section::quantity(const Member& member,
                                                std::span<const Dimension> dimensions,
                                                std::string_view example, bool absolute_by_nature,
                                                Sign sign) {
  const Node& node = member.value;
  const std::string shown = fmt::format("{} = \"{}\"", member.key, example);
  if (node.kind != Node::Kind::text) {
    complain(node.place, "not-a-quantity",
             fmt::format("'{}' is {}, not a quantity", full_key(member.key), kind_name(node.kind)),
             "a text with number and unit", shown);
    return std::nullopt;
  }
  const auto parsed = parse_quantity(
      node.text,
      {.dimensions = dimensions, .absolute_by_nature = absolute_by_nature, .example = shown});
  if (const auto* fault = std::get_if<GrammarFault>(&parsed)) {
    complain(place_inside(node, fault->offset, fault->length), fault->code,
             fmt::format("'{}': {}", full_key(member.key), fault->message), fault->expected,
             fault->example);
    return std::nullopt;
  }
  const auto& q = std::get<ParsedQuantity>(parsed);
  const bool bad =
      (sign == Sign::positive && !(q.value > 0)) || (sign == Sign::not_negative && q.value < 0);
  if (bad) {
    complain(node.place, "impossible-value",
             fmt::format("'{}' cannot be \"{}\"", full_key(member.key), node.text),
             sign == Sign::positive ? "a value above zero (above 0 K for a temperature)"
                                    : "zero or more",
             shown);
    return std::nullopt;
  }
  if (sign != Sign::any && q.plus_minus && *q.plus_minus > q.value) {
    const std::size_t sign_at = node.text.find("±");
    const std::size_t offset = sign_at == std::string::npos ? node.text.find('+') : sign_at;
    complain(place_inside(node, offset, node.text.size() - offset), "plus-minus-too-large",
             fmt::format("'{}': the ± is larger than the value, which cannot be below zero",
                         full_key(member.key)),
             "a limit of error smaller than the value", shown);
    return std::nullopt;
  }
  recipe_.inputs.emplace_back(full_key(member.key), node.text);
  return q;
}

template <class Q>
Given<Q> Section::given(const Member& member, Dimension dimension, std::string_view example,
                        bool absolute_by_nature, Sign sign) {
  Given<Q> g;
  g.source = {member.value.text, member.value.place};
  const std::array only{dimension};
  if (const auto q = quantity(member, only, example, absolute_by_nature, sign)) {
    g.value = from_si<Q>(q->value);
    if (q->plus_minus) g.plus_minus = from_si<Difference<Q>>(*q->plus_minus);
  }
  return g;
}

template <class Q>
std::optional<Given<Q>> Section::taken(const std::string& key, Dimension dimension,
                                       std::string_view example, Sign sign) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  return given<Q>(*member, dimension, example, false, sign);
}

std::optional<Given<Temperature>> Section::temperature(const std::string& key,
                                                       std::string_view example) {
  return taken<Temperature>(key, Dimension::temperature, example, Sign::positive);
}

std::optional<Given<Pressure>> Section::absolute_pressure(const std::string& key,
                                                          std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  return given<Pressure>(*member, Dimension::pressure, example, true, Sign::positive);
}

std::optional<Given<Volume>> Section::volume(const std::string& key, std::string_view example) {
  return taken<Volume>(key, Dimension::volume, example, Sign::positive);
}

std::optional<Given<Length>> Section::length(const std::string& key, std::string_view example,
                                             Sign sign) {
  return taken<Length>(key, Dimension::length, example, sign);
}

std::optional<Given<Fraction>> Section::share(const std::string& key, std::string_view example,
                                              Sign sign) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  auto g = given<Fraction>(*member, Dimension::fraction, example, false, sign);
  if (g.value && g.value->value() > 1) {
    complain(member->value.place, "impossible-value",
             fmt::format("'{}' is more than 100 %", full_key(key)), "0 to 100 %",
             fmt::format("{} = \"{}\"", key, example));
    g.value.reset();
  }
  return g;
}

std::optional<GivenPressure> Section::pressure(const std::string& key, std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  GivenPressure g;
  g.source = {member->value.text, member->value.place};
  constexpr std::array only{Dimension::pressure};
  const auto q = quantity(*member, only, example, false, Sign::any);
  if (!q) return g;
  if (q->plus_minus) g.plus_minus = from_si<Pressure>(*q->plus_minus);
  if (q->reference == Reference::gauge) {
    g.value = from_si<GaugePressure>(q->value);
  } else if (q->value > q->plus_minus.value_or(0)) {
    g.value = from_si<Pressure>(q->value);
  } else {
    complain(member->value.place, "impossible-value",
             fmt::format("'{}' cannot be \"{}\"", full_key(key), member->value.text),
             "an absolute pressure above zero, also at the lower end of its ±",
             fmt::format("{} = \"{}\"", key, example));
  }
  return g;
}

std::optional<LocatedText> Section::text(const std::string& key, std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  if (key == "basis" && member->value.kind == Node::Kind::boolean && member->value.boolean) {
    // basis = true, without its quotes, can only mean one thing.
    recipe_.inputs.emplace_back(full_key(key), "true");
    return LocatedText{"true", member->value.place};
  }
  if (member->value.kind != Node::Kind::text) {
    complain(member->value.place, "not-a-text",
             fmt::format("'{}' is {}, not a text", full_key(key), kind_name(member->value.kind)),
             "a text in quotes", fmt::format("{} = \"{}\"", key, example));
    return std::nullopt;
  }
  recipe_.inputs.emplace_back(full_key(key), member->value.text);
  return LocatedText{member->value.text, member->value.place};
}

std::optional<Given<MassDensity>> Section::density(const std::string& key,
                                                   std::string_view example) {
  return taken<MassDensity>(key, Dimension::density, example, Sign::positive);
}

GivenSolute Section::amount_of(const Member& member, std::span<const Dimension> dimensions,
                               std::string_view example) {
  GivenSolute s;
  s.name = {member.key, member.key_place};
  s.amount.source = {member.value.text, member.value.place};
  if (const auto q = quantity(member, dimensions, example, false, Sign::not_negative)) {
    switch (q->dimension) {
      case Dimension::volume_fraction: s.measure = GivenSoluteMeasure::volume_fraction; break;
      case Dimension::mass_concentration: s.measure = GivenSoluteMeasure::mass_concentration; break;
      case Dimension::amount_concentration:
        s.measure = GivenSoluteMeasure::amount_concentration;
        break;
      default: s.measure = GivenSoluteMeasure::mass_fraction;
    }
    s.amount.value = Fraction(q->value);
    if (q->plus_minus) s.amount.plus_minus = Fraction(*q->plus_minus);
  }
  return s;
}

std::optional<GivenSolute> Section::solute(const std::string& key) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  constexpr std::array brix{Dimension::sugar_scale, Dimension::mass_fraction, Dimension::fraction};
  constexpr std::array extract{Dimension::mass_fraction, Dimension::sugar_scale,
                               Dimension::mass_concentration, Dimension::amount_concentration};
  constexpr std::array ethanol{Dimension::volume_fraction, Dimension::mass_fraction,
                               Dimension::mass_concentration};
  constexpr std::array others{Dimension::mass_fraction, Dimension::mass_concentration,
                              Dimension::amount_concentration};
  if (key == "brix") return amount_of(*member, brix, "10.5 %");
  if (key == "ethanol") return amount_of(*member, ethanol, "5 % v/v");
  if (key == "extract") return amount_of(*member, extract, "4.2 % w/w");
  return amount_of(*member, others, "12 g/L");
}

std::vector<GivenSolute> Section::salts() {
  constexpr std::array dimensions{Dimension::mass_concentration, Dimension::amount_concentration,
                                  Dimension::mass_fraction};
  std::vector<GivenSolute> all;
  for (const auto& member : table_.members) {
    all.push_back(amount_of(member, dimensions, "120 mg/L"));
    all.back().salt = true;
  }
  return all;
}

std::optional<Given<Mass>> Section::mass(const std::string& key, std::string_view example) {
  return taken<Mass>(key, Dimension::mass, example, Sign::positive);
}

std::optional<Given<Duration>> Section::duration(const std::string& key, std::string_view example,
                                                 Sign sign) {
  return taken<Duration>(key, Dimension::duration, example, sign);
}

std::vector<Given<Duration>> Section::durations(const Member& member, std::string_view example) {
  std::vector<Given<Duration>> all;
  if (member.value.kind != Node::Kind::array) {
    all.push_back(given<Duration>(member, Dimension::duration, example, false, Sign::not_negative));
    return all;
  }
  for (const auto& item : member.value.items) {
    const Member one{member.key, member.key_place, item};
    all.push_back(given<Duration>(one, Dimension::duration, example, false, Sign::not_negative));
  }
  return all;
}

std::optional<Given<Area>> Section::area(const std::string& key, std::string_view example) {
  return taken<Area>(key, Dimension::area, example, Sign::positive);
}

std::optional<Given<VolumeFlow>> Section::volume_flow(const std::string& key,
                                                      std::string_view example, Sign sign) {
  return taken<VolumeFlow>(key, Dimension::volume_flow, example, sign);
}

std::optional<Given<MassConcentration>> Section::mass_concentration(const std::string& key,
                                                                    std::string_view example) {
  return taken<MassConcentration>(key, Dimension::mass_concentration, example, Sign::positive);
}

std::optional<Given<Fraction>> Section::multiple(const std::string& key, std::string_view example) {
  return taken<Fraction>(key, Dimension::fraction, example, Sign::not_negative);
}

void Section::air(const std::string& key, std::optional<Given<Fraction>>& share_out,
                  std::optional<Given<Volume>>& volume_out) {
  const Member* member = take(key);
  if (member == nullptr) return;
  const Node& node = member->value;
  const std::string_view text = node.text;
  const bool by_volume = node.kind == Node::Kind::text &&
                         text.find('%') == std::string_view::npos &&
                         text.find('L') != std::string_view::npos;
  if (by_volume) {
    volume_out = given<Volume>(*member, Dimension::volume, "1.2 mL", false, Sign::not_negative);
  } else {
    share_out = share(key, "30 %");
  }
}

std::optional<GivenContent> Section::content_of(const std::string& key, const std::string& gas) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  auto c = content(*member, "30 ug/L");
  c.gas.text = gas;
  return c;
}

GivenTarget Section::target(const Member& member) {
  GivenTarget t;
  if (member.value.kind != Node::Kind::table) {
    t.content = content(member);
    return t;
  }
  Section limits(member.value, full_key(member.key), recipe_, findings_);
  for (const bool maximum : {true, false}) {
    const Member* limit = limits.take(maximum ? "max" : "min");
    if (limit == nullptr) continue;
    t.content = limits.content(*limit, "50 ug/L");
    t.content.gas = {member.key, member.key_place};
    t.is_maximum = maximum;
    t.is_minimum = !maximum;
  }
  limits.finish();
  if (!t.is_maximum && !t.is_minimum) {
    complain(member.value.place, "target-empty",
             fmt::format("'{}' names no limit", full_key(member.key)), "max or min",
             member.key + " = { max = \"50 ug/L\" }");
    t.content.gas = {member.key, member.key_place};
  }
  if (limits.table_.find("max") != nullptr && limits.table_.find("min") != nullptr) {
    complain(member.value.place, "target-two-limits",
             fmt::format("'{}' has both a max and a min", full_key(member.key)),
             "one of them, or a content with its tolerance",
             member.key + " = \"3.7 vol ± 0.1 vol\"");
  }
  return t;
}

std::vector<GivenTarget> Section::targets() {
  std::vector<GivenTarget> all;
  for (const auto& member : table_.members) {
    if (std::find(known_.begin(), known_.end(), member.key) != known_.end()) continue;
    all.push_back(target(member));
  }
  return all;
}

GivenContent Section::content(const Member& member, std::string_view example) {
  GivenContent c;
  c.gas = {member.key, member.key_place};
  c.amount.source = {member.value.text, member.value.place};
  if (const auto q = quantity(member, kContentDimensions, example, false, Sign::positive)) {
    c.measure = measure_of(q->dimension);
    c.amount.value = Fraction(q->value);
    if (q->plus_minus) c.amount.plus_minus = Fraction(*q->plus_minus);
  }
  return c;
}

std::vector<GivenContent> Section::contents() {
  std::vector<GivenContent> all;
  for (const auto& member : table_.members) all.push_back(content(member));
  return all;
}

std::vector<Given<Temperature>> Section::temperatures(const std::string& key,
                                                      std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return {};
  const Node& node = member->value;
  std::vector<Given<Temperature>> all;
  const auto read = [&](const Node& item) {
    const Member one{key, member->key_place, item};
    all.push_back(given<Temperature>(one, Dimension::temperature, example, false, Sign::positive));
  };
  if (node.kind == Node::Kind::text) {
    read(node);
  } else if (node.kind == Node::Kind::array && !node.items.empty()) {
    for (const auto& item : node.items) read(item);
  } else {
    const bool empty = node.kind == Node::Kind::array;
    complain(node.place, "not-a-list",
             empty ? fmt::format("'{}' lists nothing", full_key(key))
                   : fmt::format("'{}' is {}, not a list of temperatures", full_key(key),
                                 kind_name(node.kind)),
             "temperatures in brackets", fmt::format("{} = [\"{}\", \"20 degC\"]", key, example));
  }
  return all;
}

std::optional<Given<Compliance>> Section::stretch(const std::string& key,
                                                  std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  return given<Compliance>(*member, Dimension::stretch, example, false, Sign::not_negative);
}

std::vector<GivenTransmission> Section::transmissions() {
  std::vector<GivenTransmission> all;
  for (const auto& member : table_.members) {
    all.push_back(
        {{member.key, member.key_place},
         given<Transmission>(member, Dimension::transmission, "0.02 mL/d", false, Sign::positive)});
  }
  return all;
}

std::vector<GivenShare> Section::shares() {
  std::vector<GivenShare> all;
  for (const auto& member : table_.members) {
    GivenShare s;
    s.name = {member.key, member.key_place};
    const bool text = member.value.kind == Node::Kind::text;
    if (text && (member.value.text == "rest" || member.value.text == "find")) {
      s.rest = member.value.text == "rest";
      s.find = !s.rest;
      s.share.source = {member.value.text, member.value.place};
      recipe_.inputs.emplace_back(full_key(member.key), member.value.text);
    } else if (auto g = share(member.key, "99.9 %")) {
      s.share = *g;
    }
    all.push_back(std::move(s));
  }
  return all;
}

std::vector<std::pair<std::string, std::string>> Section::free_text() {
  std::vector<std::pair<std::string, std::string>> all;
  for (const auto& member : table_.members) {
    if (const auto t = text(member.key, "QB-017 rev C")) all.emplace_back(member.key, t->text);
  }
  return all;
}

}  // namespace capsigh::recipe_detail
