// Records read from TOML, with the memory they live in. Shared by the build-time tool and by
// --constants DIR, so that both refuse the same things.
#pragma once

#include <deque>
#include <map>
#include <string>
#include <vector>

#include "capsigh/constants/library.hpp"
#include "capsigh/document/document.hpp"

namespace capsigh {

class RecordStore {
 public:
  /// Reads one file; findings where it is not in order.
  Findings add(std::string_view text, const std::string& file);
  /// Checks what spans files (sources and parts exist, keys are unique), sorts, and takes the
  /// digest. Call once, after the last add().
  Findings finish();

  [[nodiscard]] const std::vector<Record>& records() const { return records_; }
  [[nodiscard]] const std::vector<Source>& sources() const { return sources_; }
  [[nodiscard]] const std::string& digest() const { return digest_; }

 private:
  std::string_view keep(std::string text);

  std::deque<std::string> texts_;
  std::deque<std::vector<std::string_view>> lists_;
  std::deque<std::vector<Printed>> numbers_;
  std::deque<std::vector<ValidityBox>> boxes_;
  std::vector<Record> records_;
  std::vector<Source> sources_;
  std::map<std::string, Place, std::less<>> places_;
  std::string all_text_;
  std::string digest_;

  friend class RecordReader;
};

/// Reads every *.toml of a directory in the order of the names.
Findings read_directory(RecordStore& store, const std::string& directory);

}  // namespace capsigh
