// Frames as people read them; the first ones are those of WIRE.md, section 6.
#include <gtest/gtest.h>

#include "drivers/adapter/in_words.h"

namespace probewright::adapter {
namespace {

Bytes bytes(std::initializer_list<int> values) {
  Bytes all;
  for (const int value : values) all.push_back(static_cast<std::byte>(value));
  return all;
}

TEST(InWords, FramesOfTheSession) {
  Listener listener;
  const auto heard =
      listener.hear(bytes({0x00, 0x06, 0x11, 0xD8, 0x0D, 0xEC, 0xF5, 0x00, 0x00, 0x06, 0x03, 0xDC, 0x0D, 0x50,
                           0xC3, 0x01, 0x03, 0xFD, 0xAD, 0x00, 0x06, 0xFF, 0xDC, 0x0D, 0x03, 0x03, 0x01, 0x01,
                           0x01, 0x03, 0x25, 0x79, 0x00, 0x06, 0x11, 0xD8, 0x0D, 0xEC, 0xF4, 0x00, 0x07}));
  EXPECT_EQ(heard, (std::vector<std::string>{
                       "stop capture #3544", "set timing #3548: slot_ns 50000",
                       "error reply #3548: request 3, code 3, detail 0 (set timing: " + heard.at(2).substr(60),
                       "(a damaged frame)"}));
  EXPECT_TRUE(listener.in_mid_message());
}

TEST(InWords, WhatDoesNotFitIsToldInHexadecimal) {
  EXPECT_EQ(in_words({0x02, 7, bytes({1, 2, 0xff})}), "set drive #7: (unexpected) 01 02 FF");
  EXPECT_EQ(in_words({0x89, 7, bytes({1, 3, 0, 0, 0})}), "reply to presence #7: present 1, insertions 3");
}

}  // namespace
}  // namespace probewright::adapter
