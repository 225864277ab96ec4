// Summaries of readings as text and as JSON, and JSON back into a summary for merging.
#pragma once

#include <string>

#include "capsigh/quality/summary.hpp"
#include "capsigh/quantity/finding.hpp"

namespace capsigh {

/// A summary for people: 80 columns, no colour.
std::string text_summary(const Summary& summary);

/// Figures for programs, and under "state" all that merging needs.
std::string json_summary(const Summary& summary);

/// A summary from its JSON; the constants of the charts are not in it: they are the library's whose
/// digest the plan names. `file` is for messages. Never throws, on any bytes.
Outcome<Summary> read_summary(const std::string& text, const std::string& file);

}  // namespace capsigh
