#pragma once
// SPDX-License-Identifier: MIT
//
// The few HDF5 objects a result file is made of, through the C++ API. Every object is closed by hand, because a
// destructor swallows the error that tells of wrong data. One thread owns a file; nothing here is global.

#include <H5Cpp.h>

#include <cstddef>
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

namespace headband::resultfile {

/// What an attribute set says about a number: unit as the udunits names, meaning, and how an extreme was formed.
struct About {
  std::string_view units = "1";
  std::string_view long_name;
  std::string_view cell_methods = {};  ///< "time: maximum"; empty = none
  std::int64_t stride = 0;             ///< > 0: attribute `stride` (every k-th run is kept)
};

/// Where the parts of a dataset name their dimensions: scales of the same group.
using Scales = std::vector<const H5::DataSet*>;

template <class T>
[[nodiscard]] const H5::PredType& file_type();
template <class T>
[[nodiscard]] const H5::PredType& memory_type();

/// Fixed-length UTF-8 text attribute; an empty text becomes a null dataspace.
void write_attribute(H5::H5Object& object, const char* name, std::string_view text);
void write_attribute(H5::H5Object& object, const char* name, std::int64_t value);
/// `_FillValue` NaN: readers learn that NaN means missing.
void write_missing_mark(H5::DataSet& dataset);
/// `flag_values` and `flag_meanings` of a status code.
void write_flags(H5::H5Object& object, const std::vector<std::int8_t>& codes, const std::string& meanings);

/// Numbers of any rank (an empty `dims` is a scalar). Small data lie in one piece; from 64 kB on in checked chunks.
/// @return the dataset, still open (the caller closes it)
template <class T>
[[nodiscard]] H5::DataSet write_numbers(
    H5::Group& group, const std::string& name, const std::vector<hsize_t>& dims, const T* data, const About& about);

/// Variable-length UTF-8 text, scalar (empty `dims`) or one dimension.
[[nodiscard]] H5::DataSet write_texts(H5::Group& group,
                                      const std::string& name,
                                      const std::vector<hsize_t>& dims,
                                      const std::vector<const std::string*>& texts,
                                      std::string_view long_name);

/// Makes `dataset` a dimension scale called `name`; joins `dataset` to its scales.
void make_scale(H5::DataSet& dataset, const std::string& name);
void attach_scales(H5::DataSet& dataset, const Scales& scales);

/// Group whose links and attributes keep their order and carry no times.
[[nodiscard]] H5::Group create_group(H5::Group& parent, const std::string& name);

/// Chunk of a dataset of `dims` (rank 1 or 2): whole rows of up to 64 columns, at most 512 KiB.
///
/// Few columns (histories of a handful of places) lie in whole rows, so that a write is one run through memory and one
/// history reads the file once; many columns are cut at 64, so that neither one column nor one row reads everything.
[[nodiscard]] std::vector<hsize_t> chunk_of(const std::vector<hsize_t>& dims, std::size_t element_size);

/// True where data of this size are worth chunks and their checksum.
[[nodiscard]] bool chunked(const std::vector<hsize_t>& dims, std::size_t element_size);

}  // namespace headband::resultfile
