#include "ledger/schema.h"

#include <stddef.h>

#define TABLE_END ") STRICT, WITHOUT ROWID;"
#define SURVEY_KEY \
	"survey INTEGER NOT NULL REFERENCES survey ON DELETE CASCADE,"
#define METHOD_KEY                                       \
	"survey INTEGER NOT NULL, corpus TEXT NOT NULL," \
	"method TEXT NOT NULL, page_bytes INTEGER NOT NULL,"
#define OF_METHOD                                          \
	"FOREIGN KEY (survey, corpus, method, page_bytes)" \
	" REFERENCES method ON DELETE CASCADE"
#define OF_CORPUS                      \
	"FOREIGN KEY (survey, corpus)" \
	" REFERENCES corpus (survey, name) ON DELETE CASCADE"
#define OUTCOME                                        \
	"outcome TEXT NOT NULL CHECK (outcome IN"      \
	" ('done', 'failed', 'declined', 'skipped'))," \
	"reason TEXT NOT NULL,"

const char *const schema_sql[] = {
	"CREATE TABLE survey (id INTEGER NOT NULL PRIMARY KEY,"
	"plan TEXT NOT NULL, set_name TEXT NOT NULL, program TEXT NOT NULL,"
	"seed INTEGER NOT NULL, orders INTEGER NOT NULL,"
	"gap_limit REAL NOT NULL, yardstick TEXT NOT NULL,"
	"tolerance REAL NOT NULL, speed_tolerance REAL NOT NULL" TABLE_END,

	"CREATE TABLE run (survey INTEGER NOT NULL PRIMARY KEY"
	" REFERENCES survey ON DELETE CASCADE,"
	"host TEXT NOT NULL, started TEXT NOT NULL, finished TEXT,"
	"set_path TEXT NOT NULL" TABLE_END,

	"CREATE TABLE library (" SURVEY_KEY "place INTEGER NOT NULL,"
	"name TEXT NOT NULL, version TEXT NOT NULL,"
	"PRIMARY KEY (survey, place)" TABLE_END,

	"CREATE TABLE corpus (" SURVEY_KEY
	"name TEXT NOT NULL, place INTEGER NOT NULL," OUTCOME
	"symbols TEXT NOT NULL, file_bytes INTEGER NOT NULL,"
	"canonical_bytes INTEGER NOT NULL, n INTEGER NOT NULL,"
	"distinct_symbols INTEGER NOT NULL, alphabet INTEGER NOT NULL,"
	"records INTEGER NOT NULL, sha256 TEXT NOT NULL,"
	"licence TEXT NOT NULL, origin TEXT NOT NULL, known_rate REAL,"
	"rolling INTEGER NOT NULL,"
	"block_symbols BLOB NOT NULL, block_bytes BLOB NOT NULL,"
	"PRIMARY KEY (survey, name)" TABLE_END,

	"CREATE TABLE method (" METHOD_KEY "place INTEGER NOT NULL," OUTCOME
	"PRIMARY KEY (survey, corpus, method, page_bytes)," OF_CORPUS TABLE_END,

	"CREATE TABLE series (" METHOD_KEY "place INTEGER NOT NULL,"
	"gram_order INTEGER NOT NULL, headline_q16 INTEGER NOT NULL,"
	"block_q16 BLOB NOT NULL,"
	"PRIMARY KEY (survey, corpus, method, page_bytes, place)," OF_METHOD
		TABLE_END,

	/* part: 0 all positions, 1 and 2 those of the halves */
	"CREATE TABLE gram (" METHOD_KEY "place INTEGER NOT NULL,"
	"part INTEGER NOT NULL, gram_order INTEGER NOT NULL,"
	"positions INTEGER NOT NULL, distinct_grams INTEGER NOT NULL,"
	"once INTEGER NOT NULL, twice INTEGER NOT NULL,"
	"plugin_q16 INTEGER NOT NULL, grassberger_q16 INTEGER NOT NULL,"
	"psi_q16 INTEGER NOT NULL,"
	"PRIMARY KEY (survey, corpus, method, page_bytes, place, "
	"part)," OF_METHOD TABLE_END,

	"CREATE TABLE note (" METHOD_KEY "place INTEGER NOT NULL,"
	"key TEXT NOT NULL, value INTEGER NOT NULL,"
	"PRIMARY KEY (survey, corpus, method, page_bytes, place)," OF_METHOD
		TABLE_END,

	"CREATE TABLE cell (survey INTEGER NOT NULL, corpus TEXT NOT NULL,"
	"codec TEXT NOT NULL, level TEXT NOT NULL, layout TEXT NOT NULL,"
	"place INTEGER NOT NULL, page_bytes INTEGER NOT NULL," OUTCOME
	"bytes INTEGER NOT NULL, framing_bytes INTEGER NOT NULL,"
	"framing_known INTEGER NOT NULL, lossless INTEGER NOT NULL,"
	"pages INTEGER NOT NULL, flushed_bytes INTEGER NOT NULL,"
	"flushed_q16 INTEGER NOT NULL, block_q16 BLOB NOT NULL,"
	"encode_memory_bytes INTEGER NOT NULL,"
	"decode_memory_bytes INTEGER NOT NULL,"
	"dictionary_bytes INTEGER NOT NULL, storage_unit INTEGER NOT NULL,"
	"stored_bytes INTEGER NOT NULL,"
	"PRIMARY KEY (survey, corpus, codec, level, layout)," OF_CORPUS
		TABLE_END,

	"CREATE TABLE timing (survey INTEGER NOT NULL, corpus TEXT NOT NULL,"
	"codec TEXT NOT NULL, level TEXT NOT NULL, layout TEXT NOT NULL,"
	"rounds INTEGER NOT NULL, encode_cpu_seconds REAL NOT NULL,"
	"decode_cpu_seconds REAL NOT NULL, encode_wall_seconds REAL NOT NULL,"
	"decode_wall_seconds REAL NOT NULL, encode_spread REAL NOT NULL,"
	"decode_spread REAL NOT NULL, encode_peak_bytes INTEGER NOT NULL,"
	"decode_peak_bytes INTEGER NOT NULL,"
	"PRIMARY KEY (survey, corpus, codec, level, layout),"
	"FOREIGN KEY (survey, corpus, codec, level, layout)"
	" REFERENCES cell ON DELETE CASCADE" TABLE_END,
	NULL,
};
