#include "station/pages/rails.h"

#include <QPainter>
#include <algorithm>
#include <memory>

#include "station/pages/fact_blocks.h"
#include "station/trace/words.h"

namespace probewright::pages {
namespace {

constexpr double row_mm = 4.5, rail_names_mm = 58.0, margins_mm = 22.0;
constexpr double reach = 1.7;  // what lies further out is drawn as an arrow at the edge

// Where a position of the common scale stands on the page.
struct Scale {
  double left_mm, width_mm;
  double at(double position) const { return left_mm + width_mm * (position + reach) / (2 * reach); }
};
Scale scale_in(const QRectF& box) { return {box.x() + rail_names_mm, box.width() - rail_names_mm - margins_mm}; }

void vertical(const Canvas& canvas, double x_mm, const QRectF& box, QColor colour, double thick_mm) {
  canvas.fill({x_mm - thick_mm / 2, box.y(), thick_mm, box.height()}, colour);
}

std::shared_ptr<Block> scale_head() {
  auto head = std::make_shared<Block>();
  head->height_mm = 5.0;
  head->with_next = true;
  head->draw = [](const Canvas& canvas, QRectF box) {
    const Scale scale = scale_in(box);
    const auto word = [&](double position, const char* words) {
      canvas.line({scale.at(position) - 20.0, box.y(), 40.0, 4.0}, QString::fromUtf8(words), 2.4, Weight::plain,
                  Align::centre, ink::quiet);
    };
    word(-1.0, "lower acceptance limit");
    word(0.0, "middle");
    word(1.0, "upper acceptance limit");
    canvas.line({box.right() - margins_mm, box.y(), margins_mm, 4.0}, "margin", 2.4, Weight::plain, Align::right,
                ink::quiet);
  };
  return head;
}

bool is_ok(const trace::RailMark& mark) { return mark.standing == trace::Standing::ok; }

void draw_rails(const Canvas& canvas, const QRectF& box, const Scale& scale, const trace::RailMark& mark) {
  const double top = box.y(), height = box.height();
  const double from = mark.has_lower ? -1.0 : 0.0, to = mark.has_upper ? 1.0 : 0.0;
  const auto strip = [&](double begin, double end) {
    const double a = std::clamp(begin, -reach, reach), b = std::clamp(end, -reach, reach);
    canvas.fill({scale.at(a), top + 0.6, scale.at(b) - scale.at(a), height - 1.2}, ink::rule);
  };
  if (mark.has_lower && mark.guard_below > 0.0) strip(-1.0 - mark.guard_below, -1.0);
  if (mark.has_upper && mark.guard_above > 0.0) strip(1.0, 1.0 + mark.guard_above);
  canvas.rule(scale.at(from), box.center().y(), scale.at(to) - scale.at(from), ink::rule, 0.15);
  if (mark.has_lower) vertical(canvas, scale.at(-1.0), box, ink::text, 0.3);
  if (mark.has_upper) vertical(canvas, scale.at(1.0), box, ink::text, 0.3);
  vertical(canvas, scale.at(0.0), box, ink::rule, 0.15);
}

void draw_mark(const Canvas& canvas, const QRectF& box, const Scale& scale, const trace::RailMark& mark) {
  const QColor colour = is_ok(mark) ? ink::text : ink::outside;
  const double y = box.center().y();
  const double position = std::clamp(mark.position, -reach, reach);
  const double low = std::clamp(mark.position - mark.whisker, -reach, reach);
  const double high = std::clamp(mark.position + mark.whisker, -reach, reach);
  if (high > low) canvas.rule(scale.at(low), y, scale.at(high) - scale.at(low), colour, 0.35);
  if (std::abs(mark.position) > reach) {  // an arrow: it lies further out
    const double way = mark.position > 0 ? 1.0 : -1.0, tip = scale.at(position);
    const QPointF points[] = {{canvas.px(tip), canvas.px(y)},
                              {canvas.px(tip - way * 2.2), canvas.px(y - 1.1)},
                              {canvas.px(tip - way * 2.2), canvas.px(y + 1.1)}};
    canvas.painter->save();
    canvas.painter->setBrush(colour);
    canvas.painter->setPen(Qt::NoPen);
    canvas.painter->drawPolygon(points, 3);
    canvas.painter->restore();
    return;
  }
  draw_shape(canvas, is_ok(mark) ? Shape::disc : Shape::cross, {scale.at(position), y}, is_ok(mark) ? 1.7 : 2.1,
             colour);
}

Block rail_row(const trace::RailMark& mark, bool nearest) {
  Block block;
  block.height_mm = row_mm;
  block.draw = [mark, nearest](const Canvas& canvas, QRectF box) {
    const Scale scale = scale_in(box);
    const Weight weight = nearest || !is_ok(mark) ? Weight::bold : Weight::plain;
    const QColor colour = is_ok(mark) ? ink::text : ink::outside;
    const QString name = qt(trace::shown_as(mark.check));
    canvas.line({box.x(), box.y(), rail_names_mm - 3.0, box.height()}, name,
                canvas.fitting_mm(name, weight, 2.8, rail_names_mm - 3.0), weight, Align::left, colour);
    draw_rails(canvas, box, scale, mark);
    draw_mark(canvas, box, scale, mark);
    canvas.line({box.right() - margins_mm, box.y(), margins_mm, box.height()}, qt(trace::margin_words(mark.margin)),
                2.8, weight, Align::right, colour);
  };
  return block;
}

}  // namespace

std::vector<Block> margin_rails(const std::vector<trace::RailMark>& marks, const std::string& nearest) {
  const auto head = scale_head();
  std::vector<Block> blocks{*head};
  for (const trace::RailMark& mark : marks) {
    blocks.push_back(rail_row(mark, mark.check == nearest));
    if (blocks.size() > 2) blocks.back().head = head;
  }
  return blocks;
}

}  // namespace probewright::pages
