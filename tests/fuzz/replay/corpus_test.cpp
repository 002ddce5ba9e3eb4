// The corpora, and the demonstration's documents, through every parser: what a fuzzer once found stays found.
#include <gtest/gtest.h>

#include <algorithm>
#include <filesystem>

#include "station/base/files.h"
#include "tests/fuzz/targets.h"

namespace probewright::fuzz {

/// How a failed test names its target.
void PrintTo(const Target& target, std::ostream* out) { *out << target.name; }

namespace {

namespace fs = std::filesystem;

std::vector<fs::path> files_in(const fs::path& folder) {
  std::vector<fs::path> files;
  if (!fs::is_directory(folder)) return files;
  for (const auto& entry : fs::recursive_directory_iterator(folder))
    if (entry.is_regular_file()) files.push_back(entry.path());
  std::sort(files.begin(), files.end());
  return files;
}

/// Documents of the demonstration that a target reads; none where it reads no document.
fs::path documents_for(std::string_view target) {
  const fs::path configs{PW_SOURCE_DIR "/configs"};
  if (target == "station_file") return configs / "stations";
  if (target == "people") return configs / "people";
  if (target == "model") return configs / "models";
  if (target == "sheet") return configs / "sheets";
  if (target == "phantom_certificate") return configs / "certificates" / "phantoms";
  if (target == "adapter_certificate") return configs / "certificates" / "adapters";
  if (target == "diagnosis") return configs / "diagnosis";
  if (target == "scenario") return configs / "scenarios";
  if (target == "csv") return configs / "tables";
  return {};
}

class Corpus : public ::testing::TestWithParam<Target> {};

/// Each file whole, and cut short at a hundred places: most of what a parser must refuse is half of something good.
TEST_P(Corpus, EveryFileAndItsBeginnings) {
  const Target& target = GetParam();
  auto files = files_in(fs::path{PW_SOURCE_DIR "/tests/fuzz/corpus"} / target.name);
  EXPECT_FALSE(files.empty()) << "no corpus";
  const auto documents = files_in(documents_for(target.name));
  files.insert(files.end(), documents.begin(), documents.end());
  for (const fs::path& file : files) {
    SCOPED_TRACE(file);
    const std::string text = read_file(file, std::size_t{1} << 24).value();
    const auto bytes = std::as_bytes(std::span{text});
    EXPECT_NO_THROW(target.run(bytes));
    const std::size_t step = std::max<std::size_t>(1, bytes.size() / 100);
    for (std::size_t size = 0; size < bytes.size(); size += step) EXPECT_NO_THROW(target.run(bytes.first(size)));
  }
}

INSTANTIATE_TEST_SUITE_P(All, Corpus, ::testing::ValuesIn(all_targets().begin(), all_targets().end()),
                         [](const auto& tried) { return std::string(tried.param.name); });

}  // namespace
}  // namespace probewright::fuzz
