#include "drivers/wire/recording_folder.h"

#include <algorithm>
#include <cerrno>
#include <system_error>

#include "station/base/files.h"

namespace probewright::wire {
namespace {

namespace fs = std::filesystem;

constexpr std::string_view line_suffix = ".line";
const char* const header_name = "recording.json";

Problem unwritable(const fs::path& path, const std::string& reason) {
  return {"recording_unwritable", path.string(), {{"reason", reason}}};
}

/// All files below a folder, by path.
std::vector<fs::path> files_below(const fs::path& folder) {
  std::vector<fs::path> found;
  std::error_code ignored;
  for (const auto& entry : fs::recursive_directory_iterator(folder, ignored)) {
    if (entry.is_regular_file(ignored)) found.push_back(entry.path());
  }
  std::sort(found.begin(), found.end());
  return found;
}

}  // namespace

Result<Recording> read_recording(const fs::path& folder) {
  Recording recording;
  std::error_code ignored;
  if (!fs::is_regular_file(folder / header_name, ignored)) return Problem{"recording_missing", folder.string()};
  for (const fs::path& path : files_below(folder)) {
    auto text = read_file(path, most_recording_bytes);
    if (!text) return text.error();
    const fs::path inside = path.lexically_relative(folder);
    if (inside == header_name) {
      auto header = parse_body(*text, path.string());
      if (!header) return header.error();
      if (header->number("recording") != 1) {
        return Problem{"recording_malformed", path.string(), {{"reason", "its format is not 1"}}};
      }
      recording.header = *std::move(header);
    } else if (inside.extension() == line_suffix && !inside.has_parent_path()) {
      auto line = parse_recording(*text, path.string());
      if (!line) return line.error();
      recording.lines.push_back(*std::move(line));
    } else {
      recording.files.emplace(inside.string(), *std::move(text));
    }
  }
  return recording;
}

Result<void> write_recording(const fs::path& folder, const Recording& recording) {
  auto recorder = Recorder::begin(folder, recording.header);
  if (!recorder) return recorder.error();
  for (const LineRecording& line : recording.lines) {
    (*recorder)->add_file(line.device + std::string(line_suffix), recording_text(line));
  }
  for (const auto& [path, text] : recording.files) (*recorder)->add_file(path, text);
  if ((*recorder)->trouble()) return *(*recorder)->trouble();
  return {};
}

Result<std::unique_ptr<Recorder>> Recorder::begin(const fs::path& folder, const Body& header) {
  std::error_code error;
  fs::create_directories(folder, error);
  if (error) return unwritable(folder, error.message());
  if (!fs::is_empty(folder, error)) return unwritable(folder, error ? error.message() : "it is not empty");
  std::unique_ptr<Recorder> recorder{new Recorder{folder}};
  recorder->add_file(header_name, canonical(header));
  if (recorder->trouble_) return *recorder->trouble_;
  return recorder;
}

void Recorder::fail(const fs::path& path) {
  if (!trouble_) trouble_ = unwritable(path, std::generic_category().message(errno));
}

void Recorder::note(const std::string& device, const WireEvent& event) {
  const fs::path path = folder_ / (device + std::string(line_suffix));
  auto [line, fresh] = lines_.try_emplace(device);
  std::ofstream& file = line->second;
  if (fresh) {
    file.open(path, std::ios::binary);
    file << recording_text({device, {}});
  }
  file << line_text(event) << std::flush;
  if (!file) fail(path);
}

void Recorder::add_file(const fs::path& path, std::string_view text) {
  const fs::path full = folder_ / path;
  std::error_code error;
  fs::create_directories(full.parent_path(), error);
  std::ofstream file{full, std::ios::binary};
  file << text;
  file.close();
  if (!file) fail(full);
}

}  // namespace probewright::wire
