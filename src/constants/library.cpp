#include "capsigh/constants/library.hpp"

#include <algorithm>
#include <stdexcept>
#include <string>

#include "capsigh/constants/cited.hpp"
#include "store.hpp"

namespace capsigh {

Library::Library(std::span<const Record> records, std::span<const Source> sources,
                 std::string_view digest, std::shared_ptr<const RecordStore> store)
    : records_(records), sources_(sources), digest_(digest), store_(std::move(store)) {}

const Record* Library::find(std::string_view key) const {
  const auto it = std::lower_bound(records_.begin(), records_.end(), key,
                                   [](const Record& r, std::string_view k) { return r.key < k; });
  return it != records_.end() && it->key == key ? &*it : nullptr;
}

const Record& Library::at(std::string_view key) const {
  if (const Record* record = find(key)) return *record;
  throw std::logic_error("no record of the key " + std::string(key));
}

const Source* Library::source(std::string_view key) const {
  const auto it = std::lower_bound(sources_.begin(), sources_.end(), key,
                                   [](const Source& s, std::string_view k) { return s.key < k; });
  return it != sources_.end() && it->key == key ? &*it : nullptr;
}

Outcome<Library> load_library(const std::string& directory) {
  auto store = std::make_shared<RecordStore>();
  auto findings = read_directory(*store, directory);
  if (has_error(findings)) return {{}, findings};
  for (const auto& record : built_in_library().records()) {
    const bool present = std::any_of(store->records().begin(), store->records().end(),
                                     [&](const Record& r) { return r.key == record.key; });
    if (present) continue;
    Finding f;
    f.code = "record-missing";
    f.message = "the record '" + std::string(record.key) + "' is missing";
    f.expected = "the whole set of tables, not a patch";
    f.place = Place{directory, 0, 0, 1, ""};
    findings.push_back(f);
  }
  if (has_error(findings)) return {{}, findings};
  return {Library(store->records(), store->sources(), store->digest(), store), findings};
}

RecordDoubt doubt_of(const Record& record) {
  RecordDoubt doubt;
  doubt.record = &record;
  doubt.u = record.uncertainty.value;
  doubt.is_absolute = record.uncertainty.kind == UncertaintyKind::absolute;
  return doubt;
}

}  // namespace capsigh
