// The keys about readings: [gauge], [card] and the charts of [judging].
#include <fmt/format.h>

#include <array>

#include "section.hpp"

namespace capsigh::recipe_detail {
namespace {

constexpr std::string_view kPlusMinus = "±";

bool begins_with_plus_minus(std::string_view text) {
  return text.starts_with(kPlusMinus) || text.starts_with("+/-") || text.starts_with("+-");
}

template <class Q>
Given<Q> given_of(const Member& member, const std::optional<ParsedQuantity>& parsed) {
  Given<Q> g;
  g.source = {member.value.text, member.value.place};
  if (!parsed) return g;
  g.value = from_si<Q>(parsed->value);
  if (parsed->plus_minus) g.plus_minus = from_si<Difference<Q>>(*parsed->plus_minus);
  return g;
}

}  // namespace

const Node* Section::table(const std::string& key) {
  const Member* member = take(key);
  if (member == nullptr) return nullptr;
  if (member->value.kind == Node::Kind::table) return &member->value;
  complain(member->value.place, "not-a-section",
           fmt::format("'{}' is {}, not a section", key, kind_name(member->value.kind)),
           fmt::format("[{}] and its keys below", key), fmt::format("[{}]", key));
  return nullptr;
}

const Node* Section::group(const std::string& key, const std::string& example) {
  const Member* member = take(key);
  if (member == nullptr) return nullptr;
  if (member->value.kind == Node::Kind::table) return &member->value;
  complain(member->value.place, "not-a-section",
           fmt::format("'{}' is {}, not a {{ }} group", key, kind_name(member->value.kind)),
           "a { } group of keys", example);
  return nullptr;
}

// "± 0.02 bar" is read as "0 bar gauge ± 0.02 bar".
std::optional<ParsedQuantity> Section::error_of(const Member& member, Dimension dimension,
                                                std::string_view zero, std::string_view example) {
  const Node& node = member.value;
  const std::string shown = fmt::format("{} = \"{}\"", member.key, example);
  if (node.kind != Node::Kind::text || !begins_with_plus_minus(node.text)) {
    complain(node.place, "not-a-limit-of-error",
             node.kind == Node::Kind::text
                 ? fmt::format("'{}' says how far the instrument may be off: it begins with ±",
                               full_key(member.key))
                 : fmt::format("'{}' is {}, not a limit of error", full_key(member.key),
                               kind_name(node.kind)),
             "± (or +/-), a number and a unit", shown);
    return std::nullopt;
  }
  const std::array only{dimension};
  const std::string text = std::string(zero) + node.text;
  const auto parsed = parse_quantity(text, {.dimensions = only, .example = shown});
  if (const auto* fault = std::get_if<GrammarFault>(&parsed)) {
    const std::size_t offset = fault->offset < zero.size() ? 0 : fault->offset - zero.size();
    complain(place_inside(node, offset, fault->length), fault->code,
             fmt::format("'{}': {}", full_key(member.key), fault->message), fault->expected, shown);
    return std::nullopt;
  }
  recipe_.inputs.emplace_back(full_key(member.key), node.text);
  return std::get<ParsedQuantity>(parsed);
}

std::optional<Given<Pressure>> Section::pressure_error(const std::string& key,
                                                       std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  return given_of<Pressure>(*member,
                            error_of(*member, Dimension::pressure, "0 bar gauge ", example));
}

std::optional<Given<TemperatureDifference>> Section::temperature_error(const std::string& key,
                                                                       std::string_view example) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  return given_of<TemperatureDifference>(
      *member, error_of(*member, Dimension::temperature_difference, "0 K ", example));
}

// A difference of pressures says neither gauge nor abs.
std::optional<Given<Pressure>> Section::pressure_step(const std::string& key,
                                                      std::string_view example, Sign sign) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  constexpr std::array only{Dimension::pressure};
  if (member->value.kind == Node::Kind::text) {
    const auto parsed =
        parse_quantity(member->value.text, {.dimensions = only, .example = example});
    const auto* q = std::get_if<ParsedQuantity>(&parsed);
    if (q != nullptr && q->reference != Reference::none) {
      complain(member->value.place, "reference-misplaced",
               fmt::format("'{}' is a difference of pressures: it says neither gauge nor abs",
                           full_key(key)),
               "a number and a unit of pressure", fmt::format("{} = \"{}\"", key, example));
      return given_of<Pressure>(*member, std::nullopt);
    }
  }
  return given_of<Pressure>(*member, quantity(*member, only, example, true, sign));
}

std::optional<Given<TemperatureDifference>> Section::temperature_step(const std::string& key,
                                                                      std::string_view example,
                                                                      Sign sign) {
  const Member* member = take(key);
  if (member == nullptr) return std::nullopt;
  constexpr std::array only{Dimension::temperature_difference};
  return given_of<TemperatureDifference>(*member, quantity(*member, only, example, false, sign));
}

void Section::subgroup(ChartingSection& charting) {
  const Member* member = take("subgroup");
  if (member == nullptr) return;
  const Node& node = member->value;
  charting.subgroup_place = node.place;
  constexpr std::int64_t most = 25;  // where the tabled constants of control charts end
  if (node.kind == Node::Kind::integer && node.integer >= 1 && node.integer <= most) {
    charting.subgroup = static_cast<std::size_t>(node.integer);
    recipe_.inputs.emplace_back(full_key("subgroup"), std::to_string(node.integer));
  } else if (node.kind == Node::Kind::text && !node.text.empty()) {
    charting.subgroup_column = LocatedText{node.text, node.place};
    recipe_.inputs.emplace_back(full_key("subgroup"), node.text);
  } else {
    complain(node.place, "not-a-subgroup",
             fmt::format("'judging.subgroup' is {}, not a number of rows or the name of a column",
                         node.kind == Node::Kind::integer ? std::to_string(node.integer)
                                                          : std::string(kind_name(node.kind))),
             "1 to 25 consecutive rows, or a column whose text is the same throughout a subgroup",
             "subgroup = 5\nsubgroup = \"sample\"");
  }
}

void Section::group_by(ChartingSection& charting) {
  const Member* member = take("group_by");
  if (member == nullptr) return;
  const Node& node = member->value;
  const auto refuse = [&](const Node& at) {
    complain(at.place, "not-a-column", "'judging.group_by' names columns of the readings",
             "a name in quotes, or several in [ ]", "group_by = [\"line\", \"valve\"]");
  };
  const auto take_name = [&](const Node& name) {
    if (name.kind != Node::Kind::text || name.text.empty()) {
      refuse(name);
      return;
    }
    charting.group_by.push_back({name.text, name.place});
    recipe_.inputs.emplace_back(full_key("group_by"), name.text);
  };
  if (node.kind == Node::Kind::array) {
    for (const auto& item : node.items) take_name(item);
  } else {
    take_name(node);
  }
}

ChartingSection Section::charting() {
  ChartingSection charting;
  subgroup(charting);
  group_by(charting);
  if (const Node* columns =
          group("columns", "columns = { \"Temp (F)\" = \"temperature [degF]\" }")) {
    for (const auto& member : columns->members) {
      const Node& meaning = member.value;
      if (meaning.kind != Node::Kind::text) {
        complain(meaning.place, "not-a-text",
                 fmt::format("what the column '{}' holds is {}, not a text", member.key,
                             kind_name(meaning.kind)),
                 "a meaning and a unit in quotes",
                 fmt::format("columns = {{ \"{}\" = \"temperature [degF]\" }}", member.key));
        continue;
      }
      recipe_.inputs.emplace_back("judging.columns." + member.key, meaning.text);
      charting.columns.push_back({{member.key, member.key_place}, {meaning.text, meaning.place}});
    }
  }
  if (const Member* centre = take("centre")) charting.centre = content(*centre, "3.70 vol");
  if (const Member* sigma = take("sigma")) charting.sigma = content(*sigma, "0.03 vol");
  return charting;
}

void read_readings(Section& top, Recipe& recipe) {
  if (const Node* node = top.table("gauge")) {
    Section s = top.inside(*node, "gauge");
    GaugeSection gauge;
    gauge.place = node->place;
    gauge.pressure = s.pressure_error("pressure", "± 0.02 bar");
    gauge.temperature = s.temperature_error("temperature", "± 0.2 K");
    if (const Node* offset = s.group("offset", "offset = { pressure = \"-0.02 bar\" }")) {
      Section o = s.inside(*offset, "gauge.offset");
      gauge.pressure_offset = o.pressure_step("pressure", "-0.02 bar", Sign::any);
      gauge.temperature_offset = o.temperature_step("temperature", "0.1 K", Sign::any);
      o.finish();
    }
    gauge.graduation = s.pressure_step("graduation", "0.5 psi", Sign::positive);
    gauge.piercer_volume = s.volume("piercer_volume", "10 mL");
    gauge.piercer_gas = s.text("piercer_gas", "evacuated");
    s.finish();
    recipe.gauge = std::move(gauge);
  }
  if (const Node* node = top.table("card")) {
    Section s = top.inside(*node, "card");
    CardSection card;
    card.place = node->place;
    card.from = s.temperature("from", "34 degF");
    card.to = s.temperature("to", "60 degF");
    card.step = s.temperature_step("step", "1 degF", Sign::positive);
    s.finish();
    recipe.card = std::move(card);
  }
}

}  // namespace capsigh::recipe_detail
