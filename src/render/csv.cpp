#include <algorithm>
#include <vector>

#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/render.hpp"

namespace capsigh {
namespace {

// RFC 4180: quoted where a comma, a quote or a line end is in it.
std::string cell(const std::string& text) {
  if (text.find_first_of(",\"\r\n") == std::string::npos) return text;
  std::string quoted = "\"";
  for (const char c : text) {
    if (c == '"') quoted += '"';
    quoted += c;
  }
  return quoted + "\"";
}

struct Column {
  std::string name;
  std::string value;
};

std::vector<Column> columns_of(const Report& report) {
  std::vector<Column> columns;
  columns.push_back({"relation", report.relation});
  std::string codes;
  for (const auto& caution : report.cautions) codes += (codes.empty() ? "" : " ") + caution.code;
  columns.push_back({"cautions", codes});
  std::string assumed;
  for (const auto& a : report.assumptions) assumed += (assumed.empty() ? "" : " ") + a.code;
  columns.push_back({"assumptions", assumed});
  std::string exact;
  for (const auto& key : report.doubt_not_stated) exact += (exact.empty() ? "" : " ") + key;
  columns.push_back({"doubt_not_stated", exact});
  for (const auto& [key, text] : report.about) columns.push_back({"about." + key, text});
  columns.push_back({"version", report.audit.version});
  columns.push_back({"recipe_digest", report.audit.recipe_digest});
  columns.push_back({"constants_digest", report.audit.constants_digest});
  if (report.monte_carlo) {
    columns.push_back({"monte_carlo.draws", std::to_string(report.monte_carlo->draws)});
    columns.push_back({"monte_carlo.seed", std::to_string(report.monte_carlo->seed)});
  }
  for (const auto& [key, text] : report.audit.inputs) {
    if (key.starts_with("contact.") || key.starts_with("target.") || key.starts_with("judging.")) {
      columns.push_back({"input." + key, text});
    }
  }
  for (const auto& o : report.second_opinion) {
    columns.push_back(
        {"second_opinion." + o.relation + "." + o.quantity + " [" + std::string(o.unit.ucum) + "]",
         shortest(for_machines(o.value))});
  }
  for (const auto& j : report.judged) {
    columns.push_back({"target." + j.gas + ".rule", j.guarded ? "guarded" : "simple"});
    columns.push_back({"target." + j.gas + ".verdict", j.verdict == Verdict::inside ? "inside"
                                                       : j.verdict == Verdict::outside
                                                           ? "outside"
                                                           : "undecided"});
    columns.push_back(
        {"target." + j.gas + ".probability", shortest(doubt_for_machines(j.probability))});
  }
  each_figure(report.answer, [&](const FigurePath& path, const auto& figure, const JsonUnit& unit) {
    if (!figure.asked) return;
    const Unit in{unit.ucum, Dimension::fraction, unit.factor, unit.offset, Reference::none};
    const std::string head = path.text() + " [" + std::string(unit.ucum) + "]";
    columns.push_back({head, shortest(for_machines(in_unit(si_value(figure.value), in)))});
    const double u = difference_in_unit(si_value(figure.u), in);
    columns.push_back({"u " + head, u > 0 ? shortest(doubt_for_machines(u)) : ""});
  });
  return columns;
}

}  // namespace

std::string csv_reports(const std::vector<std::pair<std::string, Report>>& reports) {
  // The columns of all reports, in the order in which they first appear.
  std::vector<std::string> names;
  std::vector<std::vector<Column>> rows;
  for (const auto& [file, report] : reports) {
    rows.push_back(columns_of(report));
    for (const auto& column : rows.back()) {
      if (std::find(names.begin(), names.end(), column.name) == names.end()) {
        names.push_back(column.name);
      }
    }
  }
  std::string out = "recipe,title";
  for (const auto& name : names) out += "," + cell(name);
  out += "\r\n";
  for (std::size_t i = 0; i < rows.size(); ++i) {
    out += cell(reports[i].first) + "," + cell(reports[i].second.title);
    for (const auto& name : names) {
      const auto it = std::find_if(rows[i].begin(), rows[i].end(),
                                   [&](const Column& c) { return c.name == name; });
      out += "," + (it == rows[i].end() ? std::string() : cell(it->value));
    }
    out += "\r\n";
  }
  return out;
}

}  // namespace capsigh
