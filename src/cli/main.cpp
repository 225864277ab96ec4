// The command: arguments, files and exit statuses.
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>
#include <cstdio>
#include <exception>

#include "capsigh/render/render.hpp"
#include "files.hpp"

namespace {

using namespace capsigh;

enum Exit : int { done = 0, out_of_tolerance = 1, bad_input = 2, system_failed = 3 };

struct ReportArguments {
  std::vector<std::string> recipes;
  std::string as = "text";
  std::string out;
  bool strict = false;
  bool trace = false;
};

int fail(const Findings& findings, int status) {
  fmt::print(stderr, "{}", text_findings(findings));
  return status;
}

// Writes where the result belongs; a file is whole or absent.
int deliver(const std::string& text, const std::string& path) {
  if (const auto problem = cli::deliver(text, path)) return fail({*problem}, system_failed);
  return done;
}

int run_report(const ReportArguments& arguments, const Library& library) {
  std::vector<Report> reports;
  int status = done;
  for (const auto& path : arguments.recipes) {
    const auto text = cli::read_input(path);
    if (!text) return fail(text.findings, system_failed);
    const auto document = parse_document(*text, path == "-" ? "standard input" : path);
    if (!document) return fail(document.findings, bad_input);
    const auto recipe = read_recipe(*document, path);
    auto answered = report(recipe, *text, library, {.strict = arguments.strict});
    if (!answered) {
      status = fail(answered.findings, bad_input);
      continue;
    }
    reports.push_back(std::move(*answered.value));
  }
  if (status != done) return status;
  if (arguments.as == "json") return deliver(json_reports(reports, arguments.trace), arguments.out);
  std::string text;
  for (const auto& report : reports) {
    if (!text.empty()) text += "\n" + std::string(80, '=') + "\n\n";
    text += text_report(report, arguments.trace);
  }
  return deliver(text, arguments.out);
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
  report_command->add_option("RECIPE", arguments.recipes, "recipe files; - is standard input")
      ->required();
  report_command->add_option("--as", arguments.as, "form of the output")
      ->check(CLI::IsMember({"text", "json"}));
  report_command->add_option("--out", arguments.out, "write to this file");
  report_command->add_flag("--strict", arguments.strict, "refuse what is outside its range");
  report_command->add_flag("--trace", arguments.trace, "show how each figure came about");

  std::string name;
  std::string as = "text";
  std::string out;
  auto* constants_command = app.add_subcommand("constants", "what the numbers rest on");
  constants_command->add_option("NAME", name, "a record's key, or a part of keys such as CO2");
  constants_command->add_option("--as", as, "form of the output")
      ->check(CLI::IsMember({"text", "json"}));
  constants_command->add_option("--out", out, "write to this file");

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
