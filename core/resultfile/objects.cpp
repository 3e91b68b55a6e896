// SPDX-License-Identifier: MIT
#include "core/resultfile/objects.hpp"

#include <hdf5_hl.h>

#include <algorithm>
#include <array>
#include <limits>
#include <type_traits>

namespace headband::resultfile {

namespace {

constexpr std::size_t smallest_chunked = 64UL * 1024UL;
constexpr std::size_t largest_chunk = 512UL * 1024UL;
constexpr hsize_t widest_chunk = 64;
/// An attribute lives in the object header, which ends at 64 kB; long texts are datasets, a title is cut here.
constexpr std::size_t longest_attribute = 60000;

[[noreturn]] void fail(const std::string& what) { throw H5::Exception("headband", what); }

std::size_t count_of(const std::vector<hsize_t>& dims) {
  std::size_t count = 1;
  for (const hsize_t n : dims) count *= static_cast<std::size_t>(n);
  return count;
}

/// Scalar for an empty list of dimensions.
H5::DataSpace space_of(const std::vector<hsize_t>& dims) {
  return dims.empty() ? H5::DataSpace(H5S_SCALAR) : H5::DataSpace(static_cast<int>(dims.size()), dims.data());
}

/// Creation properties all datasets share: no times, attributes in order.
H5::DSetCreatPropList plain_properties() {
  H5::DSetCreatPropList properties;
  if (H5Pset_obj_track_times(properties.getId(), false) < 0) fail("times of a dataset cannot be switched off");
  properties.setAttrCrtOrder(H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED);
  return properties;
}

/// The longest start of `text` that fits an attribute and ends between characters.
std::string_view cut_for_attribute(std::string_view text) {
  if (text.size() <= longest_attribute) return text;
  std::size_t end = longest_attribute;
  while (end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0U) == 0x80U) --end;
  return text.substr(0, end);
}

}  // namespace

template <>
const H5::PredType& file_type<double>() {
  return H5::PredType::IEEE_F64LE;
}
template <>
const H5::PredType& file_type<std::int8_t>() {
  return H5::PredType::STD_I8LE;
}
template <>
const H5::PredType& file_type<std::int32_t>() {
  return H5::PredType::STD_I32LE;
}
template <>
const H5::PredType& file_type<std::int64_t>() {
  return H5::PredType::STD_I64LE;
}
template <>
const H5::PredType& file_type<std::uint64_t>() {
  return H5::PredType::STD_U64LE;
}
template <>
const H5::PredType& memory_type<double>() {
  return H5::PredType::NATIVE_DOUBLE;
}
template <>
const H5::PredType& memory_type<std::int8_t>() {
  return H5::PredType::NATIVE_INT8;
}
template <>
const H5::PredType& memory_type<std::int32_t>() {
  return H5::PredType::NATIVE_INT32;
}
template <>
const H5::PredType& memory_type<std::int64_t>() {
  return H5::PredType::NATIVE_INT64;
}
template <>
const H5::PredType& memory_type<std::uint64_t>() {
  return H5::PredType::NATIVE_UINT64;
}

void write_attribute(H5::H5Object& object, const char* name, std::string_view text) {
  const std::string kept(cut_for_attribute(text));
  // A fixed-length type of size 0 is refused by the library: an empty text is a null dataspace, as netCDF writes it.
  H5::StrType type(H5::PredType::C_S1, std::max<std::size_t>(kept.size(), 1));
  type.setCset(H5T_CSET_UTF8);
  type.setStrpad(H5T_STR_NULLTERM);
  H5::DataSpace space(kept.empty() ? H5S_NULL : H5S_SCALAR);
  H5::Attribute attribute = object.createAttribute(name, type, space);
  if (!kept.empty()) attribute.write(type, kept.data());
  attribute.close();
  space.close();
  type.close();
}

void write_attribute(H5::H5Object& object, const char* name, std::int64_t value) {
  H5::DataSpace space(H5S_SCALAR);
  H5::Attribute attribute = object.createAttribute(name, file_type<std::int64_t>(), space);
  attribute.write(memory_type<std::int64_t>(), &value);
  attribute.close();
  space.close();
}

void write_missing_mark(H5::DataSet& dataset) {
  const double missing = std::numeric_limits<double>::quiet_NaN();
  H5::DataSpace space(H5S_SCALAR);
  H5::Attribute attribute = dataset.createAttribute("_FillValue", file_type<double>(), space);
  attribute.write(memory_type<double>(), &missing);
  attribute.close();
  space.close();
}

void write_flags(H5::H5Object& object, const std::vector<std::int8_t>& codes, const std::string& meanings) {
  const std::array<hsize_t, 1> dims = {codes.size()};
  H5::DataSpace space(1, dims.data());
  H5::Attribute attribute = object.createAttribute("flag_values", file_type<std::int8_t>(), space);
  attribute.write(memory_type<std::int8_t>(), codes.data());
  attribute.close();
  space.close();
  write_attribute(object, "flag_meanings", meanings);
}

std::vector<hsize_t> chunk_of(const std::vector<hsize_t>& dims, std::size_t element_size) {
  const hsize_t elements = largest_chunk / element_size;
  if (dims.size() == 1) return {std::min(dims[0], elements)};
  const hsize_t columns = std::min(dims[1], widest_chunk);
  return {std::min(dims[0], elements / columns), columns};
}

bool chunked(const std::vector<hsize_t>& dims, std::size_t element_size) {
  return !dims.empty() && dims.size() <= 2 && count_of(dims) * element_size >= smallest_chunked;
}

template <class T>
H5::DataSet write_numbers(
    H5::Group& group, const std::string& name, const std::vector<hsize_t>& dims, const T* data, const About& about) {
  H5::DSetCreatPropList properties = plain_properties();
  if constexpr (std::is_floating_point_v<T>) {
    // What was never written must read as missing, not as zero.
    const T missing = std::numeric_limits<T>::quiet_NaN();
    properties.setFillValue(memory_type<T>(), &missing);
  }
  if (chunked(dims, sizeof(T))) {
    const std::vector<hsize_t> chunk = chunk_of(dims, sizeof(T));
    properties.setChunk(static_cast<int>(chunk.size()), chunk.data());
    properties.setFletcher32();
  }
  H5::DataSpace space = space_of(dims);
  H5::DataSet dataset = group.createDataSet(name, file_type<T>(), space, properties);
  if (count_of(dims) > 0) dataset.write(data, memory_type<T>());
  write_attribute(dataset, "units", about.units);
  write_attribute(dataset, "long_name", about.long_name);
  if (!about.cell_methods.empty()) write_attribute(dataset, "cell_methods", about.cell_methods);
  if (about.stride > 0) write_attribute(dataset, "stride", about.stride);
  space.close();
  properties.close();
  return dataset;
}

template H5::DataSet write_numbers(
    H5::Group&, const std::string&, const std::vector<hsize_t>&, const double*, const About&);
template H5::DataSet write_numbers(
    H5::Group&, const std::string&, const std::vector<hsize_t>&, const std::int8_t*, const About&);
template H5::DataSet write_numbers(
    H5::Group&, const std::string&, const std::vector<hsize_t>&, const std::int32_t*, const About&);
template H5::DataSet write_numbers(
    H5::Group&, const std::string&, const std::vector<hsize_t>&, const std::int64_t*, const About&);
template H5::DataSet write_numbers(
    H5::Group&, const std::string&, const std::vector<hsize_t>&, const std::uint64_t*, const About&);

H5::DataSet write_texts(H5::Group& group,
                        const std::string& name,
                        const std::vector<hsize_t>& dims,
                        const std::vector<const std::string*>& texts,
                        std::string_view long_name) {
  H5::DSetCreatPropList properties = plain_properties();
  H5::StrType type(H5::PredType::C_S1, H5T_VARIABLE);
  type.setCset(H5T_CSET_UTF8);
  H5::DataSpace space = space_of(dims);
  H5::DataSet dataset = group.createDataSet(name, type, space, properties);
  std::vector<const char*> pointers;
  pointers.reserve(texts.size());
  for (const std::string* text : texts) pointers.push_back(text->c_str());
  if (!pointers.empty()) dataset.write(pointers.data(), type);
  write_attribute(dataset, "long_name", long_name);
  space.close();
  type.close();
  properties.close();
  return dataset;
}

void make_scale(H5::DataSet& dataset, const std::string& name) {
  if (H5DSset_scale(dataset.getId(), name.c_str()) < 0) fail("no dimension scale: " + name);
}

void attach_scales(H5::DataSet& dataset, const Scales& scales) {
  unsigned int dimension = 0;
  for (const H5::DataSet* scale : scales) {
    if (H5DSattach_scale(dataset.getId(), scale->getId(), dimension++) < 0) fail("a dimension scale is not attached");
  }
}

H5::Group create_group(H5::Group& parent, const std::string& name) {
  const hid_t properties = H5Pcreate(H5P_GROUP_CREATE);
  const bool set = properties >= 0 && H5Pset_obj_track_times(properties, false) >= 0 &&
                   H5Pset_link_creation_order(properties, H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED) >= 0 &&
                   H5Pset_attr_creation_order(properties, H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED) >= 0;
  const hid_t id = set ? H5Gcreate2(parent.getId(), name.c_str(), H5P_DEFAULT, properties, H5P_DEFAULT) : -1;
  if (properties >= 0) H5Pclose(properties);
  if (id < 0) fail("no group: " + name);
  H5::Group group(id);  // counts the identifier once more
  H5Idec_ref(id);
  return group;
}

}  // namespace headband::resultfile
