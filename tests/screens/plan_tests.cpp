#include <gtest/gtest.h>

#include <random>

#include "station/windows/line/berth_plan.h"
#include "station/windows/line/margin_rails.h"
#include "station/windows/line/passage_bar.h"
#include "station/windows/look/label_places.h"

namespace probewright::windows {
namespace {

std::vector<QRectF> parts_of(const BerthPlan& plan) {
  std::vector<QRectF> parts;
  for (const QRectF& part : {plan.title, plan.serial, plan.headline.united(plan.shape), plan.bar, plan.rails,
                             plan.spectra, plan.pulses, plan.words})
    if (!part.isEmpty()) parts.push_back(part);
  return parts;
}

// From the smallest berth to a whole screen, at every text size: nothing lies outside or upon something else, and bar,
// rails and headline are always there.
TEST(BerthPlan, PartsNeverOverlapAndNeverLeaveTheBerth) {
  for (const int percent : {100, 125, 150, 200}) {
    const TypeScale type{percent};
    const QSizeF least = least_berth(type);
    for (double width = least.width(); width < 1900; width *= 1.3) {
      for (double height = least.height(); height < 1000; height *= 1.2) {
        const auto parts = parts_of(plan_berth({width, height}, type));
        for (std::size_t i = 0; i < parts.size(); ++i) {
          EXPECT_TRUE(QRectF(-0.01, -0.01, width + 0.02, height + 0.02).contains(parts[i]))
              << percent << " % " << width << " x " << height << " part " << i;
          for (std::size_t j = i + 1; j < parts.size(); ++j)
            EXPECT_FALSE(parts[i].adjusted(0.1, 0.1, -0.1, -0.1).intersects(parts[j].adjusted(0.1, 0.1, -0.1, -0.1)))
                << percent << " % " << width << " x " << height << " parts " << i << " and " << j;
        }
        const BerthPlan plan = plan_berth({width, height}, type);
        EXPECT_GT(plan.rails.height(), 10.0);
        EXPECT_GT(plan.rails.width(), 20.0);
        EXPECT_GT(plan.bar.height(), 3.0);
        EXPECT_GT(plan.headline.width(), 40.0);
      }
    }
  }
}

TEST(BerthPlan, ColumnsUseTheRoom) {
  const TypeScale type{100};
  EXPECT_EQ(columns_for(1, {1240, 540}, type), 1);
  EXPECT_EQ(columns_for(4, {1240, 540}, type), 4);
  EXPECT_EQ(columns_for(4, {600, 900}, type), 2);
  for (int nests = 1; nests <= 16; ++nests) {
    const int columns = columns_for(nests, {1240, 540}, type);
    EXPECT_GE(columns, 1);
    EXPECT_LE(columns, nests);
  }
}

RailPoint point(int slot, double position, RailPoint::Kind kind = RailPoint::Kind::inside) {
  RailPoint one;
  one.name = QStringLiteral("check %1").arg(slot);
  one.slot = slot, one.position = position, one.margin = 1.0 - std::abs(position), one.kind = kind;
  return one;
}

TEST(MarginRails, NamesWhatIsOutsideThenWhatHasNoValueThenTheNearest) {
  using enum RailPoint::Kind;
  const std::vector<RailPoint> points = {point(0, 0.1), point(1, 0.9), point(2, 0.0, unknown), point(3, 1.2, outside),
                                         point(4, -1.4, outside)};
  std::vector<int> named;
  for (const RailPoint* one : named_points(points, 10)) named.push_back(one->slot);
  EXPECT_EQ(named, (std::vector<int>{4, 3, 2}));  // the nearest to an edge is one that is outside already
  named.clear();
  const std::vector<RailPoint> all_inside = {point(0, 0.1), point(1, 0.9), point(2, -0.95)};
  for (const RailPoint* one : named_points(all_inside, 10)) named.push_back(one->slot);
  EXPECT_EQ(named, (std::vector<int>{2}));
}

TEST(MarginRails, ScaleHasTheRailsWhereTheLimitsAre) {
  const RailScale scale{{10, 20, 280, 145}, 28};
  EXPECT_NEAR(scale.y(0.0), 92.5, 1e-9);
  EXPECT_NEAR(scale.y(1.0) - scale.y(0.0), scale.y(0.0) - scale.y(-1.0), 1e-9);
  EXPECT_LT(scale.y(1.0), scale.y(0.0));          // up is the upper limit
  EXPECT_DOUBLE_EQ(scale.y(9.0), scale.y(1.45));  // what lies beyond stands at the edge
  EXPECT_NEAR(scale.x(1) - scale.x(0), 10.0, 1e-9);
}

TEST(LabelPlaces, NeverCollide) {
  std::mt19937 random{7};
  std::uniform_real_distribution<double> x{0, 300}, y{0, 150}, width{20, 120};
  int placed = 0;
  for (int trial = 0; trial < 300; ++trial) {
    const QRectF room{0, 0, 300, 150};
    std::vector<LabelWish> wishes;
    std::vector<QRectF> taken;
    for (int i = 0; i < 5; ++i) wishes.push_back({{x(random), y(random)}, {width(random), 14}, 5});
    for (int i = 0; i < 20; ++i) taken.push_back({x(random), y(random), 6, 12});
    const auto places = label_places(room, wishes, taken);
    ASSERT_EQ(places.size(), wishes.size());
    for (std::size_t i = 0; i < places.size(); ++i) {
      if (!places[i]) continue;
      ++placed;
      EXPECT_TRUE(room.contains(*places[i]));
      for (const QRectF& other : taken) EXPECT_FALSE(places[i]->intersects(other));
      for (std::size_t j = 0; j < i; ++j)
        if (places[j]) EXPECT_FALSE(places[i]->intersects(*places[j]));
    }
  }
  EXPECT_GT(placed, 1000);  // of 1500: most find a place
}

TEST(PassageBar, SegmentsAreAsWideAsTheirTime) {
  using State = sequence::PassageStep::State;
  const std::vector<sequence::PassageStep> passage = {
      {"dark_current", 1.0, State::done}, {"red_drive", 3.0, State::doing}, {"red_width", 4.0, State::ahead}};
  const auto segments = segments_of(passage, 0.3125, {"dark_current"});
  ASSERT_EQ(segments.size(), 3u);
  EXPECT_DOUBLE_EQ(segments[0].to, 0.125);
  EXPECT_DOUBLE_EQ(segments[1].to, 0.5);
  EXPECT_DOUBLE_EQ(segments[2].to, 1.0);
  EXPECT_DOUBLE_EQ(segments[0].filled, 1.0);
  EXPECT_DOUBLE_EQ(segments[1].filled, 0.5);
  EXPECT_DOUBLE_EQ(segments[2].filled, 0.0);
  EXPECT_TRUE(segments[0].failed);
  EXPECT_FALSE(segments[1].failed);
}

}  // namespace
}  // namespace probewright::windows
