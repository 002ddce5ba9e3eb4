#pragma once
#include <QFont>
#include <QRectF>
#include <QSharedPointer>
#include <string>

#include "station/pages/canvas.h"

class QCPAxisTickerFixed;
class QCustomPlot;

/// The looks that all plots of pages share. Private to pages. Main thread only.
namespace probewright::pages {

inline constexpr double plot_px_per_mm =
    10.0;  // of a plot's own picture; lines and sizes of it are whole numbers of these

/// A plot without ground of its own: the page's overprint shows through. Numbers without a locale.
void dress(QCustomPlot& plot);
void draw(QCustomPlot& plot, const Canvas& canvas, const QRectF& box_mm);

QFont plot_font(double size_mm);
/// The text, its end left out where it is wider.
QString elided(const std::string& text, double size_mm, double room_mm);
/// Words at a place of the plot's own axes.
void write_at(QCustomPlot& plot, double x, double y, const QString& text, Qt::Alignment where,
              QColor colour = ink::text);
/// Whole numbers only, about five.
QSharedPointer<QCPAxisTickerFixed> whole_numbers(double range);

}  // namespace probewright::pages
