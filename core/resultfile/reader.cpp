// SPDX-License-Identifier: MIT
#include "core/resultfile/reader.hpp"

#include <algorithm>
#include <cstdlib>

namespace headband::resultfile {

namespace {

/// Memory for the texts of one dataset, at most `left` bytes: each text is stored in the file, so together they cannot
/// be longer than it, whatever lengths the file claims.
struct Budget {
  std::size_t left;

  static void* take(std::size_t size, void* self) {
    auto* budget = static_cast<Budget*>(self);
    if (size > budget->left) return nullptr;
    budget->left -= size;
    return std::malloc(size);
  }
  static void give_back(void* memory, void* /*self*/) { std::free(memory); }
};

std::string joined(std::string path, const std::string& name) {
  if (path.back() != '/') path += '/';
  return path.append(name);
}

}  // namespace

void Reader::refuse(const std::string& name, const std::string& what) const { throw Damage(joined(path_, name), what); }

bool Reader::holds(const char* name) const {
  const htri_t there = H5Lexists(group_.getId(), name, H5P_DEFAULT);
  if (there < 0) refuse(name, "cannot be looked up");
  if (there == 0) return false;
  H5L_info_t info;
  if (H5Lget_info(group_.getId(), name, &info, H5P_DEFAULT) < 0) refuse(name, "cannot be looked up");
  // A soft or external link could lead anywhere, also into other files of the reader's machine.
  if (info.type != H5L_TYPE_HARD) refuse(name, "is a link to somewhere else");
  return true;
}

void Reader::enter(const char* name) {
  if (!holds(name)) refuse(name, "is missing");
  H5::Group inner = group_.openGroup(name);
  outer_.push_back({group_, path_, std::move(lengths_)});
  lengths_.clear();
  group_ = inner;
  path_ = joined(path_, name);
}

void Reader::leave() {
  group_.close();
  group_ = outer_.back().group;
  path_ = std::move(outer_.back().path);
  lengths_ = std::move(outer_.back().lengths);
  outer_.pop_back();
}

std::vector<hsize_t> Reader::lengths(std::initializer_list<const char*> dimensions) const {
  std::vector<hsize_t> dims;
  for (const char* name : dimensions) {
    const auto length = lengths_.find(name);
    if (length == lengths_.end()) refuse(name, "is missing");
    dims.push_back(length->second);
  }
  return dims;
}

H5::DataSet Reader::open(const char* name) const {
  if (!holds(name)) refuse(name, "is missing");
  H5::DataSet dataset = group_.openDataSet(name);
  H5::DSetCreatPropList properties = dataset.getCreatePlist();
  // Data kept in other files would be read from wherever the file says.
  if (properties.getExternalCount() > 0 || properties.getLayout() == H5D_VIRTUAL) refuse(name, "lies in another file");
  properties.close();
  return dataset;
}

std::size_t Reader::check_shape(const char* name, const H5::DataSet& dataset, const std::vector<hsize_t>& dims) const {
  H5::DataSpace space = dataset.getSpace();
  if (space.getSimpleExtentType() == H5S_NULL || space.getSimpleExtentNdims() != static_cast<int>(dims.size())) {
    refuse(name, "has another number of dimensions");
  }
  std::vector<hsize_t> found(dims.size());
  if (!dims.empty()) space.getSimpleExtentDims(found.data());
  if (found != dims) refuse(name, "has another length than its dimensions say");
  H5::DataType type = dataset.getDataType();
  const std::size_t size = type.getSize();
  // Nothing in the file is compressed, so nothing can be larger than the file. The divisions cannot overflow.
  std::size_t room = file_size_ / std::max<std::size_t>(size, 1);
  std::size_t count = 1;
  for (const hsize_t n : dims) {
    if (n > 0 && room / n == 0) refuse(name, "claims more data than the file holds");
    if (n > 0) room /= static_cast<std::size_t>(n);
    count *= static_cast<std::size_t>(n);
  }
  type.close();
  space.close();
  return count;
}

hsize_t Reader::scale_length(const char* name) const {
  H5::DataSet dataset = open(name);
  H5::DataSpace space = dataset.getSpace();
  if (space.getSimpleExtentNdims() != 1) refuse(name, "has another number of dimensions");
  hsize_t length = 0;
  space.getSimpleExtentDims(&length);
  space.close();
  dataset.close();
  return length;
}

template <class T>
std::vector<T> Reader::numbers(const char* name, const std::vector<hsize_t>& dims) const {
  H5::DataSet dataset = open(name);
  const H5T_class_t wanted = std::is_floating_point_v<T> ? H5T_FLOAT : H5T_INTEGER;
  if (dataset.getTypeClass() != wanted) refuse(name, "holds another kind of data");
  std::vector<T> values(check_shape(name, dataset, dims));
  if (!values.empty()) dataset.read(values.data(), memory_type<T>());
  dataset.close();
  return values;
}

template std::vector<double> Reader::numbers(const char*, const std::vector<hsize_t>&) const;
template std::vector<std::int8_t> Reader::numbers(const char*, const std::vector<hsize_t>&) const;
template std::vector<std::int32_t> Reader::numbers(const char*, const std::vector<hsize_t>&) const;
template std::vector<std::int64_t> Reader::numbers(const char*, const std::vector<hsize_t>&) const;
template std::vector<std::uint64_t> Reader::numbers(const char*, const std::vector<hsize_t>&) const;

std::vector<std::string> Reader::words(const char* name, const std::vector<hsize_t>& dims) const {
  H5::DataSet dataset = open(name);
  H5::DataType stored = dataset.getDataType();
  if (H5Tis_variable_str(stored.getId()) <= 0) refuse(name, "holds another kind of data");
  stored.close();
  const std::size_t count = check_shape(name, dataset, dims);
  std::vector<std::string> texts;
  if (count == 0) {
    dataset.close();
    return texts;
  }
  H5::StrType type(H5::PredType::C_S1, H5T_VARIABLE);
  type.setCset(H5T_CSET_UTF8);
  H5::DataSpace space = dataset.getSpace();
  Budget budget{file_size_ + count};  // a final zero byte each
  H5::DSetMemXferPropList transfer;
  transfer.setVlenMemManager(Budget::take, &budget, Budget::give_back, &budget);
  std::vector<char*> pointers(count, nullptr);
  dataset.read(pointers.data(), type, H5::DataSpace::ALL, H5::DataSpace::ALL, transfer);
  texts.reserve(count);
  for (const char* pointer : pointers) texts.emplace_back(pointer == nullptr ? "" : pointer);
  H5Dvlen_reclaim(type.getId(), space.getId(), transfer.getId(), pointers.data());
  transfer.close();
  space.close();
  type.close();
  dataset.close();
  return texts;
}

std::int8_t Reader::checked(const char* name, std::int8_t value, std::span<const Code> codes) const {
  const bool known = std::any_of(codes.begin(), codes.end(), [&](const Code& code) { return code.number == value; });
  if (!known) refuse(name, "holds an unknown code");
  return value;
}

void Reader::text(const char* name, std::string& value, std::string_view /*long_name*/) {
  value = std::move(words(name, {})[0]);
}

void Reader::text_scale(const char* name, std::vector<std::string>& values, std::string_view /*long_name*/) {
  const hsize_t length = scale_length(name);
  values = words(name, {length});
  lengths_[name] = length;
}

void Reader::number_scale(const char* name, std::vector<double>& values, const About& /*about*/) {
  const hsize_t length = scale_length(name);
  values = numbers<double>(name, {length});
  lengths_[name] = length;
}

std::size_t Reader::index_scale(const char* name, std::size_t /*count*/, std::string_view /*long_name*/) {
  const hsize_t length = scale_length(name);
  const auto index = numbers<std::int32_t>(name, {length});
  for (std::size_t i = 0; i < index.size(); ++i) {
    if (index[i] != static_cast<std::int32_t>(i)) refuse(name, "does not count from 0");
  }
  lengths_[name] = length;
  return index.size();
}

void Reader::texts(const char* name,
                   const char* dimension,
                   std::vector<std::string>& values,
                   std::string_view /*long_name*/) {
  values.clear();
  if (holds(name)) values = words(name, lengths({dimension}));
}

void Reader::codes(const char* name,
                   const char* dimension,
                   std::vector<std::int8_t>& values,
                   std::span<const Code> codes,
                   std::string_view /*long_name*/) {
  values.clear();
  if (!holds(name)) return;
  values = numbers<std::int8_t>(name, lengths({dimension}));
  for (const std::int8_t value : values) static_cast<void>(checked(name, value, codes));
}

}  // namespace headband::resultfile
