#include "life_sections.hpp"

#include <fmt/format.h>

namespace capsigh::recipe_detail {
namespace {

// A { } group of gases and contents behind a key; a complaint if it is something else.
std::vector<GivenContent> gases_of(Section& s, const Member& member, const std::string& name,
                                   const std::string& example, Recipe& recipe, Findings& findings) {
  if (member.value.kind == Node::Kind::table) {
    return Section(member.value, name, recipe, findings).contents();
  }
  s.complain(member.value.place, "not-a-section",
             fmt::format("'{}' is {}; it must name the gas", name, kind_name(member.value.kind)),
             "a { } group of gases and contents", example);
  return {};
}

void read_dose(Section& s, const Node& node, ConditioningSection& conditioning, Recipe& recipe) {
  const Member* member = node.find("dose");
  const bool find =
      member != nullptr && member->value.kind == Node::Kind::text && member->value.text == "find";
  if (!find) {
    conditioning.dose = s.mass_concentration("dose", "8 g/L");
    return;
  }
  s.take("dose");
  recipe.inputs.emplace_back("conditioning.dose", "find");
  conditioning.find = LocatedText{member->value.text, member->value.place};
}

void read_residual(Section& s, const Node& node, ConditioningSection& conditioning, Recipe& recipe,
                   Findings& findings) {
  const Member* member = node.find("residual");
  if (member == nullptr || member->value.kind != Node::Kind::table) {
    conditioning.residual_temperature = s.temperature("residual", "18 degC");
    return;
  }
  s.take("residual");
  conditioning.residual_place = member->key_place;
  conditioning.residual =
      Section(member->value, "conditioning.residual", recipe, findings).contents();
}

}  // namespace

OpeningSection read_opening(const Node& node, Recipe& recipe, Findings& findings) {
  Section s(node, "opening", recipe, findings);
  OpeningSection opening;
  opening.place = node.place;
  opening.temperature = s.temperature("temperature", "8 degC");
  opening.escape_half_life = s.duration("escape_half_life", "40 min", Sign::positive);
  opening.surface = s.area("surface", "20 cm2");
  opening.stillness = s.text("stillness", "quiet");
  if (const Member* member = s.take("after")) {
    opening.after_place = member->value.place;
    opening.after = s.durations(*member, "5 min");
  }
  opening.reclose_after = s.duration("reclose_after", "10 min", Sign::any);
  s.finish();
  return opening;
}

ConditioningSection read_conditioning(const Node& node, Recipe& recipe, Findings& findings) {
  Section s(node, "conditioning", recipe, findings);
  ConditioningSection conditioning;
  conditioning.place = node.place;
  conditioning.sugar = s.text("sugar", "sucrose");
  read_dose(s, node, conditioning, recipe);
  read_residual(s, node, conditioning, recipe, findings);
  conditioning.yield = s.share("yield", "95 %", Sign::positive);
  s.finish();
  return conditioning;
}

SupplySection read_supply(const Node& node, Recipe& recipe, Findings& findings) {
  Section s(node, "supply", recipe, findings);
  SupplySection supply;
  supply.place = node.place;
  supply.flow = s.volume_flow("liquid", "120 hL/h");
  supply.amount = s.volume("amount", "400 hL");
  if (const Member* member = s.take("incoming")) {
    supply.incoming_place = member->key_place;
    supply.incoming = gases_of(s, *member, "supply.incoming", "incoming = { CO2 = \"0.3 g/L\" }",
                               recipe, findings);
  }
  supply.purge = s.multiple("purge", "150 %");
  s.finish();
  return supply;
}

}  // namespace capsigh::recipe_detail
