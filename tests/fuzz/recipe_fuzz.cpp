// Any bytes as a recipe: no crash, no hang, and no NaN or infinity in what is printed.
#include <cstdio>
#include <cstdlib>
#include <string>

#include "capsigh/answer/report.hpp"
#include "capsigh/render/render.hpp"

namespace {

using namespace capsigh;

bool word_character(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z'); }

// The word alone, so that "finance" in a title is no infinity.
bool has_word(const std::string& text, const std::string& word) {
  for (std::size_t at = text.find(word); at != std::string::npos; at = text.find(word, at + 1)) {
    const bool before = at > 0 && word_character(text[at - 1]);
    const std::size_t end = at + word.size();
    const bool after = end < text.size() && word_character(text[end]);
    if (!before && !after) return true;
  }
  return false;
}

void check(const Report& report) {
  bool finite = true;
  each_figure(report.answer, [&](const FigurePath&, const auto& figure, const JsonUnit&) {
    finite = finite && std::isfinite(si_value(figure.value)) && std::isfinite(si_value(figure.u));
  });
  const std::string json = json_reports({report}, true);
  // Texts of the recipe itself may say anything; figures are checked above and null is their NaN.
  if (finite && !has_word(json, "null")) return;
  if (finite && (has_word(report.title, "null") || !report.about.empty())) return;
  std::fprintf(stderr, "no finite figure in:\n%s\n", json.c_str());
  std::abort();
}

}  // namespace

extern "C" int LLVMFuzzerTestOneInput(const unsigned char* data, std::size_t size) {
  const std::string text(reinterpret_cast<const char*>(data), size);
  const auto document = parse_document(text, "fuzz");
  if (!document) {
    text_findings(document.findings);
    return 0;
  }
  const auto answered = report(read_recipe(*document, "fuzz"), text, built_in_library());
  if (!answered) {
    if (answered.findings.empty()) std::abort();  // a refusal says why
    text_findings(answered.findings);
    return 0;
  }
  check(*answered);
  TextOptions options;
  options.with_trace = true;
  text_report(*answered, options);
  return 0;
}
