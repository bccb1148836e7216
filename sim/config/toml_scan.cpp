#include "sim/config/toml_scan.h"

#include <fmt/format.h>

#include <algorithm>

#include "sim/config/utf8.h"

namespace lacuna {

namespace {

constexpr int deepest = 32;

bool is_key_character(char c) {
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '_' || c == '-';
}

class Scan {
public:
    Scan(std::string_view text, const std::string& source) : text_(text), place_{source, 1, 1} {}

    std::optional<Fault> run() {
        if (text_.substr(0, 3) == "\xEF\xBB\xBF") at_ = 3;  // byte order mark
        while (at_ < text_.size() && !fault_) token();
        return fault_;
    }

private:
    /// One character outside strings, or a whole string or comment.
    void token() {
        const char c = text_[at_];
        if (c == '#') {
            while (at_ < text_.size() && text_[at_] != '\n' && !fault_) advance();
        } else if (c == '"' || c == '\'') {
            fresh_line_ = false;
            if (begins_word())
                skip_string(c);
            else
                report("a quote stands in the middle of a word", "");
        } else {
            bare(c);
            if (!fault_) advance();
        }
    }

    /// Where the parser takes a quote for the start of a string; anywhere else it reads on without
    /// looking for the other one.
    bool begins_word() const {
        return at_ == 0 || std::string_view(" \t\n=[{,.\xBF").find(text_[at_ - 1]) != std::string_view::npos;
    }

    void bare(char c) {
        if (static_cast<unsigned char>(c) >= 0x80u && utf8_length(text_, at_) != 0) {
            return report("only strings and comments may hold characters other than ASCII",
                          "put the key or value in quotes");
        }
        if (c == '[' && fresh_line_ && depth_ == 0) check_header();
        if (c == '[' || c == '{') ++depth_;
        if ((c == ']' || c == '}') && depth_ > 0) --depth_;
        if (c == '.')
            ++dots_;
        else if (!is_key_character(c) && c != ' ' && c != '\t')
            dots_ = 0;
        if (depth_ > deepest) report(fmt::format("values are nested deeper than {}", deepest), "");
        if (dots_ > deepest) report(fmt::format("a dotted key has more than {} parts", deepest), "");
        if (c == '\n')
            fresh_line_ = true;
        else if (c != ' ' && c != '\t' && c != '\r')
            fresh_line_ = false;
    }

    /// A header must go on with a key, or with `]`, which the parser refuses in good order.
    void check_header() {
        std::size_t next = at_ + 1;
        if (next < text_.size() && text_[next] == '[') ++next;
        next = std::min(text_.find_first_not_of(" \t", next), text_.size());
        const char c = next < text_.size() ? text_[next] : '\n';
        if (is_key_character(c) || c == '"' || c == '\'' || c == ']' || c == '[') return;
        report("a table header needs a key", "as in [field] or [[journal]]");
    }

    void skip_string(char quote) {
        const Place opening = place_;
        const std::string three(3, quote);
        const bool many_lines = text_.substr(at_, 3) == three;
        for (int i = many_lines ? 3 : 1; i > 0; --i) advance();
        while (at_ < text_.size() && !fault_) {
            const char c = text_[at_];
            if (!many_lines && c == '\n') break;
            if (c == quote && (!many_lines || text_.substr(at_, 3) == three)) {
                do advance();
                while (many_lines && at_ < text_.size() && text_[at_] == quote);
                return;
            }
            if (c == '\\' && quote == '"') advance();
            if (at_ < text_.size() && !fault_ && (many_lines || text_[at_] != '\n')) advance();
        }
        if (fault_) return;
        place_ = opening;
        report(fmt::format("a string has no closing {}", many_lines ? three : std::string(1, quote)), "");
    }

    /// Steps over one character, checking its bytes.
    void advance() {
        const auto c = static_cast<unsigned char>(text_[at_]);
        const std::size_t length = utf8_length(text_, at_);
        if (length == 0) return report(fmt::format("byte 0x{:02X} is not UTF-8", c), "save the file as UTF-8");
        const bool line_end = c == '\n' || (c == '\r' && at_ + 1 < text_.size() && text_[at_ + 1] == '\n');
        if ((c < 0x20 && c != '\t' && !line_end) || c == 0x7F) {
            return report(fmt::format("control character 0x{:02X} is not allowed", c), "is this a text file?");
        }
        at_ += length;
        if (c == '\n') {
            ++place_.line;
            place_.column = 1;
        } else {
            ++place_.column;
        }
    }

    void report(std::string message, std::string remedy) {
        fault_ = Fault{place_, "", std::move(message), std::move(remedy)};
    }

    std::string_view text_;
    Place place_;
    std::size_t at_ = 0;
    int depth_ = 0;
    int dots_ = 0;
    bool fresh_line_ = true;
    std::optional<Fault> fault_;
};

}  // namespace

std::optional<Fault> scan_toml(std::string_view text, const std::string& source) {
    return Scan(text, source).run();
}

}  // namespace lacuna
