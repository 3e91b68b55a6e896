// SPDX-License-Identifier: MIT
#include "core/resultfile/writer.hpp"

#include <algorithm>
#include <numeric>

namespace headband::resultfile {

namespace {

/// A zero byte would end the stored text early: it is kept as the visible sign for it (U+2400).
std::string without_zero_bytes(const std::string& text) {
  std::string clean;
  for (const char c : text) {
    if (c == '\0') {
      clean += "\xE2\x90\x80";
    } else {
      clean += c;
    }
  }
  return clean;
}

bool has_zero_byte(const std::string& text) { return text.find('\0') != std::string::npos; }

std::size_t product(const std::vector<hsize_t>& dims) {
  return std::accumulate(dims.begin(), dims.end(), std::size_t{1}, [](std::size_t so_far, hsize_t n) {
    return so_far * static_cast<std::size_t>(n);
  });
}

}  // namespace

std::vector<hsize_t> Writer::lengths(std::initializer_list<const char*> dimensions) const {
  std::vector<hsize_t> dims;
  for (const char* name : dimensions) {
    const auto scale = scales_.find(name);
    if (scale == scales_.end()) throw base::Error(std::string("result file: no dimension ") + name);
    H5::DataSpace space = scale->second.getSpace();
    dims.push_back(static_cast<hsize_t>(space.getSimpleExtentNpoints()));
    space.close();
  }
  return dims;
}

bool Writer::fits(const char* name, const std::vector<hsize_t>& dims, std::size_t count) {
  const std::size_t wanted = product(dims);
  if (count == wanted) return true;
  if (count == 0) return false;  // not computed
  throw base::Error(std::string("result file: ") + name + " holds " + std::to_string(count) + " values in place of " +
                    std::to_string(wanted));
}

void Writer::finish(H5::DataSet& dataset, std::initializer_list<const char*> dimensions) {
  Scales scales;
  for (const char* name : dimensions) scales.push_back(&scales_.at(name));
  attach_scales(dataset, scales);
  dataset.close();
}

void Writer::keep_scale(const char* name, H5::DataSet dataset) {
  make_scale(dataset, name);
  scales_.emplace(name, std::move(dataset));
}

void Writer::put_codes(const char* name,
                       const std::vector<hsize_t>& dims,
                       const std::vector<std::int8_t>& values,
                       std::span<const Code> codes,
                       std::string_view long_name,
                       std::initializer_list<const char*> dimensions) {
  std::vector<std::int8_t> numbers;
  std::string words;
  for (const Code& code : codes) {
    numbers.push_back(code.number);
    if (!words.empty()) words += ' ';
    words += code.word;
  }
  H5::DataSet dataset = write_numbers(group_, name, dims, values.data(), {.long_name = long_name});
  write_flags(dataset, numbers, words);
  finish(dataset, dimensions);
}

void Writer::put_texts(const char* name,
                       const std::vector<hsize_t>& dims,
                       const std::vector<std::string>& values,
                       std::string_view long_name,
                       std::initializer_list<const char*> dimensions) {
  std::vector<std::string> cleaned;
  cleaned.reserve(values.size());  // pointers into it must stay
  std::vector<const std::string*> pointers;
  pointers.reserve(values.size());
  for (const auto& value : values) {
    if (has_zero_byte(value)) {
      cleaned.push_back(without_zero_bytes(value));
      pointers.push_back(&cleaned.back());
    } else {
      pointers.push_back(&value);
    }
  }
  H5::DataSet dataset = write_texts(group_, name, dims, pointers, long_name);
  finish(dataset, dimensions);
}

void Writer::text(const char* name, const std::string& value, std::string_view long_name) {
  put_texts(name, {}, {value}, long_name, {});
}

void Writer::text_scale(const char* name, const std::vector<std::string>& values, std::string_view long_name) {
  put_texts(name, {values.size()}, values, long_name, {});
  keep_scale(name, group_.openDataSet(name));
}

void Writer::number_scale(const char* name, const std::vector<double>& values, const About& about) {
  keep_scale(name, write_numbers(group_, name, {values.size()}, values.data(), about));
}

std::size_t Writer::index_scale(const char* name, std::size_t count, std::string_view long_name) {
  std::vector<std::int32_t> index(count);
  std::iota(index.begin(), index.end(), 0);
  keep_scale(name, write_numbers(group_, name, {count}, index.data(), {.long_name = long_name}));
  return count;
}

void Writer::texts(const char* name,
                   const char* dimension,
                   const std::vector<std::string>& values,
                   std::string_view long_name) {
  const std::vector<hsize_t> dims = lengths({dimension});
  if (fits(name, dims, values.size())) put_texts(name, dims, values, long_name, {dimension});
}

void Writer::codes(const char* name,
                   const char* dimension,
                   const std::vector<std::int8_t>& values,
                   std::span<const Code> codes,
                   std::string_view long_name) {
  const std::vector<hsize_t> dims = lengths({dimension});
  if (fits(name, dims, values.size())) put_codes(name, dims, values, codes, long_name, {dimension});
}

}  // namespace headband::resultfile
