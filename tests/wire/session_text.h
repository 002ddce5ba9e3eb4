#pragma once
#include <fstream>
#include <sstream>
#include <string>

/// The text between the fences of the code block that follows the heading "A session, byte for byte" of a WIRE.md.
inline std::string session_of(const std::string& path) {
  std::ifstream file{path, std::ios::binary};
  std::stringstream all;
  all << file.rdbuf();
  const std::string text = all.str();
  const auto heading = text.find("A session, byte for byte\n");
  if (heading == std::string::npos) return {};
  const auto begin = text.find("```text\n", heading);
  const auto end = begin == std::string::npos ? begin : text.find("```\n", begin + 8);
  return end == std::string::npos ? std::string{} : text.substr(begin + 8, end - begin - 8);
}
