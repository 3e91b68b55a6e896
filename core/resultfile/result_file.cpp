// SPDX-License-Identifier: MIT
#include "core/resultfile/result_file.hpp"

#include "core/resultfile/memory_file.hpp"
#include "core/resultfile/reader.hpp"
#include "core/resultfile/safe_file.hpp"
#include "core/resultfile/schema.hpp"
#include "core/resultfile/seal.hpp"
#include "core/resultfile/writer.hpp"

#include "core/base/error.hpp"

#include <sys/stat.h>

#include <charconv>
#include <new>
#include <optional>
#include <span>

namespace headband::resultfile {

namespace {

using base::IoError;
using base::IoFailure;

constexpr const char* state_names[] = {"complete", "incomplete", "partial"};

std::string words_of(const H5::Exception& e) { return e.getFuncName() + ": " + e.getDetailMsg(); }

H5::FileCreatPropList creation() {
  H5::FileCreatPropList properties;
  const hid_t id = properties.getId();
  constexpr unsigned order = H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED;
  if (H5Pset_obj_track_times(id, false) < 0 || H5Pset_link_creation_order(id, order) < 0 ||
      H5Pset_attr_creation_order(id, order) < 0) {
    throw H5::Exception("headband", "order of links");
  }
  return properties;
}

/// Fills `memory` with the whole file; the same study gives the same bytes.
void build(const answers::Study& study, MemoryFile& memory) {
  H5::FileAccPropList access = memory.access();
  if (H5Pset_libver_bounds(access.getId(), H5F_LIBVER_V18, H5F_LIBVER_V110) < 0) {
    throw H5::Exception("headband", "format bounds");
  }
  H5::FileCreatPropList properties = creation();
  H5::H5File file("result in memory", H5F_ACC_TRUNC, properties, access);
  properties.close();
  access.close();
  H5::Group root = file.openGroup("/");
  write_attribute(root, "Conventions", "CF-1.10");
  write_attribute(root, "title", study.title);
  write_attribute(root, "source", "headband " + study.provenance.version);
  write_attribute(root, "schema", schema_name);
  write_attribute(root, "schema_version", schema_version);
  Writer archive(root);
  exchange(archive, study);
  // Last: a file that says how it ended has everything before it.
  write_attribute(root, "state", state_names[static_cast<std::size_t>(study.state)]);
  root.close();
  file.flush(H5F_SCOPE_GLOBAL);
  file.close();
}

/// Opened for reading without a lock: a result file appears by a rename and is never written in place.
H5::H5File open_file(const std::string& path) {
  H5::FileAccPropList access;
  if (H5Pset_file_locking(access.getId(), false, true) < 0) throw H5::Exception("headband", "file locking");
  H5::H5File file(path, H5F_ACC_RDONLY, H5::FileCreatPropList::DEFAULT, access);
  access.close();
  return file;
}

/// A text attribute of the root; empty where it is missing or of another kind.
std::string root_text(const H5::Group& root, const char* name) {
  if (!root.attrExists(name)) return {};
  H5::Attribute attribute = root.openAttribute(name);
  std::string text;
  H5::DataSpace space = attribute.getSpace();
  if (attribute.getTypeClass() == H5T_STRING && space.getSimpleExtentType() == H5S_SCALAR) {
    H5::StrType type = attribute.getStrType();
    if (!type.isVariableStr() && type.getSize() < 256) {
      text.resize(type.getSize());
      attribute.read(type, text.data());
      text.resize(text.find('\0') == std::string::npos ? text.size() : text.find('\0'));
    }
    type.close();
  }
  space.close();
  attribute.close();
  return text;
}

std::optional<answers::RunState> state_of(const std::string& name) {
  for (std::size_t i = 0; i < std::size(state_names); ++i) {
    if (name == state_names[i]) return static_cast<answers::RunState>(i);
  }
  return std::nullopt;
}

int major_of(const std::string& version) {
  int major = -1;
  std::from_chars(version.data(), version.data() + version.size(), major);
  return major;
}

/// True where HDF5 opens the file at `path` and its root says that it is a result of headband.
bool opens_as_result(const std::string& path) {
  try {
    H5::H5File file = open_file(path);
    H5::Group root = file.openGroup("/");
    const bool ours = root_text(root, "schema") == schema_name && state_of(root_text(root, "state"));
    root.close();
    file.close();
    return ours;
  } catch (const H5::Exception&) {
    return false;
  }
}

/// The same for a file nobody has looked at yet: a broken seal is seen before HDF5 reads it.
bool carries_mark(const std::string& path) { return check_seal(path) != Seal::broken && opens_as_result(path); }

/// True: the target may be replaced; false: it must not be there when the file is put in place.
bool may_replace(const std::string& path, const WriteOptions& options) {
  switch (standing(path)) {
    case Standing::nothing:
      return options.replace;
    case Standing::something_else:
      throw IoError(IoFailure::cannot_create, path + ": is no plain file; give another name with --out");
    case Standing::regular_file:
      break;
  }
  if (options.replace) return true;
  if (options.own_name && carries_mark(path)) return true;
  throw IoError(IoFailure::cannot_create,
                path + (options.own_name ? ": is there already and is no result of headband; move it, give "
                                           "another name with --out, or replace it with -f"
                                         : ": is there already; give another name or replace it with -f"));
}

answers::Study read_study(const std::string& path, std::size_t size) {
  H5::H5File file = open_file(path);
  H5::Group root = file.openGroup("/");
  if (root_text(root, "schema") != schema_name) throw Damage("/", "is no result of headband");
  const std::string version = root_text(root, "schema_version");
  if (major_of(version) != schema_major) {
    throw Damage("/", "has the format " + version + ", which this version does not read");
  }
  const auto state = state_of(root_text(root, "state"));
  if (!state) throw Damage("/", "does not say how the run ended");
  answers::Study study;
  study.state = *state;
  Reader archive(root, size);
  exchange(archive, study);
  root.close();
  file.close();
  return study;
}

}  // namespace

void write(const answers::Study& study, const std::string& path, const WriteOptions& options) {
  H5::Exception::dontPrint();  // silences the calling thread only, so each call says it again
  const bool replace = may_replace(path, options);
  MemoryFile memory;
  std::span<const std::byte> image;
  try {
    build(study, memory);
    image = memory.bytes();
  } catch (const H5::Exception& e) {
    throw IoError(IoFailure::cannot_write, path + ": cannot be written (" + words_of(e) + ")");
  } catch (const std::bad_alloc&) {
    throw IoError(IoFailure::cannot_write, path + ": cannot be written (not enough memory)");
  }
  const std::string seal = seal_line(image);
  write_whole(path, {image, std::as_bytes(std::span(seal))}, replace, [&](const std::string& temporary) {
    if (!opens_as_result(temporary)) {
      throw IoError(IoFailure::cannot_write, path + ": cannot be read back after writing");
    }
  });
}

answers::Study read(const std::string& path) {
  H5::Exception::dontPrint();
  struct stat info{};
  if (::stat(path.c_str(), &info) != 0) throw IoError(IoFailure::missing, path + ": is not there");
  if (!S_ISREG(info.st_mode)) throw IoError(IoFailure::damaged, path + ": is no plain file");
  if (check_seal(path) == Seal::broken) {
    throw IoError(IoFailure::damaged, path + ": is damaged (its checksum does not hold)");
  }
  try {
    return read_study(path, static_cast<std::size_t>(info.st_size));
  } catch (const Damage& e) {
    throw IoError(IoFailure::damaged, path + ": is damaged or no result file (" + e.what() + ")");
  } catch (const H5::Exception& e) {
    throw IoError(IoFailure::damaged, path + ": is damaged or no result file (" + words_of(e) + ")");
  } catch (const std::bad_alloc&) {
    throw IoError(IoFailure::damaged, path + ": claims more data than memory holds");
  }
}

}  // namespace headband::resultfile
