#include "pieces.hpp"

#include <algorithm>
#include <numeric>
#include <optional>

namespace bathwright::sheets::pdf {
namespace {

constexpr double gap = 3;
constexpr const char* and_then = "  •  ";

/// A line to write on needs more room on paper than on a screen.
std::string with_room(const std::string& text) {
  std::string out;
  for (const char c : text) out += c == '_' ? std::string("__") : std::string(1, c);
  return out;
}

Piece piece_of(Words words, double left = 0, double below = 1) {
  const double height = words.height() + below;
  return {height,
          [words = std::move(words), left](Ink& ink, double x, double y) { ink.put(words, x + left, y); },
          false, nullptr};
}

/// One under the other, undivided.
Piece together(Pieces pieces) {
  const double height = height_of(pieces);
  return {height,
          [pieces = std::move(pieces)](Ink& ink, double x, double y) {
            for (const Piece& piece : pieces) {
              piece.draw(ink, x, y);
              y += piece.height;
            }
          },
          false, nullptr};
}

Piece beside(Pieces left, Pieces right, double apart) {
  const double height = std::max(height_of(left), height_of(right));
  return {
      height,
      [l = together(std::move(left)), r = together(std::move(right)), apart](Ink& ink, double x, double y) {
        l.draw(ink, x, y);
        r.draw(ink, x + apart, y);
      },
      false, nullptr};
}

/// What stands under a field without a label of its own goes on in its line.
Fields lines_joined(const Fields& fields) {
  Fields joined;
  for (const Field& field : fields)
    if (field.label.empty() && !joined.empty())
      joined.back().value += and_then + field.value;
    else
      joined.push_back(field);
  return joined;
}

class Maker {
 public:
  Maker(const Ink& ink, const Sizes& sizes, double width, bool small)
      : ink_(ink), small_{sizes.small}, body_{small ? sizes.small : sizes.body}, width_(width) {}

  Pieces heading(const std::string& words) const {
    if (words.empty()) return {Piece{gap, [](Ink&, double, double) {}, true, nullptr}};
    constexpr double above = 5, below = 2;
    Words text = ink_.words(words, {body_.size, true, colours.accent}, width_);
    const double height = above + text.height() + below;
    return {Piece{height,
                  [text = std::move(text), right = width_](Ink& ink, double x, double y) {
                    ink.put(text, x, y + above);
                    ink.line(x, y + above + text.height(), x + right, colours.rule);
                  },
                  true, nullptr}};
  }

  Pieces operator()(const Paragraph& paragraph) const {
    return {piece_of(ink_.words(with_room(paragraph.text), body_, width_, body_.size))};
  }

  /// A filled square, the word, the reason.
  Pieces operator()(const Stop& stop) const { return {stop_of(stop.text, 0)}; }

  Pieces operator()(const Fields& fields) const {
    double label_width = 0;
    for (const Field& field : fields)
      label_width = std::max(label_width, ink_.words(field.label, label()).width());
    const double left = label_width + 2 * gap;
    Pieces pieces;
    for (const Field& field : lines_joined(fields)) {
      Words name = ink_.words(field.label, label()),
            value = ink_.words(with_room(field.value), small_, width_ - left);
      const double height = std::max(name.height(), value.height()) + 0.5;
      pieces.push_back(
          {height,
           [name = std::move(name), value = std::move(value), left](Ink& ink, double x, double y) {
             ink.put(name, x, y);
             ink.put(value, x + left, y);
           },
           false, nullptr});
    }
    return pieces;
  }

  Pieces operator()(const Table& table) const { return rows_of(table).pieces; }

  Pieces operator()(const Task& task) const {
    const double indent = body_.size + 2 * gap;
    Pieces parts{task_title(task, indent)};
    for (const std::string& stop : task.stops) parts.push_back(stop_of(stop, indent));
    std::string text;
    for (const std::string& line : task.lines) text += (text.empty() ? "" : and_then) + line;
    if (!text.empty())
      parts.push_back(piece_of(ink_.words(with_room(text), small_, width_ - indent), indent));
    return {together(std::move(parts))};
  }

  Pieces operator()(const SignatureLines& lines) const {
    double role_width = 0;
    for (const SignatureLine& one : lines)
      role_width = std::max(role_width, ink_.words(one.role, quiet()).width());
    constexpr double row = 17, between = 16;  // more than 6 mm to write in
    const double half = (width_ - between) / 2, begins = role_width + 2 * gap;
    Pieces pieces;
    for (std::size_t i = 0; i < lines.size(); i += 2) {
      Pieces two;
      for (std::size_t j = i; j < std::min(i + 2, lines.size()); ++j)
        two.push_back(
            {row,
             [role = ink_.words(lines[j].role, quiet()), name = fitting(lines[j].name, half - begins), begins,
              half](Ink& ink, double x, double y) {
               const double foot = y + row - 3;
               ink.put(role, x, foot - role.baseline());
               ink.put(name, x + begins, foot - 1.5 - name.baseline());
               ink.line(x + begins, foot, x + half, colours.ink);
             },
             false, nullptr});
      pieces.push_back(two.size() == 2 ? beside({two[0]}, {two[1]}, half + between) : two[0]);
    }
    return {together(std::move(pieces))};
  }

  Pieces operator()(const Charts& drawn) const {
    constexpr double high = 138, apart = 14, below = 8;
    const double half = (width_ - apart) / 2;
    Pieces rows;
    for (std::size_t i = 0; i < drawn.charts.size(); i += 2)
      rows.push_back(
          {high + below,
           [left = drawn.charts[i],
            right = i + 1 < drawn.charts.size() ? std::optional(drawn.charts[i + 1]) : std::nullopt,
            half](Ink& ink, double x, double y) {
             ink.chart(left, x, y, half, high);
             if (right) ink.chart(*right, x + half + apart, y, half, high);
           },
           false, nullptr});
    return rows;
  }

  /// Blocks from `first` on that stand beside the table before them, or nothing where they do not fit there.
  std::optional<Piece> table_and(const Table& table, const std::vector<Block>& blocks,
                                 std::size_t& next) const {
    constexpr double most_of_width = 0.72;
    Rows rows = rows_of(table);
    if (rows.width > most_of_width * width_) return std::nullopt;
    const double left = rows.width + 5 * gap;
    const Maker narrow(*this, width_ - left);
    Pieces right;
    std::size_t i = next;
    for (; i < blocks.size() && std::holds_alternative<Paragraph>(blocks[i]); ++i)
      for (Piece& piece : narrow(std::get<Paragraph>(blocks[i]))) right.push_back(std::move(piece));
    constexpr double most_longer = 2;
    if (right.empty() || height_of(right) > most_longer * height_of(rows.pieces)) return std::nullopt;
    next = i;
    return beside(std::move(rows.pieces), std::move(right), left);
  }

 private:
  struct Rows {
    Pieces pieces;  ///< the head first
    double width = 0;
  };

  Maker(const Maker& other, double width)
      : ink_(other.ink_), small_(other.small_), body_(other.small_), width_(width) {}

  /// On one line, in smaller letters where it has to be.
  [[nodiscard]] Words fitting(const std::string& text, double room) const {
    Words words = ink_.words(text, small_);
    return words.width() <= room ? words : ink_.words(text, {small_.size * room / words.width()});
  }

  [[nodiscard]] Look label() const { return {small_.size, true}; }
  [[nodiscard]] Look quiet() const { return {small_.size, false, colours.quiet}; }

  [[nodiscard]] Piece stop_of(const std::string& text, double indent) const {
    Words stop = ink_.words("STOP", {body_.size, true, colours.stop});
    const double side = 0.75 * body_.size, left = indent + side + gap, reason = left + stop.width() + 2 * gap;
    Words why = ink_.words(with_room(text), body_, width_ - reason);
    const double height = why.height() + 2;
    return {height,
            [stop = std::move(stop), why = std::move(why), side, indent, left, reason](Ink& ink, double x,
                                                                                       double y) {
              ink.full_square(x + indent, y + stop.baseline() - side, side, colours.stop);
              ink.put(stop, x + left, y);
              ink.put(why, x + reason, y);
            },
            false, nullptr};
  }

  /// A box to tick, the title, and at the right edge the mark with lines to write on.
  [[nodiscard]] Piece task_title(const Task& task, double indent) const {
    constexpr double above = 2, a_stroke = 10;  // of the pen, for each _ of the mark
    struct Part {
      Words words;
      double blank;  // after the words
    };
    std::vector<Part> mark;
    double mark_width = 0;
    for (std::size_t at = 0; at < task.mark.size();) {
      const std::size_t blank = std::min(task.mark.find('_', at), task.mark.size()),
                        end = std::min(task.mark.find_first_not_of('_', blank), task.mark.size());
      mark.push_back({ink_.words(task.mark.substr(at, blank - at), quiet()),
                      a_stroke * static_cast<double>(end - blank)});
      mark_width += mark.back().words.width() + mark.back().blank + gap;
      at = end;
    }
    Words title = ink_.words(task.title, {body_.size, true}, width_ - indent - mark_width - gap);
    const double height = above + title.height() + 0.5, side = 0.85 * body_.size;
    return {height,
            [title = std::move(title), mark = std::move(mark), indent, side, begins = width_ - mark_width](
                Ink& ink, double x, double y) {
              const double base = y + above + title.baseline();
              if (!mark.empty()) ink.open_square(x + 0.5, base - side + 0.5, side);
              ink.put(title, x + indent, y + above);
              double at = x + begins;
              for (const Part& part : mark) {
                ink.put(part.words, at, base - part.words.baseline());
                at += part.words.width();
                ink.line(at + 1, base + 1, at + part.blank, colours.ink);
                at += part.blank + gap;
              }
            },
            false, nullptr};
  }

  struct Cell {
    Words words;
    double after_mark = 0;  ///< of a number: width from its decimal mark on
  };
  using CellRow = std::vector<Cell>;

  [[nodiscard]] CellRow cells(const std::vector<std::string>& texts, const Table& table, const Look& look,
                              double last_room) const {
    CellRow row;
    for (std::size_t c = 0; c < texts.size(); ++c) {
      const bool number = table.heads()[c].align == Align::number;
      const bool wraps = last_room > 0 && c + 1 == texts.size() && !number;
      Cell cell{wraps ? ink_.words(texts[c], look, last_room) : ink_.words(texts[c], look), 0};
      if (const auto mark = texts[c].find('.'); number && mark != std::string::npos)
        cell.after_mark = ink_.words(texts[c].substr(mark), look).width();
      row.push_back(std::move(cell));
    }
    return row;
  }

  /// Numbers stand with their decimal marks under each other; the last column of words has what room is left.
  [[nodiscard]] Rows rows_of(const Table& table) const {
    constexpr double apart = 9, least_room = 60;
    const std::size_t columns = table.heads().size();
    std::vector<std::string> heads;
    for (const Column& column : table.heads()) heads.push_back(column.head);
    std::vector<double> wide(columns, 0), after(columns, 0);
    const auto measure = [&](double last_room, double size) {
      std::vector<CellRow> all{cells(heads, table, {size, false, colours.quiet}, last_room)};
      for (const auto& row : table.rows()) all.push_back(cells(row, table, {size}, last_room));
      std::ranges::fill(wide, 0);
      std::ranges::fill(after, 0);
      for (std::size_t r = 1; r < all.size(); ++r)
        for (std::size_t c = 0; c < columns; ++c) after[c] = std::max(after[c], all[r][c].after_mark);
      for (std::size_t r = 0; r < all.size(); ++r)
        for (std::size_t c = 0; c < columns; ++c) {
          const Cell& cell = all[r][c];
          const bool number = r > 0 && table.heads()[c].align == Align::number;
          wide[c] = std::max(wide[c], cell.words.width() + (number ? after[c] - cell.after_mark : 0));
        }
      return all;
    };
    const auto total = [&] {
      return std::accumulate(wide.begin(), wide.end(), apart * static_cast<double>(columns - 1));
    };
    double size = body_.size;
    auto all = measure(0, size);
    if (total() > width_) {
      const double room = width_ - (total() - wide.back());
      if (table.heads().back().align == Align::words && room > least_room) {
        all = measure(room, size);
      } else {  // too many columns: smaller letters
        size *= width_ / total();
        all = measure(0, size);
      }
    }
    Rows rows;
    rows.width = total();
    std::shared_ptr<const Piece> head;
    for (std::size_t r = 0; r < all.size(); ++r) {
      double height = 0;
      for (const Cell& cell : all[r]) height = std::max(height, cell.words.height());
      Piece piece{
          height + 1.5,
          [row = std::move(all[r]), wide, after, height, width = rows.width, is_head = r == 0,
           aligns = aligns_of(table)](Ink& ink, double x, double y) {
            double at = x;
            for (std::size_t c = 0; c < row.size(); ++c) {
              const Cell& cell = row[c];
              const double from_right = is_head ? 0 : after[c] - cell.after_mark;
              ink.put(cell.words,
                      aligns[c] == Align::number ? at + wide[c] - from_right - cell.words.width() : at, y);
              at += wide[c] + apart;
            }
            ink.line(x, y + height + 0.5, x + width, colours.rule, is_head ? 0.8 : 0.4);
          },
          r == 0, r == 0 ? nullptr : head};
      if (r == 0) head = std::make_shared<const Piece>(piece);
      rows.pieces.push_back(std::move(piece));
    }
    return rows;
  }

  static std::vector<Align> aligns_of(const Table& table) {
    std::vector<Align> aligns;
    for (const Column& column : table.heads()) aligns.push_back(column.align);
    return aligns;
  }

  const Ink& ink_;
  Look small_, body_;
  double width_;
};

}  // namespace

double height_of(const Pieces& pieces) {
  return std::accumulate(pieces.begin(), pieces.end(), 0.0,
                         [](double sum, const Piece& piece) { return sum + piece.height; });
}

Pieces pieces_of(const Section& section, const Ink& ink, const Sizes& sizes, double width) {
  const Maker maker(ink, sizes, width, section.reading != Reading::working);
  Pieces pieces = maker.heading(section.heading);
  const auto& blocks = section.blocks;
  for (std::size_t i = 0; i < blocks.size();) {
    const Block& block = blocks[i++];
    if (const auto* table = std::get_if<Table>(&block))
      if (auto both = maker.table_and(*table, blocks, i)) {
        pieces.push_back(*std::move(both));
        continue;
      }
    for (Piece& piece : std::visit(maker, block)) pieces.push_back(std::move(piece));
  }
  return pieces;
}

}  // namespace bathwright::sheets::pdf
