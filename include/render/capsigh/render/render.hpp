// Report → string. Renderers compute nothing: every number comes from the answer and goes through
// the grammar.
#pragma once

#include <string>

#include "capsigh/answer/card.hpp"
#include "capsigh/answer/report.hpp"
#include "capsigh/constants/library.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh {

struct TextOptions {
  bool with_trace = false;
  std::vector<const Unit*> units;  ///< of --units, in the order asked; others are our own choice
};

/// A report for people: 80 columns, no colour.
std::string text_report(const Report& report, const TextOptions& options = {});

/// One row a report, RFC 4180: file, title, then every figure and its u, the unit in the header.
std::string csv_reports(const std::vector<std::pair<std::string, Report>>& reports);

/// Reports by the JSON contract: one an object, several an array.
std::string json_reports(const std::vector<Report>& reports, bool with_trace);

/// A card for the wall: 80 columns, no colour.
std::string text_card(const Card& card);
/// One row a temperature, RFC 4180, units in the header.
std::string csv_card(const Card& card);

/// Findings as a compiler prints them: file:line:column, the line, and the text underlined.
std::string text_findings(const Findings& findings);

/// The records whose key or gas the name matches (all, for an empty name), for an auditor.
std::string text_constants(const Library& library, const std::string& name);
std::string json_constants(const Library& library, const std::string& name);
/// Whether a record is called by that name: its key, or a whole part of it such as a gas.
bool record_matches(const Record& record, const std::string& name);
/// Whether any record matches.
bool constants_match(const Library& library, const std::string& name);

}  // namespace capsigh
