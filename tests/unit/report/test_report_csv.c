/* Is the CSV report one table that a strict reader of RFC 4180 takes? */
#include "report/report.h"

#include "base/memory.h"
#include "support/near.h"
#include "support/sample_analysis.h"

#include <stdlib.h>
#include <string.h>

#define ROWS_MAX 40
#define COLUMNS_MAX 64

struct table {
	char *text;                          /* owned; cut up in place */
	char *fields[ROWS_MAX][COLUMNS_MAX]; /* into text */
	size_t columns[ROWS_MAX];
	size_t rows;
};

/* A quoted field: "" stands for a quote; ends after the closing one. */
static char *read_quoted(char **at)
{
	char *start = *at + 1;
	char *from = start;
	char *to = start;

	for (;;) {
		assert_true(*from != '\0');
		if (*from == '"') {
			if (from[1] != '"')
				break;
			from++;
		}
		*to++ = *from++;
	}
	*at = from + 1;
	*to = '\0';
	return start;
}

/* RFC 4180, section 2, its grammar: TEXTDATA is printable ASCII. */
static char *read_plain(char **at)
{
	char *start = *at;

	while (**at != ',' && **at != '\r') {
		assert_true(**at >= ' ' && **at <= '~' && **at != '"');
		(*at)++;
	}
	return start;
}

static void read_table(struct table *table, const struct analysis *analysis)
{
	char *at;

	memset(table, 0, sizeof(*table));
	table->text = sample_report(report_find("csv"), analysis);
	at = table->text;
	while (*at) {
		size_t row = table->rows++;
		char end;

		assert_true(row < ROWS_MAX);
		do {
			assert_true(table->columns[row] < COLUMNS_MAX);
			table->fields[row][table->columns[row]++] =
				*at == '"' ? read_quoted(&at) : read_plain(&at);
			end = *at;
			*at++ = '\0';
		} while (end == ',');
		assert_int_equal(end, '\r');
		assert_int_equal(*at++, '\n');
	}
}

static const char *field(const struct table *table, size_t row,
			 const char *title)
{
	for (size_t i = 0; i < table->columns[0]; i++) {
		if (strcmp(table->fields[0][i], title) == 0)
			return table->fields[row][i];
	}
	fail_msg("no column %s", title);
	return NULL;
}

/* Row of a kind and a name; 0 where there is none. */
static size_t row_of(const struct table *table, const char *kind,
		     const char *name)
{
	for (size_t i = 1; i < table->rows; i++) {
		if (strcmp(field(table, i, "row"), kind) == 0 &&
		    strcmp(field(table, i, "name"), name) == 0)
			return i;
	}
	return 0;
}

static void every_row_has_every_column(void **state)
{
	struct sample_analysis sample;
	struct table table;

	(void)state;
	sample_analysis_init(&sample);
	read_table(&table, &sample.analysis);
	/* Header, two corpora, two orders, three estimates, floor, bracket,
	 * three cells. */
	assert_int_equal(table.rows, 1 + 2 + 2 + 3 + 1 + 1 + 3);
	for (size_t i = 0; i < table.rows; i++)
		assert_int_equal(table.columns[i], table.columns[0]);
	memory_free(table.text);
	sample_analysis_release(&sample);
}

static void is_number(const struct table *table, size_t row, const char *title,
		      double wanted)
{
	const char *text = field(table, row, title);
	char *end = NULL;

	assert_true(text[0] != '\0');
	assert_near(strtod(text, &end), wanted, 1e-9);
	assert_int_equal(*end, '\0');
}

static void is_text(const struct table *table, size_t row, const char *title,
		    const char *wanted)
{
	assert_string_equal(field(table, row, title), wanted);
}

static void values_are_those_of_the_analysis(void **state)
{
	struct sample_analysis sample;
	struct table table;
	size_t row;

	(void)state;
	sample_analysis_init(&sample);
	read_table(&table, &sample.analysis);
	row = row_of(&table, "cell", "xz");
	is_text(&table, row, "corpus", "gauge-frames");
	is_text(&table, row, "symbols", "u16le");
	is_text(&table, row, "level", "9e");
	is_number(&table, row, "bits_per_symbol", 1.9021);
	is_number(&table, row, "gap_high", 0.3873);
	is_number(&table, row, "effort", -0.01);
	is_number(&table, row, "bytes", 5000000017);
	row = row_of(&table, "cell", "house");
	is_text(&table, row, "low", "");
	is_text(&table, row, "encode_mb_per_s", "");
	is_text(&table, row, "interval_reason",
		"only 5.2 effective blocks where 8 are needed");
	row = row_of(&table, "cell", "zlib");
	is_text(&table, row, "status", "failed");
	is_text(&table, row, "lossless", "false");
	is_text(&table, row, "bits_per_symbol", "");
	is_text(&table, row, "reason", "byte 7: got 0x41, wanted 0x42");
	row = row_of(&table, "floor", "mix");
	is_number(&table, row, "low", 1.5011);
	row = row_of(&table, "bracket", "mix");
	is_number(&table, row, "low", 1.4321);
	row = row_of(&table, "estimate", "crossfit");
	is_text(&table, row, "reason", "needs 6400 symbols, found 12");
	memory_free(table.text);
	sample_analysis_release(&sample);
}

static void honest_failures_are_told(void **state)
{
	struct sample_analysis sample;
	struct table table;
	size_t row;

	(void)state;
	sample_analysis_init(&sample);
	sample.views[0].bracket.open_below = true;
	sample.views[0].bracket.not_calibrated = true;
	sample.views[0].floor.by_codec = true;
	read_table(&table, &sample.analysis);
	row = row_of(&table, "bracket", "mix");
	is_text(&table, row, "low", "");
	is_text(&table, row, "reason", "open below");
	is_text(&table, row, "interval_reason", "not calibrated");
	row = row_of(&table, "floor", "mix");
	is_text(&table, row, "reason", "held by a codec");
	memory_free(table.text);
	sample_analysis_release(&sample);
}

static void hostile_names_stay_in_their_field(void **state)
{
	struct sample_analysis sample;
	struct table table;

	(void)state;
	sample_analysis_init(&sample);
	strcpy(sample.survey.corpora[0].name, "a,\"b\"\r\nc\xff");
	strcpy(sample.survey.corpora[0].cells[1].key.codec, "=cmd()");
	read_table(&table, &sample.analysis);
	assert_int_equal(table.rows, 13);
	is_text(&table, 1, "corpus", "a,\"b\"\\x0d\\x0ac\\xff");
	assert_true(row_of(&table, "cell", "'=cmd()") > 0);
	memory_free(table.text);
	sample_analysis_release(&sample);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(every_row_has_every_column),
		cmocka_unit_test(values_are_those_of_the_analysis),
		cmocka_unit_test(honest_failures_are_told),
		cmocka_unit_test(hostile_names_stay_in_their_field),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
