#include "db/sha256.h"

#include <openssl/evp.h>

#include <stdexcept>

namespace probewright::db {
namespace {

/// The algorithm, fetched once: a fetch for each digest costs more than a short digest.
const EVP_MD* algorithm() {
  static const EVP_MD* const fetched = EVP_MD_fetch(nullptr, "SHA256", nullptr);
  if (!fetched) throw std::runtime_error("OpenSSL has no SHA-256");
  return fetched;
}

void demand(int answer) {
  if (answer != 1) throw std::runtime_error("OpenSSL failed to compute SHA-256");
}

}  // namespace

Sha256::Sha256() : context_(EVP_MD_CTX_new()) { demand(EVP_DigestInit_ex2(context_, algorithm(), nullptr)); }

Sha256::~Sha256() { EVP_MD_CTX_free(context_); }

Sha256& Sha256::add(std::span<const std::byte> bytes) {
  demand(EVP_DigestUpdate(context_, bytes.data(), bytes.size()));
  return *this;
}

Sha256& Sha256::add(std::string_view bytes) { return add(std::as_bytes(std::span{bytes})); }

Digest Sha256::finish() {
  Digest digest;
  demand(EVP_DigestFinal_ex(context_, reinterpret_cast<unsigned char*>(digest.data()), nullptr));
  demand(EVP_DigestInit_ex2(context_, nullptr, nullptr));
  return digest;
}

Digest sha256(std::span<const std::byte> bytes) { return Sha256{}.add(bytes).finish(); }

Digest sha256(std::string_view bytes) { return Sha256{}.add(bytes).finish(); }

}  // namespace probewright::db
