// Which column of a file means what: by its header "temperature [degC]" or "pressure (psig)", or by
// the recipe's [judging] columns.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "capsigh/quantity/finding.hpp"
#include "capsigh/readings/csv.hpp"
#include "capsigh/readings/timestamp.hpp"
#include "capsigh/recipe/recipe.hpp"

namespace capsigh {

/// What a recipe says of the file: header text and its meaning, and the columns that group rows.
struct ColumnWishes {
  struct Mapped {
    LocatedText header;   ///< "Temp (F)"
    LocatedText meaning;  ///< "temperature [degF]"
  };
  std::vector<Mapped> columns;
  std::vector<LocatedText> group_by;
  std::optional<LocatedText> subgroup;  ///< a column of labels
};

/// A column of numbers: SI value = factor · number + offset.
struct NumberColumn {
  std::size_t at = 0;
  double factor = 1;
  double offset = 0;
  std::string unit;  ///< as written, for messages
};

struct Columns {
  std::size_t count = 0;
  std::optional<NumberColumn> temperature;
  std::optional<NumberColumn> pressure;
  bool gauge = true;  ///< the pressure is gauge, else absolute
  std::optional<NumberColumn> ambient;
  std::optional<NumberColumn> air;      ///< volume at ambient
  std::optional<NumberColumn> content;  ///< measured by another instrument
  ContentMeasure content_measure = ContentMeasure::volumes;
  std::optional<std::size_t> time;
  DateOrder dates = DateOrder::unknown;
  std::vector<std::size_t> groups;
  std::optional<std::size_t> label;
  std::vector<std::string> names;  ///< as in the file
};

/// Finds the columns of a header, or says all that is wrong with it. `file` is for messages.
Outcome<Columns> find_columns(const std::string& header, const Dialect& dialect,
                              const ColumnWishes& wishes, const std::string& file);

}  // namespace capsigh
