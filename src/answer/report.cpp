#include "capsigh/answer/report.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "capsigh/answer/solve.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "caution_life.hpp"
#include "judging.hpp"
#include "report_package.hpp"

namespace capsigh {
namespace {

using answer_detail::caution;
using answer_detail::celsius;
using answer_detail::freezing_point;

void append(Findings& to, const Findings& more) { to.insert(to.end(), more.begin(), more.end()); }

void sort_findings(const Binding& binding, Report& report) {
  for (const auto& note : binding.notes) {
    auto& list = note.severity == Severity::assumption ? report.assumptions : report.cautions;
    list.push_back(note);
  }
}

// Every source behind the trace and the definitions, each once, in the order of first use.
std::vector<CitedSource> cited_sources(const Trace& trace, const Binding& binding,
                                       const Library& library) {
  std::vector<CitedSource> sources;
  const auto cite = [&](const Record& record) {
    const bool known = std::any_of(sources.begin(), sources.end(),
                                   [&](const CitedSource& s) { return s.key == record.source; });
    const Source* source = library.source(record.source);
    if (known || source == nullptr) return;
    sources.push_back({std::string(source->key), std::string(source->citation)});
  };
  for (const auto& chain : trace.chains) {
    for (const auto& step : chain.steps) {
      if (step.record != nullptr) cite(*step.record);
      if (step.definition != nullptr) cite(*step.definition);
    }
  }
  for (const Record* record : binding.also_used) cite(*record);
  return sources;
}

// Where in the recipe a refusal is best shown: at the value that asks for the impossible.
Place place_of(const Recipe& recipe, const Refusal& refusal) {
  const auto& contact = recipe.contact;
  if (refusal.code == RefusalCode::temperature_beyond_model && recipe.container) {
    for (const auto& t : recipe.container->storage) {
      if (t.value && t.value->kelvin() == refusal.value) return t.source.place;
    }
  }
  const bool of_container = refusal.code == RefusalCode::container_without_space ||
                            refusal.code == RefusalCode::air_exceeds_headspace ||
                            refusal.asked_by == AskedBy::closing;
  if (of_container && recipe.container) return recipe.container->place;
  if (refusal.asked_by == AskedBy::opening && recipe.opening) {
    const auto& temperature = recipe.opening->temperature;
    return temperature ? temperature->source.place : recipe.opening->place;
  }
  if (refusal.asked_by == AskedBy::conditioning && recipe.conditioning) {
    const bool found = refusal.code == RefusalCode::nothing_to_condition;
    return found ? recipe.conditioning->find->place : recipe.conditioning->place;
  }
  if (refusal.asked_by == AskedBy::supply && recipe.supply) return recipe.supply->place;
  if (!contact) return {recipe.file, 0, 0, 1, ""};
  if (refusal.code == RefusalCode::temperature_beyond_model && contact->temperature) {
    return contact->temperature->source.place;
  }
  const bool by_pressure = refusal.code == RefusalCode::boils ||
                           refusal.code == RefusalCode::condenses ||
                           refusal.code == RefusalCode::pressure_beyond_model;
  if (by_pressure && contact->pressure) return contact->pressure->source.place;
  if (!contact->dissolved.empty()) return contact->dissolved.front().amount.source.place;
  if (!recipe.target.empty()) return recipe.target.front().content.amount.source.place;
  return contact->place;
}

// A wish that nothing fulfils is said, where the rest of the report stands without it.
void caution_unreachable(Report& report) {
  for (const auto& s : report.answer.saturation) {
    if (!s.unreachable) continue;
    Finding f = explain({*s.unreachable, 0, 0, AskedBy::saturation});
    f.severity = Severity::caution;
    f.code = "target-unreachable";
    f.message = std::string("no pressure of this gas mixture brings the wanted content of ") +
                std::string(s.gas);
    report.cautions.push_back(std::move(f));
  }
}

// Henry's law is for dilute solutions, the solutes' constants for drinks.
void caution_concentration(const Case& c, const Library& library, Report& report) {
  const auto share = [&](std::string_view key) {
    return library.at(key).values[0].value * library.at(key).factor;
  };
  for (const auto& g : report.answer.gases) {
    if (g.mole_fraction.value.value() <= share("assumed.dilute")) continue;
    report.cautions.push_back(
        caution("not-dilute", fmt::format("{} reaches a mole fraction of {} in the liquid: Henry's "
                                          "law is for dilute solutions, the figure is a hint",
                                          g.gas, significant(g.mole_fraction.value.value(), 2))));
  }
  const auto liquid = compose(c.medium.liquid, c.medium.content_temperature);
  const double sugar = (liquid.sugar / liquid.density).value();
  if (sugar > share("assumed.strongest_sugar")) {
    report.cautions.push_back(
        caution("concentrated",
                fmt::format("{} % of sugar by mass is beyond the measurements, which end at "
                            "{} %",
                            significant(100 * sugar, 3),
                            library.at("assumed.strongest_sugar").values[0].digits)));
  }
  if (report.answer.breaks_out_above) {
    report.cautions.push_back(caution(
        "above-headspace",
        "the liquid takes up more in the depth than the headspace holds: once the gas is shut off, "
        "the difference comes out at the surface"));
  }
}

// Below its freezing point (Raoult) a liquid is answered as if supercooled.
void caution_freezing(const Case& c, const Library& library, Report& report) {
  const Temperature freezing = freezing_point(c, library);
  const auto check = [&](const Figure<Temperature>& t) {
    if (!t.asked || t.value >= freezing) return false;
    report.cautions.push_back(
        caution("frozen", fmt::format("at {} the liquid may be frozen: it freezes at about {}",
                                      celsius(t.value), celsius(freezing))));
    return true;
  };
  if (!check(report.answer.temperature)) check(report.answer.opening_temperature);
}

// Cautions about ranges, as --strict takes them.
Findings ranges_as_errors(const Findings& cautions, const std::string& file) {
  Findings errors;
  for (const auto& caution : cautions) {
    if (caution.code != "out-of-range") continue;
    errors.push_back(caution);
    errors.back().severity = Severity::error;
    errors.back().place = Place{file, 0, 0, 1, ""};
  }
  return errors;
}

// The figures that answer the question, as the text report shows them.
std::vector<std::string> main_figures(const Report& report) {
  std::vector<std::string> paths;
  const auto& a = report.answer;
  for (const auto& b : a.blend) paths.push_back(FigurePath("blend", b.gas).text());
  if (report.solved_for_temperature) paths.emplace_back("condition.temperature");
  const auto& conditioned = a.conditioning;
  if (conditioned.dose.asked) {
    if (conditioned.dose_found) paths.emplace_back("conditioning.dose");
    paths.emplace_back("conditioning.pressure_gauge");
  } else if (report.solved_for_pressure) {
    paths.emplace_back("condition.pressure_gauge");
  }
  if (a.supply.per_hectolitre.asked) paths.emplace_back("supply.per_hectolitre");
  if (!report.solved_for_temperature && !report.solved_for_pressure) {
    for (const auto& g : a.gases) {
      const bool trace = is_trace(g);
      paths.push_back(
          FigurePath("dissolved", g.gas, trace ? "mass_concentration" : "volumes").text());
    }
  }
  if (!report.solved_for_pressure && a.blend.empty()) {
    for (const auto& s : a.saturation) {
      const FigurePath at("saturation", s.gas);
      paths.push_back(at.then(s.pressure_gauge.asked ? "pressure_gauge" : "temperature").text());
    }
  }
  if (!a.package.at.empty()) paths.emplace_back("container.at.0.pressure_gauge");
  return paths;
}

void draw(const Binding& binding, const MonteCarloOptions& options, const Library& library,
          Report& report) {
  const auto share = [&](std::string_view key) {
    return library.at(key).values[0].value * library.at(key).factor;
  };
  report.monte_carlo =
      monte_carlo(binding.problem, report.answer, options,
                  answer_detail::watched_targets(binding, report.answer), share("assumed.coverage"),
                  share("assumed.most_unanswered"), share("assumed.agreement"));
  append(report.cautions, report.monte_carlo->cautions);
}

void explain_doubts(Report& report) {
  constexpr double half = 0.5;
  report.main_figures = main_figures(report);
  for (const auto& path : report.main_figures) {
    MainDoubt d;
    d.of = path;
    d.lines = budget_of(report.budget, path);
    if (d.lines.empty()) continue;
    d.to_halve = advise(d.lines, half);
    each_figure(report.answer, [&](const FigurePath& of, const auto& figure, const JsonUnit&) {
      if (of.text() == path) d.nonlinear = figure.nonlinear;
    });
    report.main_doubts.push_back(std::move(d));
  }
}

void describe(const Recipe& recipe, const Binding& binding, const Library& library,
              Report& report) {
  report.title = recipe.title;
  report.about = recipe.about;
  report.liquid = binding.liquid;
  report.relation = relation_name(binding.relation);
  report.doubt_not_stated = binding.doubt_not_stated;
  if (binding.problem.classed_by_gauge) {
    const auto& least = library.at("class.sparkling_wine");
    const auto& small = library.at("class.sparkling_wine_small");
    report.wine_class = fmt::format("sparkling from {} (small bottles {})", least.values[0].digits,
                                    small.values[0].digits);
  }
  const auto& c = binding.problem;
  for (std::size_t i = 0; i < c.medium.size(); ++i) {
    if (c.in_contact[i] != 0) report.gases.emplace_back(c.medium.gases[i].name);
  }
  if (c.container) answer_detail::describe_package(recipe, *c.container, report);
  report.solved_for_pressure = c.contact.known == Known::temperature_content;
  report.solved_for_temperature = c.contact.known == Known::pressure_content;
  for (const auto& target : recipe.target) {
    const std::string limit = target.is_maximum ? "max " : target.is_minimum ? "min " : "";
    auto& list = limit.empty() ? report.targets : report.limits;
    list.emplace_back(target.content.gas.text, limit + target.content.amount.source.text);
  }
  if (report.targets.empty() && recipe.contact && !recipe.contact->dissolved.empty()) {
    const auto& content = recipe.contact->dissolved.front();
    report.targets.emplace_back(content.gas.text, content.amount.source.text);
  }
}

}  // namespace

Outcome<Report> report(const Outcome<Recipe>& recipe, std::string_view recipe_text,
                       const Library& library, const ReportOptions& options) {
  Findings findings = recipe.findings;
  if (!recipe) return {{}, findings};
  auto binding = bind(*recipe, library);
  append(findings, binding.findings);
  if (has_error(findings) || !binding) return {{}, findings};
  Report report;
  Case& problem = binding.value->problem;
  const auto solved = solve(problem, &report.trace);
  if (const auto* no = refused(solved)) {
    Finding f = explain(*no);
    f.place = place_of(*recipe, *no);
    return {{}, {f}};
  }
  report.answer = std::get<Answer>(solved);
  describe(*recipe, *binding, library, report);
  sort_findings(*binding, report);
  const double widening = library.at("assumed.widening").values[0].value;
  append(report.cautions, judge_ranges(problem, report.trace, widening));
  if (options.strict) {
    const auto refused_ranges = ranges_as_errors(report.cautions, recipe->file);
    if (!refused_ranges.empty()) return {{}, refused_ranges};
  }
  caution_unreachable(report);
  caution_concentration(problem, library, report);
  caution_freezing(problem, library, report);
  answer_detail::caution_package(problem, library, report);
  answer_detail::caution_life(*binding, library, report);
  report.second_opinion = second_opinions(*binding, report.answer, library);
  auto propagation = propagate(problem, report.answer);
  if (has_error(propagation.findings)) {
    for (auto& f : propagation.findings) f.place = Place{recipe->file, 0, 0, 1, ""};
    return {{}, propagation.findings};
  }
  report.budget = std::move(propagation.budget);
  if (options.monte_carlo.draws > 0) draw(*binding, options.monte_carlo, library, report);
  explain_doubts(report);
  answer_detail::judge_targets(*binding, answer_detail::rule_of(*recipe, library), report);
  answer_detail::judge_package(answer_detail::rule_of(*recipe, library), report);
  report.sources = cited_sources(report.trace, *binding, library);
  report.audit.version = version();
  report.audit.recipe_digest = sha1_digest(recipe_text);
  report.audit.constants_digest = library.digest();
  report.audit.inputs = recipe->inputs;
  return {std::move(report), {}};
}

std::string_view version() { return CAPSIGH_VERSION; }

}  // namespace capsigh
