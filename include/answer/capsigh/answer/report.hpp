// A whole report: bound, solved, judged, doubted and sourced; what the renderers show.
#pragma once

#include <string>
#include <utility>
#include <vector>

#include "capsigh/answer/advice.hpp"
#include "capsigh/answer/bind.hpp"
#include "capsigh/answer/doubt.hpp"
#include "capsigh/answer/figures.hpp"
#include "capsigh/answer/monte_carlo.hpp"
#include "capsigh/answer/second_opinion.hpp"
#include "capsigh/quality/verdict.hpp"

namespace capsigh {

struct ReportOptions {
  bool strict = false;            ///< a caution about a range is an error
  MonteCarloOptions monte_carlo;  ///< without draws: first order alone
};

struct CitedSource {
  std::string key;
  std::string citation;
};

struct Audit {
  std::string program = "capsigh";
  std::string version;
  std::string recipe_digest;
  std::string constants_digest;
  std::vector<std::pair<std::string, std::string>> inputs;
};

/// A target or limit judged against the content at the contact.
struct JudgedTarget {
  std::string gas;
  std::string wish;  ///< in the recipe's words
  Verdict verdict = Verdict::undecided;
  double probability = 0;  ///< of conformity
  bool doubt_stated = true;
  bool guarded = true;  ///< else values are compared
  ContentMeasure measure = ContentMeasure::volumes;
  JsonUnit unit;        ///< of the measure, as machines read it
  AcceptanceZone zone;  ///< in SI units of the measure
  Advice advice;        ///< what would open an empty zone, or decide an undecided value
};

/// Where the doubt of a figure that answers the question comes from, and what would halve it.
struct MainDoubt {
  std::string of;                 ///< path of the figure
  std::vector<BudgetLine> lines;  ///< largest share first
  Advice to_halve;
  bool nonlinear = false;
};

struct Report {
  std::string title;
  std::vector<std::pair<std::string, std::string>> about;
  std::string liquid;
  std::string relation;  ///< "composition", or the name of the trade's relation in force
  Answer answer;
  std::vector<std::string> gases;  ///< of the headspace
  bool solved_for_pressure = false;
  bool solved_for_temperature = false;
  std::vector<std::pair<std::string, std::string>> targets;  ///< gas and content as asked
  std::vector<std::pair<std::string, std::string>> limits;   ///< gas and its max or min
  bool stored = false;  ///< the recipe names storage temperatures
  std::vector<std::pair<std::string, std::string>> package_limits;  ///< gas and limit as asked
  std::string longest_shelf_life;  ///< up to which a limit is looked for
  std::vector<JudgedTarget> judged;
  std::vector<SecondOpinion> second_opinion;
  std::vector<BudgetLine> budget;
  std::vector<std::string> main_figures;  ///< paths of the figures that answer the question
  std::vector<MainDoubt> main_doubts;
  std::optional<MonteCarloRun> monte_carlo;
  std::string wine_class;  ///< what the gauge pressure at 20 °C of a wine is held against
  std::vector<std::string> doubt_not_stated;
  Findings assumptions;
  Findings cautions;
  std::vector<CitedSource> sources;
  Trace trace;
  Audit audit;
  bool limits_met = true;  ///< false where something is out of tolerance or over a rating
};

/// Answers a recipe. `recipe_text` is what the digest identifies. Without a value the findings say
/// why; they are all the faults that could be seen.
Outcome<Report> report(const Outcome<Recipe>& recipe, std::string_view recipe_text,
                       const Library& library, const ReportOptions& options = {});

/// The version of the program.
std::string_view version();

}  // namespace capsigh
