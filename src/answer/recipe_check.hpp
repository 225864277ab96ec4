// What can be wrong with a recipe before anything is bound: names, presence, contradictions. All of
// it is looked at, so that one run reports every fault.
#pragma once

#include <string>
#include <vector>

#include "capsigh/answer/bind.hpp"
#include "liquids.hpp"

namespace capsigh::answer_detail {

/// A finding without a place yet.
Finding note(Severity severity, std::string code, std::string message,
             std::optional<Place> place = std::nullopt);

/// A line of [gas] as gases of the library and their parts of it.
struct NamedParts {
  std::vector<std::string> gases;
  std::vector<double> parts;
};

class RecipeCheck {
 public:
  RecipeCheck(const Recipe& recipe, const Library& library) : recipe_(recipe), library_(library) {}

  /// Every check; the findings are in findings().
  void check();
  [[nodiscard]] const Findings& findings() const { return findings_; }

 protected:
  Case& problem() { return binding_.problem; }
  void error(std::string code, std::string message, std::string expected, std::string example,
             const std::optional<Place>& place, std::optional<Place> conflict = std::nullopt);
  void assume(std::string code, std::string message);
  void cite(const Record& definition);
  answer_detail::LiquidSink sink();
  static NamedParts mixture_parts(const Record& mixture);

  const Recipe& recipe_;
  const Library& library_;
  const LiquidSection* liquid_ = nullptr;
  const Record* named_ = nullptr;
  const Record* relation_ = nullptr;
  Binding binding_;
  Findings findings_;
  std::vector<std::string> gases_;  // that the medium needs
  std::vector<NamedParts> lines_;
  NamedParts air_;

 private:
  void check_liquid();
  void check_volume_basis(const LocatedText& basis);
  void check_sugars();
  NamedParts parts_of(const LocatedText& name);
  void need_gas(const std::string& name);
  void read_gases();
  void need_air();
  void check_shares();
  void check_contact();
  void check_content_gas(const GivenContent& given);
  void check_contents();
  void check_target_at();
  void check_find();
  const GivenTarget* wanted_of(const std::string& gas) const;
  void check_altitude();
  void check_container(const ContainerSection& container);
  void check_judging(const JudgingSection& judging);
  // Opening, conditioning and supply (check_life.cpp).
  void check_life();
  void check_opening(const OpeningSection& opening);
  void check_escape(const OpeningSection& opening);
  void check_conditioning(const ConditioningSection& conditioning);
  void check_sugar(const LocatedText& sugar);
  void check_residual(const ConditioningSection& conditioning);
  void check_conditioning_contact(const ConditioningSection& conditioning);
  void check_supply(const SupplySection& supply);
  void check_readings();
  void check_gauge(const GaugeSection& gauge);
  void check_piercer(const GaugeSection& gauge);
  void check_charting(const ChartingSection& charting);
  void check_card(const CardSection& card);
};

}  // namespace capsigh::answer_detail
