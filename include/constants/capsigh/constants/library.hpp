// The set of records a run rests on: the tables compiled in, or a directory read at run time.
#pragma once

#include <memory>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "capsigh/constants/record.hpp"
#include "capsigh/quantity/finding.hpp"

namespace capsigh {

class RecordStore;

/// Records and sources by key. Views into static tables or into a store that it keeps alive.
class Library {
 public:
  Library(std::span<const Record> records, std::span<const Source> sources, std::string_view digest,
          std::shared_ptr<const RecordStore> store = nullptr);

  /// The record of that key, or nullptr.
  [[nodiscard]] const Record* find(std::string_view key) const;
  /// The record of that key; the key must exist (a programming error otherwise: throws
  /// std::logic_error naming the key).
  [[nodiscard]] const Record& at(std::string_view key) const;
  [[nodiscard]] const Source* source(std::string_view key) const;
  [[nodiscard]] std::span<const Record> records() const { return records_; }
  [[nodiscard]] std::span<const Source> sources() const { return sources_; }
  /// Identifies the constants: "sha1:" of the files joined in the order of their names.
  [[nodiscard]] std::string_view digest() const { return digest_; }

 private:
  std::span<const Record> records_;  // sorted by key
  std::span<const Source> sources_;  // sorted by key
  std::string digest_;
  std::shared_ptr<const RecordStore> store_;
};

/// The tables compiled into the program.
const Library& built_in_library();

/// Reads every *.toml of a directory (the whole set, not a patch). Findings name file and line of
/// whatever is missing: a record without source, range or definition is refused.
Outcome<Library> load_library(const std::string& directory);

/// "sha1:" and the hexadecimal digest of a text.
std::string sha1_digest(std::string_view text);

}  // namespace capsigh
