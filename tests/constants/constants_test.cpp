#include <catch2/catch.hpp>

#include <filesystem>
#include <fstream>

#include "capsigh/constants/library.hpp"
#include "constants/store.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

const std::string kTables = std::string(CAPSIGH_SOURCE) + "/constants";

const std::string kGood =
    "[[source]]\nkey = \"s\"\ncitation = \"c\"\n"
    "[[record]]\nkey = \"a.b\"\nform = \"constant\"\nsymbols = [\"x\"]\nvalues = [\"1.50\"]\n"
    "unit = \"1\"\ndefinition = \"d\"\nrange = \"everywhere\"\nuncertainty = \"exact\"\n"
    "source = \"s\"\nlocator = \"l\"\norigin = \"read\"\n";

// Codes of everything that is refused when `line` replaces the line that begins like it.
std::vector<std::string> codes_without(const std::string& key, const std::string& instead = "") {
  std::string text = kGood;
  const auto record = text.find("[[record]]");
  const auto at = text.find("\n" + key + " = ", record) + 1;
  text.replace(at, text.find('\n', at) + 1 - at, instead);
  RecordStore store;
  auto findings = store.add(text, "t.toml");
  if (findings.empty()) findings = store.finish();
  std::vector<std::string> codes;
  for (const auto& f : findings) codes.push_back(f.code);
  return codes;
}

}  // namespace

TEST_CASE("the built-in tables are the files, digit by digit") {
  const auto read = load_library(kTables);
  for (const auto& f : read.findings) UNSCOPED_INFO(f.message);
  REQUIRE(read);
  const auto& built_in = built_in_library();
  CHECK(read->digest() == built_in.digest());
  REQUIRE(read->records().size() == built_in.records().size());
  for (const auto& record : built_in.records()) {
    INFO(record.key);
    const Record& file = read->at(record.key);
    REQUIRE(file.values.size() == record.values.size());
    for (std::size_t i = 0; i < record.values.size(); ++i) {
      CHECK(file.values[i].digits == record.values[i].digits);
      CHECK(std::stod(std::string(record.values[i].digits)) == record.values[i].value);
    }
    CHECK(file.uncertainty.value == record.uncertainty.value);
    CHECK(file.range_text == record.range_text);
    CHECK(file.factor == record.factor);
  }
}

TEST_CASE("the checksum of every table is pinned") {
  // A change of a coefficient must be meant: it changes this list too. `sha1sum constants/*.toml`.
  std::ifstream in(std::string(CAPSIGH_SOURCE) + "/tests/constants/checksums.txt");
  REQUIRE(in);
  std::string digest;
  std::string name;
  std::size_t tables = 0;
  while (in >> digest >> name) {
    std::ifstream file(kTables + "/" + name, std::ios::binary);
    std::ostringstream text;
    text << file.rdbuf();
    INFO(name);
    CHECK(sha1_digest(text.str()) == "sha1:" + digest);
    ++tables;
  }
  std::size_t files = 0;
  for (const auto& entry : std::filesystem::directory_iterator(kTables)) {
    if (entry.path().extension() == ".toml") ++files;
  }
  CHECK(tables == files);
}

TEST_CASE("every record says where it comes from") {
  for (const auto& record : built_in_library().records()) {
    INFO(record.key);
    CHECK(built_in_library().source(record.source) != nullptr);
    CHECK_FALSE(record.definition.empty());
    CHECK_FALSE(record.range_text.empty());
    CHECK_FALSE(record.locator.empty());
    CHECK_FALSE(record.origin.empty());
    CHECK(record.uncertainty.kind != UncertaintyKind::not_stated);
  }
}

TEST_CASE("a record without source, range or definition is refused") {
  CHECK(codes_without("form", "form = \"constant\"\n").empty());
  for (const std::string key : {"source", "range", "definition", "locator", "origin", "unit",
                                "uncertainty", "form", "key"}) {
    INFO(key);
    CHECK_FALSE(codes_without(key).empty());
  }
  CHECK(codes_without("source", "source = \"nobody\"\n") ==
        std::vector<std::string>{"record-source"});
  CHECK(codes_without("values", "values = [\"1,5\"]\n") ==
        std::vector<std::string>{"record-number"});
  CHECK(codes_without("symbols", "symbols = []\n") == std::vector<std::string>{"record-symbols"});
  CHECK(codes_without("origin", "origin = \"hearsay\"\n") ==
        std::vector<std::string>{"record-origin"});
  CHECK(codes_without("unit", "unit = \"furlong\"\n") == std::vector<std::string>{"record-unit"});
  CHECK(codes_without("uncertainty", "uncertainty = \"some\"\nuncertainty_basis = \"b\"\n") ==
        std::vector<std::string>{"record-uncertainty"});
  CHECK(codes_without("form", "form = \"constant\"\nparts = [\"none\"]\n") ==
        std::vector<std::string>{"record-parts"});
  CHECK(codes_without("form", "form = \"constant\"\nrnage = \"x\"\n") ==
        std::vector<std::string>{"unknown-key"});
}

TEST_CASE("digests are those of sha1sum") {
  // FIPS 180 example.
  CHECK(sha1_digest("abc") == "sha1:a9993e364706816aba3e25717850c26c9cd0d89d");
}
