#pragma once
#include <QColor>
#include <QFont>
#include <QRectF>
#include <QString>
#include <QStringList>
#include <string>
#include <string_view>

class QCPPainter;
class QPainter;

/// Drawing in millimetres with one set of fonts and inks. Private to pages. Main thread only.
namespace probewright::pages {

inline constexpr const char* font_family = "DejaVu Sans";

/// Ink for data, one accent, greys for what only guides the eye. States are told by word and shape first.
namespace ink {
inline const QColor text{0x1c, 0x22, 0x29};
inline const QColor quiet{0x5d, 0x68, 0x72};
inline const QColor rule{0xd3, 0xd8, 0xdc};
inline const QColor ground{0xf3, 0xf5, 0xf5};
inline const QColor bar{0x6e, 0x7a, 0x83};
inline const QColor outside{0xb5, 0x42, 0x0e};    // a darker vermilion of the Okabe-Ito palette
inline const QColor overprint{0xec, 0xee, 0xef};  // behind the page's text: seen at once, and never in its way
}  // namespace ink

enum class Align { left, right, centre };
enum class Weight { plain, bold };

inline QString qt(std::string_view text) { return QString::fromUtf8(text.data(), static_cast<qsizetype>(text.size())); }

/// Makes text of this font what it was when it is copied or searched for: "fi" stays two letters.
void without_ligatures(QFont& font);

/// A painter, and how many of its pixels make a millimetre. Fonts are sized in pixels, so text has the same width on
/// every device whatever resolution the tool kit thinks it has.
struct Canvas {
  QPainter* painter = nullptr;
  double px_per_mm = 1.0;
  QCPPainter* plot_painter = nullptr;  ///< the same painter where plots can be drawn, else null

  double px(double mm) const { return mm * px_per_mm; }
  QRectF px(const QRectF& mm) const { return {px(mm.x()), px(mm.y()), px(mm.width()), px(mm.height())}; }
  /// The font with capitals and digits of about 0.73 * `size_mm`.
  QFont font(double size_mm, Weight weight = Weight::plain) const;
  double width_mm(const QString& text, const QFont& font) const;
  /// The largest size, at most `most_mm`, at which `text` fits into `room_mm`.
  double fitting_mm(const QString& text, Weight weight, double most_mm, double room_mm) const;

  /// One line of text, its capitals centred in the height of `box_mm`. Too long a text is drawn over the edge: fit it
  /// first.
  void line(const QRectF& box_mm, const QString& text, double size_mm, Weight weight, Align align, QColor colour) const;
  void fill(const QRectF& box_mm, QColor colour) const;
  void rule(double x_mm, double y_mm, double width_mm, QColor colour, double thick_mm) const;
};

/// The lines of `text` at a width of `width_mm`: broken between words, and inside those that alone are too wide.
QStringList wrapped(const Canvas& canvas, const QString& text, const QFont& font, double width_mm);

/// The word that must stand over all output that is not real production: DEMONSTRATION, the purpose, both, or nothing.
std::string overprint_of(std::string_view purpose, bool emulated);

}  // namespace probewright::pages
