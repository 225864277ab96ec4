// The command: arguments, files and exit statuses.
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>
#include <charconv>
#include <cstdio>
#include <exception>
#include <limits>
#include <thread>

#include "capsigh/render/render.hpp"
#include "command.hpp"
#include "files.hpp"
#include "progress.hpp"
#include "quality_command.hpp"
#include "readings_command.hpp"

namespace {

using namespace capsigh;
using cli::assemble;
using cli::bad_input;
using cli::done;
using cli::fail;
using cli::out_of_tolerance;
using cli::system_failed;

struct ReportArguments {
  std::vector<std::string> recipes;
  cli::RecipeArguments around;
  std::vector<std::string> units;
  std::string as = "text";
  std::string out;
  bool strict = false;
  bool trace = false;
  std::uint64_t draws = 0;
  std::uint64_t seed = 1;
  unsigned threads = 0;
};

// Writes where the result belongs; a file is whole or absent.
int deliver(const std::string& text, const std::string& path) {
  if (const auto problem = cli::deliver(text, path)) return fail({*problem}, system_failed);
  return done;
}

// The units of --units, or a finding for a name that is none.
Outcome<std::vector<const Unit*>> display_units(const std::vector<std::string>& names) {
  std::vector<const Unit*> units;
  for (const auto& name : names) {
    const auto all = unit_table();
    const auto shown = [&](const Unit& u) {
      return u.text == name && u.reference == Reference::none &&
             (u.dimension == Dimension::pressure || u.dimension == Dimension::temperature ||
              u.dimension == Dimension::mass || u.dimension == Dimension::gas_volumes ||
              u.dimension == Dimension::mass_concentration ||
              u.dimension == Dimension::amount_concentration ||
              u.dimension == Dimension::mass_fraction);
    };
    const auto it = std::find_if(all.begin(), all.end(), shown);
    if (it == all.end()) {
      Finding f;
      f.code = "unit-unknown";
      f.message = "--units: nothing is displayed in '" + name + "'";
      f.expected =
          "units of pressure (without gauge or abs), temperature, content or mass: "
          "psi,degF,vol,g";
      return {{}, {f}};
    }
    units.push_back(&*it);
  }
  return {units, {}};
}

std::string rendered(const std::vector<std::pair<std::string, Report>>& reports,
                     const ReportArguments& arguments, const std::vector<const Unit*>& units) {
  if (arguments.as == "csv") return csv_reports(reports);
  if (arguments.as == "json") {
    std::vector<Report> all;
    all.reserve(reports.size());
    for (const auto& [file, report] : reports) all.push_back(report);
    return json_reports(all, arguments.trace);
  }
  std::string text;
  for (const auto& [file, report] : reports) {
    if (!text.empty()) text += "\n" + std::string(80, '=') + "\n\n";
    text += text_report(report, {arguments.trace, units});
  }
  return text;
}

MonteCarloOptions monte_carlo_of(const ReportArguments& arguments) {
  const unsigned cores = std::max(1U, std::thread::hardware_concurrency());
  return {arguments.draws, arguments.seed, arguments.threads == 0 ? cores : arguments.threads,
          cli::progress("drawing")};
}

// A whole number between two bounds, for an option; the message says what it should be.
CLI::Validator whole_number(std::uint64_t least, std::uint64_t most) {
  return {[least, most](std::string& text) {
            std::uint64_t number = 0;
            const auto [end, problem] =
                std::from_chars(text.data(), text.data() + text.size(), number);
            const bool whole = problem == std::errc() && end == text.data() + text.size();
            if (whole && number >= least && number <= most) return std::string();
            return fmt::format("'{}' is not a whole number from {} to {}", text, least, most);
          },
          "NUMBER"};
}

int run_report(ReportArguments arguments, const Library& library) {
  const auto units = display_units(arguments.units);
  if (!units) return fail(units.findings, bad_input);
  if (arguments.recipes.empty()) {
    if (arguments.around.sets.empty()) {
      Finding f;
      f.code = "no-recipe";
      f.message = "report needs a recipe, or keys to --set";
      f.example =
          "capsigh report can.toml\ncapsigh report --set contact.temperature=\"4 degC\" "
          "--set contact.pressure=\"2.3 bar gauge\"";
      return fail({f}, bad_input);
    }
    arguments.recipes.emplace_back();
  }
  std::vector<std::pair<std::string, Report>> reports;
  int status = done;
  for (const auto& path : arguments.recipes) {
    std::string texts;
    const auto assembled = assemble(path, arguments.around, texts);
    if (!assembled.document) return fail(assembled.findings, assembled.status);
    const std::string name = path.empty() ? "--set" : path == "-" ? "standard input" : path;
    auto answered = report(read_recipe(*assembled.document, name), texts, library,
                           {arguments.strict, monte_carlo_of(arguments)});
    if (arguments.draws > 0) cli::end_progress();
    if (!answered) {
      status = fail(answered.findings, bad_input);
      continue;
    }
    reports.emplace_back(name, std::move(*answered.value));
  }
  if (status != done) return status;
  status = deliver(rendered(reports, arguments, *units), arguments.out);
  const bool met = std::all_of(reports.begin(), reports.end(),
                               [](const auto& r) { return r.second.limits_met; });
  return status != done || met ? status : out_of_tolerance;
}

int run_constants(const std::string& name, const std::string& as, const std::string& out,
                  const Library& library) {
  if (!constants_match(library, name)) {
    Finding f;
    f.code = "unknown-record";
    f.message = "no record is called '" + name + "'";
    f.expected = "a key such as henry.CO2.weiss1974, or a part of keys such as CO2 or henry";
    return fail({f}, bad_input);
  }
  return deliver(as == "json" ? json_constants(library, name) : text_constants(library, name), out);
}

int run(int argc, char** argv) {
  CLI::App app{"capsigh: gas solubility and carbonation, with doubt and source"};
  app.set_version_flag("--version", std::string(version()));
  app.require_subcommand(1);
  app.fallthrough();
  std::string constants_directory;
  app.add_option("--constants", constants_directory, "read the constants from this directory");

  ReportArguments arguments;
  auto* report_command = app.add_subcommand("report", "answer all that a recipe asks");
  report_command->add_option("RECIPE", arguments.recipes, "recipe files; - is standard input");
  report_command
      ->add_option("--with", arguments.around.with, "lay this shared file under the recipe")
      ->allow_extra_args(false);
  report_command
      ->add_option("--set", arguments.around.sets, "set one key: contact.temperature=\"4 degC\"")
      ->allow_extra_args(false);
  report_command->add_option("--units", arguments.units, "units to display: psi,degF,vol")
      ->delimiter(',')
      ->allow_extra_args(false);
  report_command->add_option("--as", arguments.as, "form of the output")
      ->check(CLI::IsMember({"text", "json", "csv"}));
  report_command->add_option("--out", arguments.out, "write to this file");
  report_command->add_flag("--strict", arguments.strict, "refuse what is outside its range");
  report_command->add_flag("--trace", arguments.trace, "show how each figure came about");

  constexpr std::uint64_t fewest_draws = 1000;
  constexpr std::uint64_t most_draws = 20'000'000;
  constexpr std::uint64_t most_seed = std::numeric_limits<std::uint64_t>::max();
  constexpr std::uint64_t most_threads = 1024;
  auto* monte_carlo = report_command
                          ->add_option("--monte-carlo", arguments.draws,
                                       "draw the doubts so many times, instead of first order")
                          ->check(whole_number(fewest_draws, most_draws));
  report_command->add_option("--seed", arguments.seed, "seed of the draws (1)")
      ->check(whole_number(0, most_seed))
      ->needs(monte_carlo);
  report_command
      ->add_option("--threads", arguments.threads,
                   "threads for the draws (all cores); the result is the same")
      ->check(whole_number(1, most_threads))
      ->needs(monte_carlo);

  cli::CardArguments card;
  const auto* card_command = cli::add_card(app, card);
  cli::MergeArguments merge;
  const auto* merge_command = cli::add_merge(app, merge);

  std::string name;
  std::string as = "text";
  std::string out;
  auto* constants_command = app.add_subcommand("constants", "what the numbers rest on");
  constants_command->add_option("NAME", name, "a record's key, or a part of keys such as CO2");
  constants_command->add_option("--as", as, "form of the output")
      ->check(CLI::IsMember({"text", "json"}));
  constants_command->add_option("--out", out, "write to this file");

  cli::ReadingsArguments readings;
  const auto* readings_command = cli::add_readings(app, readings);

  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& e) {
    return app.exit(e) == 0 ? done : bad_input;
  }
  Outcome<Library> library{built_in_library(), {}};
  if (!constants_directory.empty()) library = load_library(constants_directory);
  if (!library) {
    const bool unreadable = std::any_of(library.findings.begin(), library.findings.end(),
                                        [](const Finding& f) { return f.code == "unreadable"; });
    return fail(library.findings, unreadable ? system_failed : bad_input);
  }
  if (report_command->parsed()) return run_report(arguments, *library);
  if (card_command->parsed()) return cli::run_card(card, *library);
  if (merge_command->parsed()) return cli::run_merge(merge, *library);
  if (readings_command->parsed()) return cli::run_readings(readings, *library);
  return run_constants(name, as, out, *library);
}

}  // namespace

int main(int argc, char** argv) {
  try {
    return run(argc, argv);
  } catch (const std::exception& e) {
    fmt::print(stderr, "capsigh: internal failure, please report it: {}\n", e.what());
    return system_failed;
  }
}
