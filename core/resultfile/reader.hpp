#pragma once
// SPDX-License-Identifier: MIT

#include "core/resultfile/codes.hpp"
#include "core/resultfile/objects.hpp"

#include <initializer_list>
#include <map>
#include <optional>
#include <span>
#include <stdexcept>
#include <string>
#include <type_traits>
#include <utility>
#include <vector>

namespace headband::resultfile {

/// What is wrong inside a file; turned into base::IoError where the file's name is known.
class Damage final : public std::runtime_error {
 public:
  Damage(const std::string& object, const std::string& what) : std::runtime_error(object + ": " + what) {}
};

/// The reading half of the archive (see Writer). Trusts nothing: kinds, ranks, sizes and codes are checked before
/// memory is taken, no dataset may be larger than the file that holds it, and links that lead out of the file are
/// refused.
class Reader {
 public:
  static constexpr bool writing = false;

  /// @param file_size bytes of the whole file: the most any dataset may hold
  Reader(H5::Group root, std::size_t file_size) : group_(std::move(root)), file_size_(file_size) {}

  template <class Body>
  void group(const char* name, Body&& body) {
    enter(name);
    body();
    leave();
  }
  template <class Block, class Body>
  void optional_group(const char* name, std::optional<Block>& block, Body&& body) {
    block.reset();
    if (!holds(name)) return;
    block.emplace();
    group(name, [&] { body(*block); });
  }

  void text(const char* name, std::string& value, std::string_view long_name);
  void number(const char* name, double& value, const About& /*about*/) { value = numbers<double>(name, {})[0]; }
  template <class Whole>
  void whole(const char* name, Whole& value, const About& /*about*/) {
    value = narrow<Whole>(name, numbers<Stored<Whole>>(name, {})[0]);
  }
  template <class Enumeration>
  void code(const char* name, Enumeration& value, std::span<const Code> codes, std::string_view /*long_name*/) {
    value = static_cast<Enumeration>(checked(name, numbers<std::int8_t>(name, {})[0], codes));
  }

  void text_scale(const char* name, std::vector<std::string>& values, std::string_view long_name);
  void number_scale(const char* name, std::vector<double>& values, const About& about);
  /// @return length of the scale; `count` is not used
  std::size_t index_scale(const char* name, std::size_t count, std::string_view long_name);

  template <class T>
  void array(const char* name,
             std::initializer_list<const char*> dimensions,
             std::vector<T>& values,
             const About& /*about*/) {
    values.clear();
    if (holds(name)) values = numbers<T>(name, lengths(dimensions));
  }
  void texts(const char* name, const char* dimension, std::vector<std::string>& values, std::string_view long_name);
  void codes(const char* name,
             const char* dimension,
             std::vector<std::int8_t>& values,
             std::span<const Code> codes,
             std::string_view long_name);

  template <class Row>
  void named_rows(const char* name, std::vector<Row>& rows, std::string Row::* member, std::string_view long_name) {
    std::vector<std::string> names;
    text_scale(name, names, long_name);
    rows.assign(names.size(), Row{});
    scatter(names, rows, member);
  }
  template <class Row>
  void indexed_rows(const char* name, std::vector<Row>& rows, std::string_view long_name) {
    rows.assign(index_scale(name, 0, long_name), Row{});
  }
  template <class Row>
  void column(
      const char* name, const char* dimension, std::vector<Row>& rows, double Row::* member, const About& /*about*/) {
    scatter(numbers<double>(name, lengths({dimension})), rows, member);
  }
  template <class Row>
  void column(const char* name,
              const char* dimension,
              std::vector<Row>& rows,
              std::string Row::* member,
              std::string_view /*long_name*/) {
    scatter(words(name, lengths({dimension})), rows, member);
  }
  template <class Row, class Whole>
  void whole_column(
      const char* name, const char* dimension, std::vector<Row>& rows, Whole Row::* member, const About& /*about*/) {
    const auto values = numbers<std::int64_t>(name, lengths({dimension}));
    for (std::size_t i = 0; i < rows.size(); ++i) rows[i].*member = narrow<Whole>(name, values[i]);
  }
  template <class Row, class Enumeration>
  void code_column(const char* name,
                   const char* dimension,
                   std::vector<Row>& rows,
                   Enumeration Row::* member,
                   std::span<const Code> table,
                   std::string_view /*long_name*/) {
    const auto values = numbers<std::int8_t>(name, lengths({dimension}));
    for (std::size_t i = 0; i < rows.size(); ++i) {
      rows[i].*member = static_cast<Enumeration>(checked(name, values[i], table));
    }
  }

  /// Says that what stands at `name` of the current group is not usable. @throws Damage
  [[noreturn]] void refuse(const std::string& name, const std::string& what) const;

 private:
  template <class Whole>
  using Stored =
      std::conditional_t<std::is_same_v<Whole, int>,
                         std::int32_t,
                         std::conditional_t<std::is_same_v<Whole, std::uint64_t>, std::uint64_t, std::int64_t>>;

  template <class Whole, class StoredWhole>
  [[nodiscard]] Whole narrow(const char* name, StoredWhole value) const {
    if (!std::in_range<Whole>(value)) refuse(name, "holds a number out of range");
    return static_cast<Whole>(value);
  }
  template <class Row, class Value>
  static void scatter(std::vector<Value> values, std::vector<Row>& rows, Value Row::* member) {
    for (std::size_t i = 0; i < rows.size(); ++i) rows[i].*member = std::move(values[i]);
  }

  void enter(const char* name);
  void leave();
  /// True where the current group holds `name` as a plain link inside the file. @throws Damage for other links
  [[nodiscard]] bool holds(const char* name) const;
  [[nodiscard]] std::vector<hsize_t> lengths(std::initializer_list<const char*> dimensions) const;
  [[nodiscard]] H5::DataSet open(const char* name) const;
  /// Checks that `dataset` has `dims` and fits into the file; returns the number of elements.
  [[nodiscard]] std::size_t check_shape(const char* name,
                                        const H5::DataSet& dataset,
                                        const std::vector<hsize_t>& dims) const;
  /// Length of the one dimension of a scale.
  [[nodiscard]] hsize_t scale_length(const char* name) const;
  template <class T>
  [[nodiscard]] std::vector<T> numbers(const char* name, const std::vector<hsize_t>& dims) const;
  [[nodiscard]] std::vector<std::string> words(const char* name, const std::vector<hsize_t>& dims) const;
  [[nodiscard]] std::int8_t checked(const char* name, std::int8_t value, std::span<const Code> codes) const;

  H5::Group group_;
  std::size_t file_size_;
  std::string path_ = "/";
  std::map<std::string, hsize_t> lengths_;
  struct Outer {
    H5::Group group;
    std::string path;
    std::map<std::string, hsize_t> lengths;
  };
  std::vector<Outer> outer_;
};

}  // namespace headband::resultfile
