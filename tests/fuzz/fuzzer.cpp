// The entry of libFuzzer; PW_FUZZ_TARGET names the one function that this program is for.
#include <cstdint>

#include "tests/fuzz/targets.h"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  probewright::fuzz::PW_FUZZ_TARGET(std::as_bytes(std::span{data, size}));
  return 0;
}
