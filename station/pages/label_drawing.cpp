#include <QBuffer>
#include <QFontMetricsF>
#include <QImage>
#include <QPageSize>
#include <QPainter>
#include <QPainterPath>
#include <QPdfWriter>
#include <algorithm>
#include <cmath>
#include <optional>
#include <span>
#include <string>

#include "station/base/numbers.h"
#include "station/pages/canvas.h"
#include "station/pages/drawing_room.h"
#include "station/pages/files_out.h"
#include "station/pages/label.h"
#include "station/pages/pdf_bytes.h"

namespace probewright::pages {
namespace {

constexpr double mm_per_inch = 25.4;
constexpr double margin_mm = 1.2;
constexpr double gap_mm = 0.6;
// Smallest text that still reads at arm's length is about 1.2 mm of capital height; 1.1 is left for long lots.
constexpr double least_text_mm = 1.5;
// A module of a DataMatrix on healthcare items: 0.254 mm at least (GS1 General Specifications, symbol specification
// table 6; from memory), here with 2 % for the rounding to whole dots of a 203 dpi printer.
constexpr double least_square_mm = 0.249;
constexpr double most_square_mm = 0.65;
// A bar of Code 128: two dots of a 300 dpi printer (common practice for readers at short range).
constexpr double least_bar_mm = 0.165;
constexpr double most_bar_mm = 0.5;
constexpr int quiet_squares = 1;  // ISO/IEC 16022
constexpr int quiet_bars = 10;    // ISO/IEC 15417

}  // namespace

/// Draws one label on one device. Everything that does not fit is told, nothing is cut off.
class LabelDrawing {
 public:
  LabelDrawing(const Label& label, Canvas canvas) : label_{label}, canvas_{canvas} {}

  std::optional<Problem> draw() {
    canvas_.fill({0, 0, width(), height()}, Qt::white);
    if (label_.kind_ == Label::Kind::pass_with_gtin) pass_with_gtin();
    if (label_.kind_ == Label::Kind::pass_with_serial) pass_with_serial();
    if (label_.kind_ == Label::Kind::fail) fail();
    return fault_;
  }

 private:
  double width() const { return label_.size_.width_mm; }
  double height() const { return label_.size_.height_mm; }

  // A line as large as it fits, at most `most_mm`; too small to read is a fault.
  void text(const QRectF& box_mm, const QString& words, double most_mm, Weight weight, Align align,
            QColor colour = Qt::black) {
    const double size_mm = canvas_.fitting_mm(words, weight, most_mm, box_mm.width());
    if (size_mm < least_text_mm || 0.73 * size_mm > box_mm.height()) fault_ = too_small(words);
    canvas_.line(box_mm, words, size_mm, weight, align, colour);
  }

  Problem too_small(const QString& what) const {
    return Problem{"label_too_small",
                   "",
                   {{"width", shortest(width())}, {"height", shortest(height())}, {"what", what.toStdString()}}};
  }

  // How wide a module becomes: a whole number of dots that fits `room_mm`.
  double module_mm(int modules, double room_mm, double least_mm, double most_mm) {
    const double dots = std::floor(canvas_.px(std::min(room_mm / modules, most_mm)) + 1e-6);
    const double module = dots / canvas_.px_per_mm;
    if (room_mm / modules < least_mm)
      fault_ = too_small(qt(label_.coded_));
    else if (module < least_mm)
      fault_ = too_coarse(module, least_mm);
    return module;
  }

  Problem too_coarse(double module, double least_mm) const {
    return Problem{"label_resolution",
                   "",
                   {{"dpi", shortest(std::round(canvas_.px_per_mm * mm_per_inch))},
                    {"module", fixed(module, 3)},
                    {"least", shortest(least_mm)}}};
  }

  // All modules as one path: edges that touch leave no hairline, whatever the viewer does.
  void modules(QPointF corner_mm, double module_w_mm, double module_h_mm) {
    const Modules& code = label_.code_;
    const double x = std::round(canvas_.px(corner_mm.x())), y = std::round(canvas_.px(corner_mm.y()));
    const double w = std::round(canvas_.px(module_w_mm)), h = std::round(canvas_.px(module_h_mm));
    QPainterPath path;
    path.setFillRule(Qt::WindingFill);
    for (int row = 0; row < code.height; ++row)
      for (int column = 0; column < code.width; ++column) {
        const int start = column;
        while (column < code.width && code.at(column, row)) ++column;
        if (column > start) path.addRect(x + start * w, y + row * h, (column - start) * w, h);
      }
    canvas_.painter->fillPath(path, Qt::black);
  }

  // Bars over `box`, centred, with their quiet zones inside it.
  void bars(const QRectF& box_mm) {
    const int all = label_.code_.width + 2 * quiet_bars;
    const double module = module_mm(all, box_mm.width(), least_bar_mm, most_bar_mm);
    modules({box_mm.center().x() - module * label_.code_.width / 2, box_mm.y()}, module, box_mm.height());
  }

  // The word over all that is no real production, white on black. Returns how much height it took.
  double overprint(double x_mm, double y_mm, double width_mm, double height_mm) {
    if (label_.overprint_.empty()) return 0.0;
    canvas_.fill({x_mm, y_mm, width_mm, height_mm}, Qt::black);
    text({x_mm + 0.6, y_mm, width_mm - 1.2, height_mm}, qt(label_.overprint_), 0.86 * height_mm, Weight::bold,
         Align::centre, Qt::white);
    return height_mm + gap_mm;
  }

  QString copy_words() const { return label_.copy_ > 1 ? qt("copy " + std::to_string(label_.copy_)) : QString{}; }

  // The serial as large as the line allows, a reprint's number at its right.
  void serial_line(const QRectF& box_mm, const QString& words, Align align) {
    QRectF rest = box_mm;
    if (label_.copy_ > 1) {
      const double copy_mm = std::max(canvas_.width_mm(copy_words(), canvas_.font(2.0)), 0.2 * box_mm.width());
      text({box_mm.right() - copy_mm, box_mm.y(), copy_mm, box_mm.height()}, copy_words(), 2.0, Weight::plain,
           Align::right);
      rest.setRight(box_mm.right() - copy_mm - gap_mm);
    }
    text(rest, words, 0.95 * box_mm.height(), Weight::bold, align);
  }

  // Model left, the word right.
  void head_line(const QRectF& box_mm) {
    const double pass_mm = 0.36 * box_mm.width();
    text({box_mm.right() - pass_mm, box_mm.y(), pass_mm, box_mm.height()}, "PASS", box_mm.height(), Weight::bold,
         Align::right);
    text(box_mm.adjusted(0, 0, -pass_mm - gap_mm, 0), qt(label_.model_), box_mm.height(), Weight::bold, Align::left);
  }

  void pass_with_gtin() {
    const double strip = std::clamp(0.17 * height(), 2.2, 6.0);
    const double room = std::min(height() - 2 * margin_mm - strip - gap_mm, 0.45 * width());
    const double module = module_mm(label_.code_.width + 2 * quiet_squares, room, least_square_mm, most_square_mm);
    const double side = module * (label_.code_.width + 2 * quiet_squares);
    // The quiet zone may reach into the margin, so that the code stands flush with the line below it.
    modules({margin_mm, margin_mm + module * quiet_squares}, module, module);
    const double x = margin_mm + side + gap_mm;
    element_lines({x, margin_mm, width() - margin_mm - x, height() - 2 * margin_mm - strip - gap_mm});
    serial_line({margin_mm, height() - margin_mm - strip, width() - 2 * margin_mm, strip}, qt("(21)" + label_.serial_),
                Align::left);
  }

  void element_lines(QRectF box_mm) {
    const double line = std::min(box_mm.height() / (label_.overprint_.empty() ? 4.4 : 5.6), 5.0);
    box_mm.setTop(box_mm.top() + overprint(box_mm.x(), box_mm.y(), box_mm.width(), 1.15 * line));
    head_line({box_mm.x(), box_mm.y(), box_mm.width(), 1.1 * line});
    double y = box_mm.y() + 1.25 * line;
    const std::string elements[] = {"(01)" + label_.gtin_, "(11)" + label_.production_date_, "(10)" + label_.lot_};
    const double size_mm = common_size(elements, box_mm.width(), 0.86 * line);
    for (const std::string& element : elements) {
      text({box_mm.x(), y, box_mm.width(), 0.95 * line}, qt(element), size_mm, Weight::plain, Align::left);
      y += line;
    }
  }

  // Lines of one kind look calm at one size: the longest decides.
  double common_size(std::span<const std::string> lines, double room_mm, double most_mm) const {
    double size_mm = most_mm;
    for (const std::string& line : lines)
      size_mm = std::min(size_mm, canvas_.fitting_mm(qt(line), Weight::plain, most_mm, room_mm));
    return size_mm;
  }

  void pass_with_serial() {
    const double inner = width() - 2 * margin_mm;
    const double line = std::clamp(0.14 * height(), 2.2, 5.0);
    const double band = overprint(margin_mm, margin_mm, inner, line);
    head_line({margin_mm, margin_mm + band, inner, line});
    const double below = height() - margin_mm - 2.1 * line;
    const double top = margin_mm + band + line + gap_mm;
    if (below - top < 0.15 * height()) fault_ = too_small(qt(label_.coded_));
    bars({0.4, top, width() - 0.8, below - top - gap_mm});
    serial_line({margin_mm, below, inner, 1.1 * line}, qt(label_.serial_), Align::left);
    text({margin_mm, below + 1.2 * line, inner, 0.9 * line}, qt(label_.lot_ + "  " + label_.production_date_),
         0.82 * line, Weight::plain, Align::left);
  }

  void fail() {
    const double inner = width() - 2 * margin_mm;
    const double line = std::clamp(0.14 * height(), 2.2, 5.0);
    const double band = overprint(margin_mm, margin_mm, inner, line);
    const double word = std::min(0.34 * height(), 14.0) - band / 3;
    const double side = 0.66 * word;
    cross({margin_mm + 0.06 * word, margin_mm + band + (word - side) / 2, side, side});
    text({margin_mm + 1.15 * word, margin_mm + band, inner - 1.15 * word, word}, "FAIL", word, Weight::bold,
         Align::left);
    const double below = height() - margin_mm - 1.1 * line;
    const double top = margin_mm + band + word + gap_mm;
    if (below - top < 0.15 * height()) fault_ = too_small(qt(label_.coded_));
    bars({0.4, top, width() - 0.8, below - top - gap_mm});
    serial_line({margin_mm, below, inner, 1.1 * line}, qt(label_.coded_), Align::left);
  }

  // The shape beside the word: told without reading, and without colour.
  void cross(const QRectF& box_mm) {
    const QRectF box = canvas_.px(box_mm);
    canvas_.painter->save();
    canvas_.painter->setRenderHint(QPainter::Antialiasing);
    canvas_.painter->setPen(QPen{Qt::black, 0.24 * box.width(), Qt::SolidLine, Qt::FlatCap});
    canvas_.painter->drawLine(box.topLeft(), box.bottomRight());
    canvas_.painter->drawLine(box.topRight(), box.bottomLeft());
    canvas_.painter->restore();
  }

  const Label& label_;
  Canvas canvas_;
  std::optional<Problem> fault_;
};

namespace {

QByteArray bytes_of(const QImage& image) {
  QByteArray bytes;
  QBuffer buffer{&bytes};
  buffer.open(QIODevice::WriteOnly);
  image.convertToFormat(QImage::Format_Grayscale8).save(&buffer, "PNG");
  return bytes;
}

}  // namespace

Result<void> Label::write_pdf(const std::filesystem::path& path) const {
  if (auto fault = not_drawable()) return *fault;
  QByteArray bytes;
  QBuffer buffer{&bytes};
  buffer.open(QIODevice::WriteOnly);
  QPdfWriter writer{&buffer};
  writer.setCreator("probewright");
  writer.setTitle(qt(serial_.empty() ? coded_ : serial_));
  writer.setResolution(1200);
  writer.setPageSize(QPageSize{whole_points(size_.width_mm, size_.height_mm), {}, QPageSize::ExactMatch});
  writer.setPageMargins({});
  {
    QPainter painter{&writer};
    if (auto fault = LabelDrawing{*this, {&painter, 1200 / mm_per_inch}}.draw()) return *fault;
  }
  if (!set_page_size(bytes, size_.width_mm, size_.height_mm) || !set_creation_time(bytes, printed_))
    return Problem{"page_not_finished", path.string()};
  return replace_file(path, bytes);
}

Result<void> Label::write_png(const std::filesystem::path& path, int dots_per_inch) const {
  if (auto fault = not_drawable()) return *fault;
  if (dots_per_inch < 100 || dots_per_inch > 1200)
    return Problem{"label_dpi", "", {{"dpi", std::to_string(dots_per_inch)}}};
  const double px_per_mm = dots_per_inch / mm_per_inch;
  QImage image{static_cast<int>(std::lround(size_.width_mm * px_per_mm)),
               static_cast<int>(std::lround(size_.height_mm * px_per_mm)), QImage::Format_RGB32};
  if (image.isNull()) return Problem{"label_dpi", "", {{"dpi", std::to_string(dots_per_inch)}}};
  image.setDotsPerMeterX(static_cast<int>(std::lround(px_per_mm * 1000)));
  image.setDotsPerMeterY(static_cast<int>(std::lround(px_per_mm * 1000)));
  {
    QPainter painter{&image};
    painter.setRenderHint(QPainter::TextAntialiasing);
    if (auto fault = LabelDrawing{*this, {&painter, px_per_mm}}.draw()) return *fault;
  }
  return replace_file(path, bytes_of(image));
}

}  // namespace probewright::pages
