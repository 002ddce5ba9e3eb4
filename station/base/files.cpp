#include "station/base/files.h"

#include <cerrno>
#include <cstring>
#include <fstream>

namespace probewright {
namespace {

Problem unreadable(const std::filesystem::path& path, const std::string& reason) {
  return {"file_unreadable", path.string(), {{"reason", reason}}};
}

}  // namespace

Result<std::string> read_file(const std::filesystem::path& path, std::size_t max_bytes) {
  if (std::error_code error; std::filesystem::is_directory(path, error)) return unreadable(path, "it is a folder");
  errno = 0;
  std::ifstream file{path, std::ios::binary};
  if (!file) return unreadable(path, errno != 0 ? std::strerror(errno) : "it does not open");
  // Read one byte more than allowed, never by the size that the file system tells: a pipe has none.
  std::string text;
  char piece[65536];
  while (text.size() <= max_bytes && (file.read(piece, sizeof piece), file.gcount() > 0))
    text.append(piece, static_cast<std::size_t>(file.gcount()));
  if (file.bad()) return unreadable(path, "reading it failed");
  if (text.size() > max_bytes)
    return Problem{"file_too_large",
                   path.string(),
                   {{"size", "more than " + std::to_string(max_bytes)}, {"bound", std::to_string(max_bytes)}}};
  return text;
}

}  // namespace probewright
