#include "files.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <cerrno>
#include <cstdio>
#include <cstring>
#include <filesystem>
#include <memory>

namespace capsigh::cli {
namespace {

// Recipes end far below this; the document room refuses them with its own words.
constexpr std::size_t kLargestInput = std::size_t{16} << 20U;

Finding failure(const std::string& path, const std::string& what, int error) {
  Finding f;
  f.code = "file";
  f.message = fmt::format("{}: {}", what, std::strerror(error));
  f.place = Place{path, 0, 0, 1, ""};
  return f;
}

struct CloseFile {
  void operator()(std::FILE* file) const { static_cast<void>(std::fclose(file)); }
};
using File = std::unique_ptr<std::FILE, CloseFile>;

std::optional<Finding> drain(std::FILE* file, const std::string& path, std::string& text) {
  std::string block(std::size_t{1} << 16U, '\0');
  while (text.size() < kLargestInput) {
    const std::size_t n = std::fread(block.data(), 1, block.size(), file);
    text.append(block, 0, n);
    if (n == 0) break;
  }
  if (std::ferror(file) != 0) return failure(path, "cannot be read", errno);
  return std::nullopt;
}

bool write_all(std::FILE* file, const std::string& text) {
  return std::fwrite(text.data(), 1, text.size(), file) == text.size() && std::fflush(file) == 0;
}

// Writes beside the place and renames over it, so that the file is whole or absent.
std::optional<Finding> replace(const std::string& place, const std::string& path,
                               const std::string& text) {
  const std::string partial = fmt::format("{}.{}.partial", place, ::getpid());
  {
    const File file(std::fopen(partial.c_str(), "wb"));
    if (!file) return failure(path, "cannot be written", errno);
    if (!write_all(file.get(), text)) {
      const int error = errno;
      static_cast<void>(std::remove(partial.c_str()));
      return failure(path, "cannot be written", error);
    }
  }
  if (std::rename(partial.c_str(), place.c_str()) != 0) {
    const int error = errno;
    static_cast<void>(std::remove(partial.c_str()));
    return failure(path, "cannot be written", error);
  }
  return std::nullopt;
}

}  // namespace

Outcome<std::string> read_input(const std::string& path) {
  std::string text;
  if (path == "-") {
    if (auto problem = drain(stdin, "standard input", text)) return {{}, {*problem}};
    return {std::move(text), {}};
  }
  std::error_code error;
  if (std::filesystem::is_directory(path, error)) {
    return {{}, {failure(path, "cannot be read as a recipe", EISDIR)}};
  }
  const File file(std::fopen(path.c_str(), "rb"));
  if (!file) return {{}, {failure(path, "cannot be opened", errno)}};
  if (auto problem = drain(file.get(), path, text)) return {{}, {*problem}};
  return {std::move(text), {}};
}

std::optional<Finding> deliver(const std::string& text, const std::string& path) {
  if (path.empty()) {
    if (write_all(stdout, text)) return std::nullopt;
    return failure("standard output", "cannot be written", errno);
  }
  std::error_code unknown;
  const auto target = std::filesystem::weakly_canonical(path, unknown);
  const std::string place = unknown ? path : target.string();
  // A pipe or a device is a stream: it is written to, not replaced.
  const auto status = std::filesystem::status(place, unknown);
  if (std::filesystem::exists(status) && !std::filesystem::is_regular_file(status)) {
    const File file(std::fopen(place.c_str(), "wb"));
    if (file && write_all(file.get(), text)) return std::nullopt;
    return failure(path, "cannot be written", errno);
  }
  return replace(place, path, text);
}

}  // namespace capsigh::cli
