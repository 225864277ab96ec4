// A published (or assumed) set of coefficients with all that an auditor asks of it.
#pragma once

#include <span>
#include <string_view>

#include "capsigh/quantity/validity.hpp"

namespace capsigh {

/// A number exactly as printed in its source, and its value.
struct Printed {
  std::string_view digits;
  double value = 0;
};

/// What a record's uncertainty number means. `exact`: by definition. `not_stated`: the source gives
/// none and none is assumed; only records that carry no figure may say so.
enum class UncertaintyKind { exact, relative, absolute, not_stated };

/// Standard uncertainty (k = 1) of the law's result: relative as a fraction, absolute in SI units.
struct StatedUncertainty {
  UncertaintyKind kind = UncertaintyKind::not_stated;
  std::string_view printed;  ///< as written in the table: "0.7 %"
  double value = 0;
  std::string_view basis;  ///< where that number comes from
};

/// A publication.
struct Source {
  std::string_view key;
  std::string_view citation;
};

/// One record. `values` are in `unit` and meet `definition`; `factor` brings a result in `unit` to
/// SI units. `range` is a union of boxes, empty where the law holds
/// everywhere; beyond `limit` (when given) no answer is given at all.
struct Record {
  std::string_view key;
  std::string_view form;
  std::span<const std::string_view> symbols;
  std::span<const Printed> values;
  std::string_view unit;
  double factor = 1;
  std::string_view definition;
  std::string_view reference;  ///< reference pressure of a Henry's constant
  std::string_view scale;      ///< fugacity or partial pressure, of a Henry's constant
  std::string_view range_text;
  std::span<const ValidityBox> range;
  std::span<const ValidityBox> limit;
  StatedUncertainty uncertainty;
  std::string_view source;
  std::string_view locator;
  std::string_view origin;
  std::string_view note;
  std::span<const std::string_view> parts;  ///< keys of records that this one combines
  bool assumed = false;
};

}  // namespace capsigh
