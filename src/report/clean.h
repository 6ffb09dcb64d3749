/* Text from files made harmless for the format that it is printed in. */
#ifndef REPORT_CLEAN_H
#define REPORT_CLEAN_H

#include <stdbool.h>
#include <stddef.h>

/*
 * Each writes at most room bytes, NUL included (cut where it does not fit),
 * and returns the length.
 */

/* Printable ASCII; every other byte as \xNN, so that no name moves a cursor. */
size_t clean_ascii(const char *text, char *out, size_t room);
/* clean_ascii, then whatever Markdown reads as markup is escaped. */
size_t clean_markdown(const char *text, char *out, size_t room);
/*
 * clean_ascii as one field of RFC 4180. A text that a spreadsheet would run as
 * a formula gets an apostrophe in front, as spreadsheets mark plain text.
 */
size_t clean_csv(const char *text, char *out, size_t room);
/* Valid UTF-8 (RFC 3629); each byte that is not becomes U+FFFD. */
size_t clean_utf8(const char *text, char *out, size_t room);

#endif
