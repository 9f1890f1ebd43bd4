#include "report/page.h"

#include <string.h>

static size_t columns_of(const char *s, size_t n) {
  size_t columns = 0;
  for (size_t i = 0; i < n; i++) columns += ((unsigned char)s[i] & 0xC0) != 0x80;
  return columns;
}

/* Display columns since the last newline. */
static size_t column(const text *out) {
  size_t start = out->len;
  while (start > 0 && out->data[start - 1] != '\n') start--;
  return columns_of(out->data + start, out->len - start);
}

/* C0, DEL and C1 (as UTF-8) steer terminals: titles and names of files must not. */
static void put_harmless(text *out, const char *s, size_t n) {
  for (size_t i = 0; i < n; i++) {
    unsigned char c = (unsigned char)s[i];
    if (c == 0xC2 && i + 1 < n && (unsigned char)s[i + 1] < 0xA0)
      text_putf(out, "\\u%04x", (unsigned char)s[++i]);
    else if (c < 0x20 || c == 0x7F)
      text_putf(out, "\\u%04x", c);
    else
      text_char(out, s[i]);
  }
}

void page_put(text *out, const char *s) {
  put_harmless(out, s, strlen(s));
}

void page_label(text *out, const char *label) {
  text_put(out, label);
  text_pad(out, PAGE_LABEL);
}

void page_words(text *out, size_t indent, const char *words) {
  bool begun = false;
  while (*words == ' ') words++;
  while (*words != '\0') {
    size_t n = strcspn(words, " ");
    size_t at = column(out);
    if (begun && at + 1 + columns_of(words, n) > PAGE_WIDTH) {
      text_char(out, '\n');
      text_pad(out, indent);
    } else if (begun)
      text_char(out, ' ');
    put_harmless(out, words, n);
    begun = true;
    words += n;
    while (*words == ' ') words++;
  }
  text_char(out, '\n');
}

void page_line(text *out, const char *label, const char *words) {
  page_label(out, label);
  page_words(out, PAGE_LABEL, words);
}

void page_right(text *out, size_t end, const char *word) {
  size_t width = columns_of(word, strlen(word));
  text_char(out, column(out) + 1 + width > PAGE_WIDTH ? '\n' : ' ');
  if (end > width) text_pad(out, end - width);
  page_put(out, word);
}

void page_cut(text *out, size_t columns, const char *word) {
  size_t length = strlen(word);
  if (columns_of(word, length) <= columns) {
    page_put(out, word);
    return;
  }
  size_t n = 0;
  for (size_t seen = 0; n < length; n++) {
    seen += ((unsigned char)word[n] & 0xC0) != 0x80;
    if (seen == columns) break;
  }
  put_harmless(out, word, n);
  text_char(out, '.');
}
