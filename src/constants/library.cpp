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

namespace {

// A record of a directory must offer what the program takes from the built-in one.
bool same_shape(const Record& a, const Record& b) {
  return a.form == b.form && a.values.size() == b.values.size() &&
         a.parts.size() == b.parts.size() && a.limit.size() == b.limit.size() && a.unit == b.unit &&
         a.range.empty() == b.range.empty();
}

}  // namespace

Outcome<Library> load_library(const std::string& directory) {
  auto store = std::make_shared<RecordStore>();
  auto findings = read_directory(*store, directory);
  if (has_error(findings)) return {{}, findings};
  for (const auto& record : built_in_library().records()) {
    const auto it = std::find_if(store->records().begin(), store->records().end(),
                                 [&](const Record& r) { return r.key == record.key; });
    const bool missing = it == store->records().end();
    if (!missing && same_shape(*it, record)) continue;
    Finding f;
    f.code = missing ? "record-missing" : "record-shape";
    f.message = "the record '" + std::string(record.key) +
                (missing ? "' is missing" : "' has another form than the program expects");
    f.expected = missing ? "the whole set of tables, not a patch"
                         : "form '" + std::string(record.form) + "' with " +
                               std::to_string(record.values.size()) + " values" +
                               (record.limit.empty() ? "" : " and a limit");
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
