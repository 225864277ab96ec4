#include <algorithm>
#include <cctype>
#include <cmath>
#include <nlohmann/json.hpp>

#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/render.hpp"

namespace capsigh {
namespace {

using Json = nlohmann::ordered_json;

bool is_index(std::string_view part) {
  return !part.empty() && std::all_of(part.begin(), part.end(),
                                      [](unsigned char c) { return std::isdigit(c) != 0; });
}

// The object a path leads to, made on the way; digits are a place in an array.
Json& descend(Json& root, const FigurePath& path) {
  Json* at = &root;
  for (const auto part : path) {
    if (is_index(part)) {
      const auto index = std::stoul(std::string(part));
      if (at->is_null()) *at = Json::array();
      while (at->size() <= index) at->push_back(Json());
      at = &(*at)[index];
    } else {
      at = &(*at)[std::string(part)];
    }
  }
  return *at;
}

template <class Q>
Json quantity(const Figure<Q>& figure, const JsonUnit& unit) {
  const Unit in{unit.ucum, Dimension::fraction, unit.factor, unit.offset, Reference::none};
  Json q;
  q["value"] = for_machines(in_unit(si_value(figure.value), in));
  q["unit"] = unit.ucum;
  const double u = difference_in_unit(si_value(figure.u), in);
  if (u > 0 && figure.doubt_known) q["u"] = doubt_for_machines(u);
  if (figure.nonlinear) q["nonlinear"] = true;
  if (figure.low && figure.high) {
    q["low"] = for_machines(in_unit(si_value(*figure.low), in));
    q["high"] = for_machines(in_unit(si_value(*figure.high), in));
    q["u_first_order"] = doubt_for_machines(difference_in_unit(si_value(figure.u_first), in));
  }
  return q;
}

Json findings(const Findings& list) {
  Json out = Json::array();
  for (const auto& f : list) out.push_back({{"code", f.code}, {"message", f.message}});
  return out;
}

Json budget(const std::vector<BudgetLine>& lines) {
  Json out = Json::array();
  for (const auto& line : lines) {
    out.push_back({{"of", line.of},
                   {"input", line.input},
                   {"kind", line.is_record ? "record" : "input"},
                   {"u", {{"value", doubt_for_machines(line.u)}, {"unit", line.u_unit}}},
                   {"share", doubt_for_machines(line.share)},
                   {"contribution", doubt_for_machines(line.contribution)}});
  }
  return out;
}

// Which limit of error would do; null where nothing need be done.
Json advice(const Advice& a) {
  if (a.by == Advice::By::nothing) return nullptr;
  Json out{{"possible", a.by != Advice::By::none}, {"improvements", Json::array()}};
  for (const auto& i : a.improvements) {
    out["improvements"].push_back(
        {{"input", i.input},
         {"now", {{"value", doubt_for_machines(i.now)}, {"unit", i.unit}}},
         {"needed", {{"value", doubt_for_machines(i.needed)}, {"unit", i.unit}}}});
  }
  return out;
}

// The measured values that are accepted; an open end is left out.
Json acceptance(const JudgedTarget& t) {
  const Unit in{t.unit.ucum, Dimension::fraction, t.unit.factor, t.unit.offset, Reference::none};
  Json out{{"empty", t.zone.empty}};
  const auto put = [&](const char* key, double si, bool difference) {
    const double number = difference ? difference_in_unit(si, in) : in_unit(si, in);
    if (std::isfinite(number))
      out[key] = {{"value", doubt_for_machines(number)}, {"unit", in.text}};
  };
  if (t.zone.empty) {
    out["best_probability"] = doubt_for_machines(t.zone.best_probability);
    put("u_to_open", t.zone.u_to_open, true);
    return out;
  }
  put("low", t.zone.values.low, false);
  put("high", t.zone.values.high, false);
  put("guard_band", t.zone.guard_band, true);
  return out;
}

Json value_of(const TraceValue& v) {
  return {{"symbol", v.symbol}, {"value", for_machines(v.value)}, {"unit", v.unit}};
}

Json trace(const Trace& trace) {
  Json out = Json::array();
  for (const auto& chain : trace.chains) {
    Json steps = Json::array();
    for (const auto& step : chain.steps) {
      Json inputs = Json::array();
      for (const auto& in : step.inputs) inputs.push_back(value_of(in));
      Json j{{"law", step.law}, {"equation", step.equation}, {"inputs", inputs}};
      j["result"] = value_of(step.result);
      if (step.record != nullptr) {
        j["record"] = step.record->key;
        j["source"] = step.record->source;
      }
      steps.push_back(std::move(j));
    }
    out.push_back({{"figure", chain.figure}, {"steps", steps}});
  }
  return out;
}

Json pairs(const std::vector<std::pair<std::string, std::string>>& list) {
  Json out = Json::array();
  for (const auto& [key, text] : list) out.push_back({{"key", key}, {"text", text}});
  return out;
}

Json one(const Report& report, bool with_trace) {
  Json j;
  j["title"] = report.title;
  for (const auto& [key, text] : report.about) j["about"][key] = text;
  each_figure(report.answer, [&](const FigurePath& path, const auto& figure, const JsonUnit& unit) {
    if (figure.asked) descend(j, path) = quantity(figure, unit);
  });
  const auto& shelf_life = report.answer.package.shelf_life;
  for (std::size_t i = 0; i < shelf_life.size(); ++i) {
    if (!shelf_life[i].until_limit.asked) continue;
    j["container"]["shelf_life"][i]["gas"] = shelf_life[i].gas;
  }
  for (const auto& t : report.judged) {
    auto& target = j["target"][t.gas];
    target["verdict"] = t.verdict == Verdict::inside    ? "inside"
                        : t.verdict == Verdict::outside ? "outside"
                                                        : "undecided";
    target["probability"] = doubt_for_machines(t.probability);
    target["wish"] = t.wish;
    target["rule"] = t.guarded ? "guarded" : "simple";
    target["acceptance"] = acceptance(t);
    const auto better = advice(t.advice);
    if (!better.is_null()) target["advice"] = better;
  }
  j["relation"] = report.relation;
  j["answers"] = report.main_figures;
  j["second_opinion"] = Json::array();
  for (const auto& o : report.second_opinion) {
    j["second_opinion"].push_back(
        {{"relation", o.relation},
         {"quantity", o.quantity},
         {"value", {{"value", for_machines(o.value)}, {"unit", o.unit.ucum}}},
         {"difference", {{"value", doubt_for_machines(o.difference)}, {"unit", "%"}}}});
  }
  j["budget"] = budget(report.budget);
  if (report.monte_carlo) {
    const auto& run = *report.monte_carlo;
    j["monte_carlo"] = {{"draws", run.draws},
                        {"seed", run.seed},
                        {"unanswered", run.unanswered},
                        {"coverage", run.coverage}};
  }
  j["doubt_not_stated"] = report.doubt_not_stated;
  j["cautions"] = findings(report.cautions);
  j["assumptions"] = findings(report.assumptions);
  j["sources"] = Json::array();
  for (const auto& s : report.sources) {
    j["sources"].push_back({{"key", s.key}, {"citation", s.citation}});
  }
  if (with_trace) j["trace"] = trace(report.trace);
  j["audit"] = {{"program", report.audit.program},
                {"version", report.audit.version},
                {"recipe_digest", report.audit.recipe_digest},
                {"constants_digest", report.audit.constants_digest},
                {"inputs", pairs(report.audit.inputs)}};
  return j;
}

Json record_json(const Record& r, const Library& library) {
  Json j{{"key", r.key}, {"form", r.form}, {"definition", r.definition}, {"unit", r.unit}};
  j["values"] = Json::array();
  for (std::size_t i = 0; i < r.values.size(); ++i) {
    j["values"].push_back(
        {{"symbol", r.symbols[i]}, {"digits", r.values[i].digits}, {"value", r.values[i].value}});
  }
  if (!r.reference.empty()) j["reference"] = r.reference;
  if (!r.scale.empty()) j["scale"] = r.scale;
  j["range"] = r.range_text;
  j["uncertainty"] = r.uncertainty.printed;
  if (!r.uncertainty.basis.empty()) j["uncertainty_basis"] = r.uncertainty.basis;
  j["source"] = {{"key", r.source}, {"citation", library.source(r.source)->citation}};
  j["locator"] = r.locator;
  j["origin"] = r.origin;
  if (!r.note.empty()) j["note"] = r.note;
  if (!r.parts.empty()) j["parts"] = std::vector<std::string>(r.parts.begin(), r.parts.end());
  j["assumed"] = r.assumed;
  return j;
}

constexpr int kIndent = 2;

}  // namespace

std::string json_reports(const std::vector<Report>& reports, bool with_trace) {
  if (reports.size() == 1) return one(reports.front(), with_trace).dump(kIndent) + "\n";
  Json all = Json::array();
  for (const auto& report : reports) all.push_back(one(report, with_trace));
  return all.dump(kIndent) + "\n";
}

std::string json_constants(const Library& library, const std::string& name) {
  Json j;
  j["constants_digest"] = library.digest();
  j["records"] = Json::array();
  for (const auto& record : library.records()) {
    if (record_matches(record, name)) j["records"].push_back(record_json(record, library));
  }
  return j.dump(kIndent) + "\n";
}

}  // namespace capsigh
