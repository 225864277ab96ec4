#include "quality_command.hpp"

#include <optional>

#include "capsigh/answer/charting.hpp"
#include "capsigh/render/render.hpp"
#include "capsigh/render/summary.hpp"
#include "files.hpp"

namespace capsigh::cli {
namespace {

Finding finding(std::string code, std::string message, std::string expected, std::string example) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  f.example = std::move(example);
  return f;
}

// A unit of --units for the card: of pressure or of temperature.
std::optional<Finding> choose_units(const std::vector<std::string>& names, CardOptions& options) {
  for (const auto& name : names) {
    const Unit* pressure = find_unit(name, Dimension::pressure);
    const Unit* temperature = find_unit(name, Dimension::temperature);
    if (pressure != nullptr && pressure->reference == Reference::none) {
      options.pressure = pressure;
    } else if (temperature != nullptr) {
      options.temperature = temperature;
    } else {
      return finding("unit-unknown", "--units: a card shows nothing in '" + name + "'",
                     "units of pressure (without gauge or abs) and temperature: psi,degF",
                     "capsigh card soda.toml --units psi,degF");
    }
  }
  return std::nullopt;
}

int deliver_text(const std::string& text, const std::string& path, int status) {
  if (const auto problem = deliver(text, path)) return fail({*problem}, system_failed);
  return status;
}

// What a summary's charts are made with; it was written with the same constants.
std::optional<Finding> complete(Summary& summary, const Library& library, const std::string& file) {
  if (summary.plan.constants_digest != library.digest()) {
    auto f = finding("other-constants", "this summary rests on other constants than this program",
                     "summaries and merge from one version, and the same --constants", "");
    f.place = Place{file, 0, 0, 1, ""};
    return f;
  }
  use_constants(summary.plan, library);
  return std::nullopt;
}

Outcome<Summary> read_one(const std::string& path, const Library& library, int& status) {
  const auto text = read_input(path);
  if (!text) {
    status = system_failed;
    return {{}, text.findings};
  }
  const std::string name = path == "-" ? "standard input" : path;
  auto summary = read_summary(*text, name);
  if (!summary) {
    status = bad_input;
    return summary;
  }
  if (const auto problem = complete(*summary.value, library, name)) {
    status = bad_input;
    return {{}, {*problem}};
  }
  return summary;
}

}  // namespace

CLI::App* add_card(CLI::App& app, CardArguments& arguments) {
  auto* command =
      app.add_subcommand("card", "the operator's card: allowed gauge readings by temperature");
  command->add_option("RECIPE", arguments.recipe, "a recipe with [card]; - is standard input");
  command->add_option("--with", arguments.around.with, "lay this shared file under the recipe")
      ->allow_extra_args(false);
  command->add_option("--set", arguments.around.sets, "set one key: contact.altitude=\"1200 m\"")
      ->allow_extra_args(false);
  command->add_option("--units", arguments.units, "units to display: psi,degF")
      ->delimiter(',')
      ->allow_extra_args(false);
  command->add_option("--as", arguments.as, "form of the output")
      ->check(CLI::IsMember({"text", "csv"}));
  command->add_option("--out", arguments.out, "write to this file");
  command->add_flag("--strict", arguments.strict, "refuse what is outside its range");
  return command;
}

int run_card(const CardArguments& arguments, const Library& library) {
  CardOptions options;
  options.strict = arguments.strict;
  if (const auto problem = choose_units(arguments.units, options)) {
    return fail({*problem}, bad_input);
  }
  if (arguments.recipe.empty() && arguments.around.sets.empty()) {
    return fail({finding("no-recipe", "card needs a recipe, or keys to --set", "",
                         "capsigh card soda.toml")},
                bad_input);
  }
  std::string texts;
  const auto assembled = assemble(arguments.recipe, arguments.around, texts);
  if (!assembled.document) return fail(assembled.findings, assembled.status);
  const std::string name = arguments.recipe.empty()  ? "--set"
                           : arguments.recipe == "-" ? "standard input"
                                                     : arguments.recipe;
  const auto made = card(read_recipe(*assembled.document, name), texts, library, options);
  if (!made) return fail(made.findings, bad_input);
  const std::string text = arguments.as == "csv" ? csv_card(*made) : text_card(*made);
  return deliver_text(text, arguments.out, made->complete ? done : out_of_tolerance);
}

CLI::App* add_merge(CLI::App& app, MergeArguments& arguments) {
  auto* command = app.add_subcommand(
      "merge", "join summaries of readings, in the order of their rows, into that of the whole");
  command->add_option("SUMMARY", arguments.summaries, "summaries in JSON; - is standard input")
      ->required();
  command->add_option("--as", arguments.as, "form of the output")
      ->check(CLI::IsMember({"text", "json"}));
  command->add_option("--out", arguments.out, "write to this file (.json: as JSON)");
  return command;
}

int run_merge(const MergeArguments& arguments, const Library& library) {
  std::optional<Summary> whole;
  for (const auto& path : arguments.summaries) {
    int status = done;
    auto part = read_one(path, library, status);
    if (!part) return fail(part.findings, status);
    if (!whole) {
      whole = std::move(*part.value);
      continue;
    }
    const auto why = mismatch(whole->plan, part->plan);
    if (!why.empty()) {
      auto f = finding("summaries-differ", "these summaries do not belong together: " + why,
                       "summaries of readings judged by one recipe", "");
      f.place = Place{path, 0, 0, 1, ""};
      return fail({f}, bad_input);
    }
    whole->append(std::move(*part.value));
  }
  if (whole->too_many_groups) {
    return fail({finding("too-many-groups", "the groups of these readings are too many",
                         "at most 1000 groups", "")},
                bad_input);
  }
  const bool json =
      arguments.as.empty() ? arguments.out.ends_with(".json") : arguments.as == "json";
  const auto& verdicts = whole->overall.verdicts;
  const bool met = whole->rejected == 0 && verdicts.outside == 0 && verdicts.undecided == 0;
  return deliver_text(json ? json_summary(*whole) : text_summary(*whole), arguments.out,
                      met ? done : out_of_tolerance);
}

}  // namespace capsigh::cli
