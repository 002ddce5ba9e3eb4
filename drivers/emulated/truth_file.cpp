#include "drivers/emulated/truth_file.h"

#include <cerrno>
#include <filesystem>
#include <fstream>
#include <system_error>

namespace probewright::emulated {

Result<void> write_truth_file(const std::string& path, std::uint64_t seed, const std::map<std::string, Truth>& probes) {
  const auto problem = [&](const std::error_code& error) {
    return Problem{"bench_truth_unwritable", path, {{"reason", error.message()}}};
  };
  const std::string beside = path + ".new";
  {
    std::ofstream file(beside, std::ios::binary | std::ios::trunc);
    file << truth_json(seed, probes);
    file.close();
    if (!file) return problem(std::error_code(errno, std::generic_category()));
  }
  std::error_code error;
  std::filesystem::rename(beside, path, error);
  if (error) return problem(error);
  return {};
}

}  // namespace probewright::emulated
