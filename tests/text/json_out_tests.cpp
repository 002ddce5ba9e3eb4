#include "station/text/json_out.h"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>

namespace probewright::text {
namespace {

/// What another reader makes of our text; throws where it is no JSON.
nlohmann::json read_back(const Json& json) { return nlohmann::json::parse(json.text()); }

TEST(JsonOut, IsReadBackByAnotherReader) {
  Json list = Json::array();
  list.add(1).add(-2.5).add("three").add(true).add(nullptr).add(Json::array()).add(Json::object());
  Json json = Json::object();
  json.set("list", std::move(list)).set("text", "a \"quoted\" \\ word\n\tand a control \x01 one");
  const auto back = read_back(json);
  EXPECT_EQ(back["list"], nlohmann::json::parse(R"([1, -2.5, "three", true, null, [], {}])"));
  EXPECT_EQ(back["text"], "a \"quoted\" \\ word\n\tand a control \x01 one");
}

TEST(JsonOut, KeepsTheOrderOfMembers) {
  Json json = Json::object();
  json.set("z", 1).set("a", 2);
  EXPECT_EQ(json.text(), "{\n  \"z\": 1,\n  \"a\": 2\n}\n");
}

TEST(JsonOut, EveryDoubleReadsBackAsItself) {
  for (const double value : {0.1, 1.0 / 3.0, 1e-300, 1.7976931348623157e308, 5e-324, -0.0, 660.0}) {
    const auto back = read_back(std::move(Json::object().set("v", value)));
    EXPECT_EQ(back["v"].get<double>(), value);
  }
  EXPECT_EQ(read_back(std::move(Json::object().set("v", std::int64_t{9007199254740993})))["v"].get<std::int64_t>(),
            9007199254740993);
}

TEST(JsonOut, WhatIsNoNumberIsNull) {
  for (const double value : {std::nan(""), std::numeric_limits<double>::infinity()})
    EXPECT_TRUE(read_back(std::move(Json::object().set("v", value)))["v"].is_null());
  EXPECT_TRUE(read_back(std::move(Json::object().set("v", std::optional<double>{})))["v"].is_null());
  EXPECT_EQ(read_back(std::move(Json::object().set("v", std::optional<double>{2.5})))["v"], 2.5);
}

TEST(JsonOut, BytesThatAreNoTextBecomeTheReplacementCharacter) {
  const auto back = read_back(std::move(Json::object().set("v", std::string{"a\xff\xfe\xc3\xa4"})));
  EXPECT_EQ(back["v"], "a\xEF\xBF\xBD\xEF\xBF\xBD\xC3\xA4");
}

TEST(JsonOut, RefusesAMemberOutsideAnObject) {
  EXPECT_THROW(Json::array().set("a", 1), std::logic_error);
  EXPECT_THROW(Json::object().add(1), std::logic_error);
  EXPECT_THROW(Json{1}.add(1), std::logic_error);
}

}  // namespace
}  // namespace probewright::text
