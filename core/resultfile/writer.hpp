#pragma once
// SPDX-License-Identifier: MIT

#include "core/resultfile/codes.hpp"
#include "core/resultfile/objects.hpp"

#include "core/base/error.hpp"

#include <initializer_list>
#include <map>
#include <optional>
#include <span>
#include <string>
#include <type_traits>
#include <utility>
#include <vector>

namespace headband::resultfile {

/// The writing half of the archive. `schema.hpp` describes the file once; a Writer puts a study into it, a Reader takes
/// the same study out. Both have the same members.
class Writer {
 public:
  static constexpr bool writing = true;

  explicit Writer(H5::Group root) : group_(std::move(root)) {}

  /// A group that is always there.
  template <class Body>
  void group(const char* name, Body&& body) {
    H5::Group parent = group_;
    std::map<std::string, H5::DataSet> outer;
    outer.swap(scales_);
    group_ = create_group(parent, name);
    body();
    for (auto& [scale_name, scale] : scales_) scale.close();
    scales_.swap(outer);
    group_.close();
    group_ = parent;
  }

  /// A group that is there when `block` is.
  template <class Block, class Body>
  void optional_group(const char* name, const std::optional<Block>& block, Body&& body) {
    if (block) group(name, [&] { body(*block); });
  }

  // Single values.
  void text(const char* name, const std::string& value, std::string_view long_name);
  void number(const char* name, double value, const About& about) { put(name, {}, &value, about, true); }
  template <class Whole>
  void whole(const char* name, const Whole& value, const About& about) {
    const auto stored = stored_whole(value);
    put(name, {}, &stored, about, false);
  }
  template <class Enumeration>
  void code(const char* name, const Enumeration& value, std::span<const Code> codes, std::string_view long_name) {
    put_codes(name, {}, {static_cast<std::int8_t>(value)}, codes, long_name);
  }

  // Dimension scales of the current group; each names a dimension for the arrays after it.
  void text_scale(const char* name, const std::vector<std::string>& values, std::string_view long_name);
  void number_scale(const char* name, const std::vector<double>& values, const About& about);
  std::size_t index_scale(const char* name, std::size_t count, std::string_view long_name);

  /// Numbers over dimensions named by scales; an empty vector where the dimensions are not is left out of the file.
  template <class T>
  void array(const char* name,
             std::initializer_list<const char*> dimensions,
             const std::vector<T>& values,
             const About& about) {
    const std::vector<hsize_t> dims = lengths(dimensions);
    if (!fits(name, dims, values.size())) return;
    put(name, dims, values.data(), about, std::is_floating_point_v<T>, dimensions);
  }
  void texts(const char* name,
             const char* dimension,
             const std::vector<std::string>& values,
             std::string_view long_name);
  void codes(const char* name,
             const char* dimension,
             const std::vector<std::int8_t>& values,
             std::span<const Code> codes,
             std::string_view long_name);

  // Rows of structs: the scale is a name column or a running index, the columns are members.
  template <class Row>
  void named_rows(const char* name,
                  const std::vector<Row>& rows,
                  std::string Row::* member,
                  std::string_view long_name) {
    text_scale(name, gather(rows, member), long_name);
  }
  template <class Row>
  void indexed_rows(const char* name, const std::vector<Row>& rows, std::string_view long_name) {
    index_scale(name, rows.size(), long_name);
  }
  template <class Row>
  void column(
      const char* name, const char* dimension, const std::vector<Row>& rows, double Row::* member, const About& about) {
    array(name, {dimension}, gather(rows, member), about);
  }
  template <class Row>
  void column(const char* name,
              const char* dimension,
              const std::vector<Row>& rows,
              std::string Row::* member,
              std::string_view long_name) {
    texts(name, dimension, gather(rows, member), long_name);
  }
  template <class Row, class Whole>
  void whole_column(
      const char* name, const char* dimension, const std::vector<Row>& rows, Whole Row::* member, const About& about) {
    std::vector<std::int64_t> values;
    for (const auto& row : rows) values.push_back(row.*member);
    array(name, {dimension}, values, about);
  }
  template <class Row, class Enumeration>
  void code_column(const char* name,
                   const char* dimension,
                   const std::vector<Row>& rows,
                   Enumeration Row::* member,
                   std::span<const Code> table,
                   std::string_view long_name) {
    std::vector<std::int8_t> values;
    for (const auto& row : rows) values.push_back(static_cast<std::int8_t>(row.*member));
    codes(name, dimension, values, table, long_name);
  }

 private:
  template <class Row, class Value>
  static std::vector<Value> gather(const std::vector<Row>& rows, Value Row::* member) {
    std::vector<Value> values;
    values.reserve(rows.size());
    for (const auto& row : rows) values.push_back(row.*member);
    return values;
  }
  static std::int32_t stored_whole(int value) { return value; }
  static std::int64_t stored_whole(long long value) { return value; }
  static std::uint64_t stored_whole(std::uint64_t value) { return value; }

  [[nodiscard]] std::vector<hsize_t> lengths(std::initializer_list<const char*> dimensions) const;
  /// False: nothing to write. @throws base::Error where values and dimensions disagree (our bug)
  [[nodiscard]] static bool fits(const char* name, const std::vector<hsize_t>& dims, std::size_t count);
  template <class T>
  void put(const char* name,
           const std::vector<hsize_t>& dims,
           const T* data,
           const About& about,
           bool missing_mark,
           std::initializer_list<const char*> dimensions = {}) {
    H5::DataSet dataset = write_numbers(group_, name, dims, data, about);
    if (missing_mark) write_missing_mark(dataset);
    finish(dataset, dimensions);
  }
  void put_codes(const char* name,
                 const std::vector<hsize_t>& dims,
                 const std::vector<std::int8_t>& values,
                 std::span<const Code> codes,
                 std::string_view long_name,
                 std::initializer_list<const char*> dimensions = {});
  void put_texts(const char* name,
                 const std::vector<hsize_t>& dims,
                 const std::vector<std::string>& values,
                 std::string_view long_name,
                 std::initializer_list<const char*> dimensions);
  void finish(H5::DataSet& dataset, std::initializer_list<const char*> dimensions);
  void keep_scale(const char* name, H5::DataSet dataset);

  H5::Group group_;
  std::map<std::string, H5::DataSet> scales_;  ///< of the current group, open until it ends
};

}  // namespace headband::resultfile
