// Findings: what a run has to say beside its figures. Failures are values of this type, never
// sentinels; a finding that has a place in a file shows it.
#pragma once

#include <optional>
#include <string>
#include <utility>
#include <vector>

namespace capsigh {

/// Where in a text something stands. Lines and columns count from 1, columns in bytes.
struct Place {
  std::string file;
  std::size_t line = 0;  ///< 0: the file as a whole
  std::size_t column = 0;
  std::size_t length = 1;
  std::string line_text;
};

enum class Severity { assumption, caution, error };

struct Finding {
  Severity severity = Severity::error;
  std::string code;      ///< short and stable, for programs: "unknown-key"
  std::string message;   ///< one sentence
  std::string expected;  ///< what would have been right, may be empty
  std::string example;   ///< something that works, may be empty
  std::optional<Place> place;
  std::optional<Place> conflicts_with;
};

using Findings = std::vector<Finding>;

inline bool has_error(const Findings& findings) {
  for (const auto& f : findings) {
    if (f.severity == Severity::error) return true;
  }
  return false;
}

/// A value, or the findings that say why there is none; findings may accompany a value too.
template <class T>
struct Outcome {
  std::optional<T> value;
  Findings findings;

  explicit operator bool() const { return value.has_value(); }
  const T& operator*() const { return *value; }
  const T* operator->() const { return &*value; }
};

/// The name in `known` nearest to `name` by edit distance, if near enough to be a slip of the pen.
std::optional<std::string> nearest_name(const std::string& name,
                                        const std::vector<std::string>& known);

}  // namespace capsigh
