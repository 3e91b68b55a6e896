// SPDX-License-Identifier: MIT
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"
#include "core/show/reported.hpp"
#include "core/show/words.hpp"

#include <fmt/format.h>

#include <cmath>

namespace headband::report {
namespace {

using answers::Study;
using answers::Verdict;

/// Share of the volume passed that may be unaccounted for before the page says so beside the verdict.
constexpr double doubtful_residual = 1e-2;

std::string word_of_verb(const std::string& verb) {
  if (verb == "flow") return "Steady flow";
  if (verb == "surge") return "Surge, one run";
  if (verb == "band") return "Sampled answers";
  if (verb == "fastest") return "Shortest closing time";
  if (verb == "age") return "Ageing";
  if (verb == "match") return "Match to a field log";
  return verb;
}

/// The decision as HTML, without the verdict that already stands over it.
std::string sentence(const Study& study, const char* units) {
  std::string text = show::decision(study, units);
  const std::string stamp = show::words_of(study.verdict) + ": ";
  if (study.verdict != Verdict::none && text.starts_with(stamp)) {
    text.erase(0, stamp.size());
    if (!text.empty() && text[0] >= 'a' && text[0] <= 'z') text[0] = static_cast<char>(text[0] - 'a' + 'A');
  }
  // The first sentence is the answer; the others stand below it, smaller.
  const std::size_t end = text.find(". ");
  if (end == std::string::npos) return escaped(text);
  return escaped(text.substr(0, end + 1)) + "<span class=\"rest\">" + escaped(text.substr(end + 2)) + "</span>";
}

const char* class_of(Verdict verdict) {
  switch (verdict) {
    case Verdict::ok:
      return "ok";
    case Verdict::not_ok:
      return "not-ok";
    case Verdict::cannot_tell:
      return "cannot-tell";
    case Verdict::none:
      return "none";
  }
  return "none";
}

/// Disc, triangle, diamond: the shape tells the verdict without its colour.
const char* shape_of(Verdict verdict) {
  switch (verdict) {
    case Verdict::ok:
      return "<circle cx=\"10\" cy=\"10\" r=\"7.5\"/>";
    case Verdict::not_ok:
      return "<path d=\"M10 1.5L19 18H1Z\"/>";
    case Verdict::cannot_tell:
      return "<path d=\"M10 1L19 10L10 19L1 10Z\"/>";
    case Verdict::none:
      return "";
  }
  return "";
}

}  // namespace

std::string verdict_mark(Verdict verdict) {
  if (verdict == Verdict::none) return "not judged";
  return fmt::format("<span class=\"mark {}\"><svg viewBox=\"0 0 20 20\" aria-hidden=\"true\">{}</svg>{}</span>",
                     class_of(verdict),
                     shape_of(verdict),
                     show::words_of(verdict));
}

std::string head_of_page(const Study& study) {
  const auto& p = study.provenance;
  std::string out = fmt::format("<header class=\"top\">\n<p class=\"kind\">{} · headband {} · {}</p>\n<h1>{}</h1>\n",
                                escaped(word_of_verb(study.verb)),
                                escaped(p.version),
                                escaped(show::file_name_of(p.case_file)),
                                escaped(study.title.empty() ? show::file_name_of(p.case_file) : study.title));
  if (!study.note.empty()) out += paragraph(escaped(study.note), "note");
  out += fmt::format("<section class=\"decision {}\" aria-label=\"Decision\">\n", class_of(study.verdict));
  if (study.verdict != Verdict::none) out += paragraph(verdict_mark(study.verdict), "stamp");
  out += paragraph(both(sentence(study, "si"), sentence(study, "us")), "sentence");
  if (study.audit && std::abs(study.audit->volume_residual_relative) > doubtful_residual)
    out += paragraph(
        "<strong>Over 1\u00a0% of the volume passed is not accounted for: do not use these numbers.</strong>");
  const auto counted = [](std::size_t n, const char* one, const char* more) {
    return fmt::format("{} {}{}", n, one, n == 1 ? "" : more);
  };
  std::vector<std::string> open;
  if (!study.guesses.empty())
    open.push_back(fmt::format("<a href=\"#open\">{}</a>", counted(study.guesses.size(), "guess", "es")));
  if (!study.warnings.empty())
    open.push_back(fmt::format("<a href=\"#open\">{}</a>", counted(study.warnings.size(), "warning", "s")));
  std::string line;
  for (const auto& one : open) line += (line.empty() ? "" : " · ") + one;
  out += paragraph(line, "open");
  out += "</section>\n";
  out +=
      "<p class=\"aid\">This is a calculation aid. The code in force and the licensed engineer decide. Ratings were "
      "typed by the user.</p>\n";
  return out + "</header>\n";
}

}  // namespace headband::report
