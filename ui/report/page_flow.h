// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <functional>
#include <vector>

namespace chronodrome::ui::report {

/// Fills pages from top to bottom. Everything placed is kept until all pages are known, for their number
/// stands on each. Lengths in pixels of 1/96 inch.
class PageFlow {
public:
  using Draw = std::function<void(QCPPainter&, double y)>;

  explicit PageFlow(double height) : height_(height), pages_(1) {}

  [[nodiscard]] double height() const { return height_; }
  [[nodiscard]] double left() const { return height_ - y_; }
  [[nodiscard]] bool isAtTop() const { return y_ <= 0.0; }
  /// Goes to the next page unless `height` fits here. A page that is still empty stays.
  void need(double height) {
    if (height > left() && !isAtTop()) newPage();
  }
  void newPage() {
    pages_.emplace_back();
    y_ = 0.0;
  }
  void place(double height, Draw draw) {
    pages_.back().push_back({y_, std::move(draw)});
    y_ += height;
  }
  /// White, but none at the top of a page.
  void space(double height) {
    if (!isAtTop()) y_ += height;
  }

  [[nodiscard]] std::size_t pageCount() const { return pages_.size(); }
  void paintPage(QCPPainter& painter, std::size_t page) const {
    for (const auto& item : pages_[page])
      item.draw(painter, item.y);
  }

private:
  struct Item {
    double y = 0.0;
    Draw draw;
  };
  double height_;
  double y_ = 0.0;
  std::vector<std::vector<Item>> pages_;
};

} // namespace chronodrome::ui::report
