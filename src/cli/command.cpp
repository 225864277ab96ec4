#include "command.hpp"

#include <fmt/format.h>

#include <cstdio>

#include "capsigh/render/render.hpp"
#include "files.hpp"

namespace capsigh::cli {

int fail(const Findings& findings, int status) {
  fmt::print(stderr, "{}", text_findings(findings));
  return status;
}

Assembled assemble(const std::string& path, const RecipeArguments& arguments, std::string& texts) {
  Assembled all;
  all.document = Node{};
  all.document->kind = Node::Kind::table;
  std::vector<std::string> files = arguments.with;
  if (!path.empty()) files.push_back(path);
  for (const auto& file : files) {
    const auto text = read_input(file);
    if (!text) return {{}, text.findings, system_failed};
    texts += *text;
    const auto document = parse_document(*text, file == "-" ? "standard input" : file);
    if (!document) return {{}, document.findings, bad_input};
    overlay(*all.document, *document);
    all.document->place = document->place;
  }
  for (const auto& set : arguments.sets) {
    texts += set + "\n";
    const auto assignment = parse_assignment(set);
    if (!assignment) return {{}, assignment.findings, bad_input};
    overlay(*all.document, *assignment);
  }
  return all;
}

}  // namespace capsigh::cli
