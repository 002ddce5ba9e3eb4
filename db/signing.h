#pragma once
#include <memory>
#include <span>
#include <string>
#include <string_view>

#include "station/base/digest.h"
#include "station/base/result.h"

struct evp_pkey_st;

namespace probewright::db {

/// A private Ed25519 key (RFC 8032), by OpenSSL. It is read when it is needed and never kept in a ledger, a bundle or a
/// copy.
class SigningKey {
 public:
  /// Reads a key from a PEM file (PKCS #8), as `openssl genpkey -algorithm ed25519` writes it.
  /// Errors: key_unreadable; key_not_ed25519; key_open_to_others (group or others may read the file).
  static Result<SigningKey> read(const std::string& path);
  /// A key from 32 random bytes (for tests, and for whoever keeps keys elsewhere). Throws std::runtime_error.
  static SigningKey from_seed(std::span<const std::byte, 32> seed);

  /// 64 bytes. Throws std::runtime_error where OpenSSL fails.
  Bytes sign(std::string_view message) const;
  /// The public key as PEM (SubjectPublicKeyInfo), and as 32 raw bytes in hexadecimal.
  std::string public_pem() const;
  std::string public_hex() const;

 private:
  explicit SigningKey(std::shared_ptr<evp_pkey_st> key) : key_(std::move(key)) {}
  std::shared_ptr<evp_pkey_st> key_;
};

/// Whether `signature` over `message` is by the holder of the public key in this PEM text.
bool signature_holds(std::string_view public_pem, std::string_view message, std::span<const std::byte> signature);

}  // namespace probewright::db
