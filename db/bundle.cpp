#include "db/bundle.h"

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>

#include "db/file_work.h"
#include "db/lease.h"

namespace probewright::db {
namespace {

namespace fs = std::filesystem;

constexpr const char *manifest_name = "SHA256SUMS", *signature_name = "SHA256SUMS.sig", *key_name = "public_key.pem";

bool is_plain_name(std::string_view name) {
  const auto plain = [](char c) {
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '-' || c == '_' ||
           c == '.' || c == '/';
  };
  return !name.empty() && name.size() < 100 && name.front() != '/' && name.find("..") == std::string_view::npos &&
         std::all_of(name.begin(), name.end(), plain);
}

Problem no_write(const std::string& path) {
  return {"ledger_io", path, {{"reason", std::strerror(errno)}, {"code", "errno " + std::to_string(errno)}}};
}

/// A folder that goes away unless it was kept.
class UnfinishedFolder {
 public:
  explicit UnfinishedFolder(std::string path) : path_(std::move(path)) {}
  ~UnfinishedFolder() {
    std::error_code ignored;
    if (!path_.empty()) fs::remove_all(path_, ignored);
  }
  UnfinishedFolder(const UnfinishedFolder&) = delete;
  void keep() { path_.clear(); }

 private:
  std::string path_;
};

std::string in(const std::string& folder, const std::string& name) { return (fs::path(folder) / name).string(); }

void write_part(const std::string& folder, const BundlePart& part) {
  const std::string path = in(folder, part.name);
  fs::create_directories(fs::path(path).parent_path());
  if (file_exists(path)) throw ProblemError({"file_exists", path});
  std::ofstream file(path, std::ios::binary);
  part.write(file);
  file.close();
  if (!file) throw ProblemError(no_write(path));
  sync_file(path).value();
}

/// Header of one file in a tar. Source: POSIX.1-1988, ustar interchange format.
std::array<char, 512> tar_header(const std::string& name, std::int64_t size) {
  std::array<char, 512> block{};
  const auto put = [&](std::size_t at, std::string_view text) {
    std::copy(text.begin(), text.end(), block.begin() + static_cast<std::ptrdiff_t>(at));
  };
  const auto octal = [](std::int64_t value, std::size_t digits) {
    std::string text(digits, '0');
    for (std::size_t i = digits; i-- > 0; value /= 8) text[i] = static_cast<char>('0' + value % 8);
    return text;
  };
  put(0, name);
  put(100, "0000644");
  put(108, "0000000");
  put(116, "0000000");
  put(124, octal(size, 11));
  put(136, octal(0, 11));  // no time of its own: the same parts give the same tar
  put(148, "        ");
  block[156] = '0';
  put(257, std::string_view{"ustar\0"
                            "00",
                            8});
  unsigned sum = 0;
  for (const char c : block) sum += static_cast<unsigned char>(c);
  put(148, octal(sum, 6));
  block[154] = '\0';
  return block;
}

void append_to_tar(std::ostream& tar, const std::string& folder, const std::string& name) {
  const std::string path = in(folder, name);
  const auto size = static_cast<std::int64_t>(fs::file_size(path));
  if (size >= std::int64_t{1} << 33) throw ProblemError({"bundle_too_large", name});
  const auto header = tar_header(name, size);
  tar.write(header.data(), header.size());
  std::ifstream file(path, std::ios::binary);
  if (size > 0) tar << file.rdbuf();
  constexpr std::array<char, 512> nothing{};
  if (size % 512 != 0) tar.write(nothing.data(), 512 - size % 512);
}

void write_tar(const std::string& path, const std::string& folder, const std::vector<std::string>& names) {
  Unfinished part(path + ".part-tar");
  {
    std::ofstream tar(part.path(), std::ios::binary);
    for (const std::string& name : names) append_to_tar(tar, folder, name);
    constexpr std::array<char, 1024> end{};
    tar.write(end.data(), end.size());
    tar.close();
    if (!tar) throw ProblemError(no_write(part.path()));
  }
  sync_file(part.path()).value();
  name_file(part.path(), path).value();
  part.keep();
}

Bundle written(const std::string& path, std::vector<BundlePart> parts, const std::optional<SigningKey>& key) {
  Bundle bundle;
  bundle.path = path;
  bundle.tar = path.ends_with(".tar");
  const std::string folder = path + ".part";
  if (file_exists(path)) throw ProblemError({"file_exists", path});
  if (!fs::create_directory(folder)) throw ProblemError({"file_exists", folder});
  UnfinishedFolder unfinished(folder);
  if (key) {
    bundle.public_key = key->public_hex();
    parts.push_back({key_name, [&](std::ostream& out) { out << key->public_pem(); }});
  }
  std::sort(parts.begin(), parts.end(), [](const auto& a, const auto& b) { return a.name < b.name; });
  std::string manifest;
  std::vector<std::string> names;
  for (const BundlePart& part : parts) {
    if (!is_plain_name(part.name)) throw ProblemError({"bundle_name", part.name});
    write_part(folder, part);
    const FileDigest digest = digest_of_file(in(folder, part.name)).value();
    manifest += to_hex(digest.digest) + "  " + part.name + "\n";
    bundle.size += digest.size;
    ++bundle.files;
    names.push_back(part.name);
  }
  write_new_file(in(folder, manifest_name), manifest).value();
  bundle.manifest = digest_of_file(in(folder, manifest_name)).value().digest;
  names.emplace_back(manifest_name);
  if (key) {
    const Bytes signature = key->sign(manifest);
    write_new_file(in(folder, signature_name), {reinterpret_cast<const char*>(signature.data()), signature.size()})
        .value();
    names.emplace_back(signature_name);
  }
  if (bundle.tar) {
    write_tar(path, folder, names);
  } else {
    name_file(folder, path).value();
    unfinished.keep();
  }
  return bundle;
}

}  // namespace

CheckCommands check_commands(bool signed_too) {
  return {std::string{"sha256sum -c "} + manifest_name,
          signed_too ? std::string{"openssl pkeyutl -verify -pubin -inkey "} + key_name + " -rawin -in " +
                           manifest_name + " -sigfile " + signature_name
                     : ""};
}

Result<Bundle> write_bundle(const std::string& path, std::vector<BundlePart> parts,
                            const std::optional<SigningKey>& key) {
  try {
    return written(path, std::move(parts), key);
  } catch (const ProblemError& error) {
    return error.problem();
  } catch (const fs::filesystem_error& error) {
    return Problem{"ledger_io", path, {{"reason", error.code().message()}, {"code", "file system"}}};
  }
}

}  // namespace probewright::db
