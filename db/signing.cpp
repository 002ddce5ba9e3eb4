#include "db/signing.h"

#include <openssl/bio.h>
#include <openssl/evp.h>
#include <openssl/pem.h>
#include <sys/stat.h>

#include <stdexcept>

#include "db/hex.h"
#include "station/base/files.h"

namespace probewright::db {
namespace {

using Bio = std::unique_ptr<BIO, int (*)(BIO*)>;
using Context = std::unique_ptr<EVP_MD_CTX, void (*)(EVP_MD_CTX*)>;

void demand(bool worked) {
  if (!worked) throw std::runtime_error("OpenSSL failed at an Ed25519 key");
}

Bio memory(std::string_view text) { return {BIO_new_mem_buf(text.data(), static_cast<int>(text.size())), BIO_free}; }

const unsigned char* raw(const void* bytes) { return static_cast<const unsigned char*>(bytes); }

/// Asks for no passphrase: a key that needs one is refused.
int no_passphrase(char*, int, int, void*) { return -1; }

}  // namespace

Result<SigningKey> SigningKey::read(const std::string& path) {
  struct stat file {};
  if (::stat(path.c_str(), &file) == 0 && (file.st_mode & 077) != 0) return Problem{"key_open_to_others", path};
  const auto text = read_file(path, 1u << 16);
  if (!text) return text.error();
  const Bio bio = memory(*text);
  std::shared_ptr<EVP_PKEY> key(PEM_read_bio_PrivateKey(bio.get(), nullptr, no_passphrase, nullptr), EVP_PKEY_free);
  if (!key) return Problem{"key_unreadable", path};
  if (EVP_PKEY_get_base_id(key.get()) != EVP_PKEY_ED25519) return Problem{"key_not_ed25519", path};
  return SigningKey(std::move(key));
}

SigningKey SigningKey::from_seed(std::span<const std::byte, 32> seed) {
  std::shared_ptr<EVP_PKEY> key(EVP_PKEY_new_raw_private_key(EVP_PKEY_ED25519, nullptr, raw(seed.data()), seed.size()),
                                EVP_PKEY_free);
  demand(key != nullptr);
  return SigningKey(std::move(key));
}

Bytes SigningKey::sign(std::string_view message) const {
  const Context context(EVP_MD_CTX_new(), EVP_MD_CTX_free);
  Bytes signature(64);
  std::size_t size = signature.size();
  demand(EVP_DigestSignInit(context.get(), nullptr, nullptr, nullptr, key_.get()) == 1);
  demand(EVP_DigestSign(context.get(), reinterpret_cast<unsigned char*>(signature.data()), &size, raw(message.data()),
                        message.size()) == 1);
  return signature;
}

std::string SigningKey::public_pem() const {
  const Bio bio(BIO_new(BIO_s_mem()), BIO_free);
  demand(PEM_write_bio_PUBKEY(bio.get(), key_.get()) == 1);
  char* text = nullptr;
  const long size = BIO_get_mem_data(bio.get(), &text);
  return {text, static_cast<std::size_t>(size)};
}

std::string SigningKey::public_hex() const {
  std::array<std::byte, 32> bytes{};
  std::size_t size = bytes.size();
  demand(EVP_PKEY_get_raw_public_key(key_.get(), reinterpret_cast<unsigned char*>(bytes.data()), &size) == 1);
  return hex(bytes);
}

bool signature_holds(std::string_view public_pem, std::string_view message, std::span<const std::byte> signature) {
  const Bio bio = memory(public_pem);
  const std::shared_ptr<EVP_PKEY> key(PEM_read_bio_PUBKEY(bio.get(), nullptr, no_passphrase, nullptr), EVP_PKEY_free);
  if (!key || EVP_PKEY_get_base_id(key.get()) != EVP_PKEY_ED25519) return false;
  const Context context(EVP_MD_CTX_new(), EVP_MD_CTX_free);
  return EVP_DigestVerifyInit(context.get(), nullptr, nullptr, nullptr, key.get()) == 1 &&
         EVP_DigestVerify(context.get(), raw(signature.data()), signature.size(), raw(message.data()),
                          message.size()) == 1;
}

}  // namespace probewright::db
