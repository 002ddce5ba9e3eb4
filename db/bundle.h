#pragma once
#include <cstdint>
#include <functional>
#include <iosfwd>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "db/signing.h"

namespace probewright::db {

/// One file of a bundle. `write` may be asked once.
struct BundlePart {
  std::string name;  ///< relative, "documents/model-AQ-20.yaml"; letters, digits, - _ . and / only
  std::function<void(std::ostream&)> write;
};

struct Bundle {
  std::string path;
  bool tar = false;
  std::int64_t files = 0, size = 0;  ///< of the parts
  Digest manifest{};                 ///< SHA-256 of the file SHA256SUMS
  std::string public_key;            ///< hexadecimal; empty where it is not signed
};

/// The two commands that check a bundle, with stock coreutils and OpenSSL 3, run inside its folder. The second is empty
/// where the bundle is not signed.
struct CheckCommands {
  std::string sums, signature;
};
CheckCommands check_commands(bool signed_too);

/// Writes a bundle: a folder, or one tar file (POSIX ustar) where `path` ends with ".tar". Beside the parts it holds
/// SHA256SUMS, the manifest in the form of sha256sum(1), and with a key SHA256SUMS.sig (Ed25519 over the manifest, 64
/// bytes) and public_key.pem, which is itself in the manifest. Everything is made under another name and gets its own
/// when it is whole.
/// Errors: file_exists, bundle_name (a part's name), bundle_too_large (a part over 8 GiB in a tar), and the disk's.
Result<Bundle> write_bundle(const std::string& path, std::vector<BundlePart> parts,
                            const std::optional<SigningKey>& key);

}  // namespace probewright::db
