// The operator's card: which gauge readings are allowed at which thermometer reading.
//
// At each temperature the accepted contents (the tolerance, or within it the acceptance zone of
// JCGM 106 at the instruments' doubt there) become pressures by the recipe's basis, gauge at this
// plant's ambient, less the offset that calibration adds to a reading. The lower limit is rounded
// up and the upper down to the gauge's graduation, so that no mark of the card is outside.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "capsigh/answer/advice.hpp"
#include "capsigh/answer/reading.hpp"
#include "capsigh/answer/report.hpp"

namespace capsigh {

inline constexpr std::size_t kMostCardRows = 200;

struct CardOptions {
  bool strict = false;                ///< a caution about a range is an error
  const Unit* pressure = nullptr;     ///< to show readings in; else the graduation's
  const Unit* temperature = nullptr;  ///< else that of the card's `from`
};

/// One line; pressures as the gauge shows them, in the card's unit.
struct CardRow {
  double shown = 0;               ///< on the thermometer, in the card's unit
  std::optional<double> lowest;   ///< rounded up to the step
  std::optional<double> target;   ///< nearest to the target
  std::optional<double> highest;  ///< rounded down
  double exact_low = 0;           ///< before rounding, where there is one; for programs
  double exact_high = 0;
  double u = 0;                ///< standard uncertainty of the content read at the target, SI
  bool empty = false;          ///< the instruments are too coarse: no content is accepted
  bool between_marks = false;  ///< what is allowed lies between two marks of the gauge
  std::optional<RefusalCode> refused;  ///< outside the model
};

struct Card {
  std::string title;
  std::vector<std::pair<std::string, std::string>> about;
  std::string liquid;
  std::string relation;  ///< "composition", or the trade's relation in force
  std::string gas;
  std::string wish;  ///< the target in the recipe's words
  JudgingRule rule;
  bool doubt_stated = false;  ///< some instrument has a ±
  Pressure ambient{};
  const Unit* pressure = nullptr;
  const Unit* temperature = nullptr;
  double step = 0;   ///< of the gauge, in `pressure`
  int decimals = 0;  ///< that show every mark
  int temperature_decimals = 0;
  std::vector<CardRow> rows;
  Advice advice;  ///< what would open an empty zone, at the first row that has one
  std::vector<std::pair<std::string, std::string>> instruments;  ///< of [gauge], in its words
  std::vector<std::string> doubt_not_stated;
  Findings assumptions;
  Findings cautions;
  Audit audit;
  bool complete = true;  ///< every row has a window
};

/// The card of a recipe. Without a value the findings say why; they are all the faults that could
/// be seen.
Outcome<Card> card(const Outcome<Recipe>& recipe, std::string_view recipe_text,
                   const Library& library, const CardOptions& options = {});

}  // namespace capsigh
