#include "readings_command.hpp"

#include <fmt/format.h>

#include <csignal>
#include <cstdio>

#include "capsigh/render/render.hpp"
#include "capsigh/render/summary.hpp"
#include "files.hpp"

namespace capsigh::cli {
namespace {

// The summary where it belongs; a file is whole or absent.
std::optional<Finding> deliver_summary(const ReadingsArguments& arguments, const Summary& summary) {
  const bool json =
      arguments.as.empty() ? arguments.summary.ends_with(".json") : arguments.as == "json";
  const std::string text = json ? json_summary(summary) : text_summary(summary);
  if (!arguments.summary.empty()) return deliver(text, arguments.summary);
  fmt::print(stderr, "{}", text);
  return std::nullopt;
}

int status_of(const ReadingsRun& run) {
  if (run.system_failed) return system_failed;
  if (has_error(run.findings) || run.stopped_at) return bad_input;
  const auto& verdicts = run.summary.overall.verdicts;
  const bool met = run.summary.rejected == 0 && verdicts.outside == 0 && verdicts.undecided == 0;
  return met ? done : out_of_tolerance;
}

}  // namespace

CLI::App* add_readings(CLI::App& app, ReadingsArguments& arguments) {
  auto* command = app.add_subcommand("readings", "judge gauge readings: CSV in, CSV out, summary");
  command->add_option("FILE", arguments.request.input,
                      "readings, gz or not; - is standard input (the default)");
  command->add_option("--for", arguments.recipe, "the recipe they are judged by")->required();
  command->add_option("--with", arguments.around.with, "lay this shared file under the recipe")
      ->allow_extra_args(false);
  command->add_option("--set", arguments.around.sets, "set one key: judging.rule=simple")
      ->allow_extra_args(false);
  command->add_option("--out", arguments.request.out, "write the rows to this file");
  command->add_option("--summary", arguments.summary,
                      "write the summary to this file (.json: as JSON, for merge)");
  command->add_option("--as", arguments.as, "form of the summary")
      ->check(CLI::IsMember({"text", "json"}));
  command->add_option("--rejects", arguments.request.rejects,
                      "write rows that cannot be judged to this file, with line and reason");
  command->add_flag("--resume", arguments.request.resume,
                    "go on where an interrupted run left --out (and --rejects)");
  command->add_flag("--stop-on-error", arguments.request.stop_on_error,
                    "stop at the first row that cannot be judged");
  constexpr unsigned most_threads = 1024;
  command->add_option("--threads", arguments.request.threads, "threads (1); same output for any")
      ->check(CLI::Range(1U, most_threads));
  return command;
}

int run_readings(const ReadingsArguments& arguments, const Library& library) {
  if (arguments.request.resume && arguments.request.out.empty()) {
    Finding f;
    f.code = "resume-without-out";
    f.message = "--resume needs the file to go on with";
    f.example = "capsigh readings log.csv --for soda.toml --out judged.csv --resume";
    return fail({f}, bad_input);
  }
  std::string texts;
  const auto assembled = assemble(arguments.recipe, arguments.around, texts);
  if (!assembled.document) return fail(assembled.findings, assembled.status);
  const auto recipe = read_recipe(*assembled.document,
                                  arguments.recipe == "-" ? "standard input" : arguments.recipe);
  if (!recipe) return fail(recipe.findings, bad_input);
  const auto plan = plan_readings(*recipe, texts, library);
  if (!plan) return fail(plan.findings, bad_input);
  // A reader that goes away is a failed write, said and ended on 3.
  std::signal(SIGPIPE, SIG_IGN);
  const auto run = judge_readings(arguments.request, *plan, [&](const Findings& notes) {
    Findings all = plan.findings;
    all.insert(all.end(), notes.begin(), notes.end());
    if (!all.empty()) fmt::print(stderr, "{}", text_findings(all));
  });
  if (!run.findings.empty()) fmt::print(stderr, "{}", text_findings(run.findings));
  const int status = status_of(run);
  if (status == system_failed || status == bad_input) return status;
  if (const auto problem = deliver_summary(arguments, run.summary)) {
    return fail({*problem}, system_failed);
  }
  return status;
}

}  // namespace capsigh::cli
