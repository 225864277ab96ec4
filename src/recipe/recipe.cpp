#include "capsigh/recipe/recipe.hpp"

#include <fmt/format.h>

#include "life_sections.hpp"
#include "section.hpp"

namespace capsigh {
namespace {

using recipe_detail::Section;

const Node* table(Section& top, const std::string& name) { return top.table(name); }

class Reader {
 public:
  Reader(const Node& document, const std::string& file) : document_(document) {
    recipe_.file = file;
  }

  Outcome<Recipe> read() {
    Section top(document_, "", recipe_, findings_);
    if (const auto title = top.text("title", "Sparkling water")) recipe_.title = title->text;
    read_about(top);
    read_liquid(top);
    read_gas(top);
    read_contact(top);
    read_target(top);
    read_container(top);
    if (const Node* node = table(top, "opening")) {
      recipe_.opening = recipe_detail::read_opening(*node, recipe_, findings_);
    }
    if (const Node* node = table(top, "conditioning")) {
      recipe_.conditioning = recipe_detail::read_conditioning(*node, recipe_, findings_);
    }
    if (const Node* node = table(top, "supply")) {
      recipe_.supply = recipe_detail::read_supply(*node, recipe_, findings_);
    }
    read_judging(top);
    recipe_detail::read_readings(top, recipe_);
    top.finish();
    recipe_.readable = !has_error(findings_);
    return {std::move(recipe_), std::move(findings_)};
  }

 private:
  Section section(const Node& node, const std::string& name) {
    return {node, name, recipe_, findings_};
  }

  static const Node* subgroup(Section& s, const std::string& key, const std::string& example) {
    return s.group(key, example);
  }

  void read_about(Section& top) {
    if (const Node* node = table(top, "about")) {
      recipe_.about = section(*node, "about").free_text();
    }
  }

  void read_liquid(Section& top) {
    const Node* node = table(top, "liquid");
    if (node == nullptr) return;
    Section s = section(*node, "liquid");
    LiquidSection liquid;
    liquid.place = node->place;
    liquid.like = s.text("like", "soft drink");
    liquid.basis = s.text("basis", "true");
    liquid.relation = s.text("relation", "ASBC");
    liquid.volume_basis = s.text("volume_basis", "real");
    for (const std::string key : {"brix", "sucrose", "glucose", "fructose", "extract", "ethanol",
                                  "citric_acid", "glycerol"}) {
      if (auto solute = s.solute(key)) liquid.solutes.push_back(std::move(*solute));
    }
    liquid.density = s.density("density", "1040 kg/m3");
    if (const Member* member = s.take("salts")) {
      if (member->value.kind == Node::Kind::table) {
        for (auto& salt : section(member->value, "liquid.salts").salts()) {
          liquid.solutes.push_back(std::move(salt));
        }
      } else {
        s.complain(
            member->value.place, "not-a-section",
            fmt::format("'liquid.salts' is {}, not a {{ }} group", kind_name(member->value.kind)),
            "a { } group of formulas and amounts", "salts = { NaCl = \"120 mg/L\" }");
      }
    }
    s.finish();
    recipe_.liquid = std::move(liquid);
  }

  void read_gas(Section& top) {
    const Node* node = table(top, "gas");
    if (node == nullptr) return;
    recipe_.gas_place = node->place;
    recipe_.gas = section(*node, "gas").shares();
  }

  void read_contact(Section& top) {
    const Node* node = table(top, "contact");
    if (node == nullptr) return;
    Section s = section(*node, "contact");
    ContactSection contact;
    contact.place = node->place;
    contact.temperature = s.temperature("temperature", "4 degC");
    contact.pressure = s.pressure("pressure", "2.3 bar gauge");
    if (const Member* member = s.take("dissolved")) {
      contact.dissolved_place = member->key_place;
      if (member->value.kind == Node::Kind::table) {
        contact.dissolved = section(member->value, "contact.dissolved").contents();
      } else {
        s.complain(member->value.place, "not-a-section",
                   fmt::format("'contact.dissolved' is {}; it must name the gas",
                               kind_name(member->value.kind)),
                   "a { } group of gases and contents", "dissolved = { CO2 = \"3.7 vol\" }");
      }
    }
    contact.altitude = s.length("altitude", "350 m", recipe_detail::Sign::any);
    contact.ambient = s.absolute_pressure("ambient", "978 hPa");
    contact.depth = s.length("depth", "3 m", recipe_detail::Sign::not_negative);
    contact.approach = s.share("approach", "95 %", recipe_detail::Sign::positive);
    s.finish();
    recipe_.contact = std::move(contact);
  }

  void read_target(Section& top) {
    const Node* node = table(top, "target");
    if (node == nullptr) return;
    Section s = section(*node, "target");
    recipe_.target_at = s.text("at", "package");
    recipe_.target = s.targets();
  }

  void read_container(Section& top) {
    const Node* node = table(top, "container");
    if (node == nullptr) return;
    Section s = section(*node, "container");
    ContainerSection container;
    container.place = node->place;
    container.brimful = s.volume("brimful", "355 mL");
    container.fill = s.volume("fill", "330 mL");
    container.fill_mass = s.mass("fill_mass", "341 g");
    container.rated = s.pressure("rated", "6.2 bar gauge");
    container.nitrogen_dose = s.mass("nitrogen_dose", "80 mg");
    if (const Node* group = subgroup(s, "closed_at", "container.closed_at = { air = \"30 %\" }")) {
      Section closed = section(*group, "container.closed_at");
      container.closing_temperature = closed.temperature("temperature", "6 degC");
      container.closing_pressure = closed.pressure("pressure", "0 bar gauge");
      closed.air("air", container.closing_air, container.closing_air_volume);
      container.closing_oxygen = closed.content_of("dissolved_oxygen", "O2");
      closed.finish();
    }
    if (const Node* group = subgroup(s, "filling_loss", "filling_loss = { CO2 = \"0.05 vol\" }")) {
      container.filling_loss = section(*group, "container.filling_loss").contents();
    }
    container.kind = s.text("kind", "can");
    container.stretch = s.stretch("stretch", "0.4 %/bar");
    container.storage = s.temperatures("storage", "4 degC");
    container.minimum_ullage = s.share("minimum_ullage", "3 %");
    if (const Node* group = subgroup(s, "wall", "wall = { CO2 = \"1.1 mL/d\" }")) {
      container.wall = section(*group, "container.wall").transmissions();
    }
    if (const Node* group = subgroup(s, "limit", "limit = { CO2 = \"3.4 vol\" }")) {
      container.limit = section(*group, "container.limit").contents();
    }
    s.finish();
    recipe_.container = std::move(container);
  }

  void read_judging(Section& top) {
    const Node* node = table(top, "judging");
    if (node == nullptr) return;
    Section s = section(*node, "judging");
    JudgingSection judging;
    judging.place = node->place;
    judging.rule = s.text("rule", "guarded");
    judging.risk = s.share("risk", "5 %", recipe_detail::Sign::positive);
    recipe_.charting = s.charting();
    s.finish();
    recipe_.judging = std::move(judging);
  }

  const Node& document_;
  Recipe recipe_;
  Findings findings_;
};

}  // namespace

Outcome<Recipe> read_recipe(const Node& document, const std::string& file) {
  return Reader(document, file).read();
}

}  // namespace capsigh
