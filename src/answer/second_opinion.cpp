#include "capsigh/answer/second_opinion.hpp"

#include "capsigh/answer/solve.hpp"
#include "records.hpp"

namespace capsigh {
namespace {

struct Asked {
  std::string path;
  double value = 0;
  JsonUnit unit;
};

// The content of CO2 as the recipe speaks of it.
std::string content_path(const Case& c) {
  auto measure = ContentMeasure::volumes;
  for (const auto& target : c.targets) {
    if (target.gas == c.medium.co2) measure = target.measure;
  }
  switch (measure) {
    case ContentMeasure::volumes: return "dissolved.CO2.volumes";
    case ContentMeasure::mass_concentration: return "dissolved.CO2.mass_concentration";
    case ContentMeasure::amount_concentration: return "dissolved.CO2.amount_concentration";
    case ContentMeasure::molality:
    case ContentMeasure::mass_fraction: break;
  }
  return "dissolved.CO2.mass_fraction";
}

// The figures that a relation decides: CO2 content, and what holds a wanted content.
std::vector<Asked> decided(const Answer& answer, bool content_known,
                           const std::string& content_of) {
  const bool found = !answer.blend.empty();
  std::vector<Asked> all;
  each_figure(answer, [&](const FigurePath& path, const auto& figure, const JsonUnit& unit) {
    if (!figure.asked) return;
    const std::string text = path.text();
    const bool content = !found && !content_known && text == content_of;
    const bool conditioned = answer.conditioning.dose.asked;
    const bool holds = conditioned ? text == "conditioning.pressure_gauge"
                                   : !found && (text == "saturation.CO2.pressure_gauge" ||
                                                text == "saturation.CO2.temperature");
    if (content || holds || text == "blend.CO2") {
      all.push_back({text, (si_value(figure.value) - unit.offset) / unit.factor, unit});
    }
  });
  return all;
}

}  // namespace

std::string relation_name(const Record* relation) {
  constexpr std::string_view prefix = "relation.";
  return relation == nullptr ? "composition" : std::string(relation->key.substr(prefix.size()));
}

std::vector<SecondOpinion> second_opinions(const Binding& binding, const Answer& answer,
                                           const Library& library) {
  std::vector<const Record*> others = binding.other_relations;
  if (binding.relation != nullptr) others.push_back(nullptr);
  const bool content_known = binding.problem.contact.known != Known::temperature_pressure;
  const auto content_of = content_path(binding.problem);
  const auto main = decided(answer, content_known, content_of);
  std::vector<SecondOpinion> opinions;
  for (const Record* relation : others) {
    Case other = binding.problem;
    if (!other.target_at_package && !other.conditioning) other.container.reset();
    other.opening.reset();
    other.supply.reset();
    other.medium.convention = answer_detail::convention_of(library, relation, other.medium);
    const auto solved = solve(other);
    if (refused(solved) != nullptr) continue;
    const auto theirs = decided(std::get<Answer>(solved), content_known, content_of);
    for (std::size_t i = 0; i < main.size() && i < theirs.size(); ++i) {
      constexpr double percent = 100;
      opinions.push_back({relation_name(relation), theirs[i].path, theirs[i].value, theirs[i].unit,
                          percent * (theirs[i].value / main[i].value - 1)});
    }
  }
  return opinions;
}

}  // namespace capsigh
