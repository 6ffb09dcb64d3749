#include "support/ledger_file.h"

#include "base/memory.h"
#include "ledger/statement.h"

#include <dirent.h>
#include <sqlite3.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

int scratch_setup(void **state)
{
	struct scratch *scratch = NULL;

	if (memory_new_zeroed(1, sizeof(*scratch), &scratch) != STATUS_OK)
		return -1;
	strcpy(scratch->folder, "/tmp/ratefloor-test-XXXXXX");
	if (!mkdtemp(scratch->folder))
		return -1;
	scratch_path(scratch, "marrow.ledger", scratch->path);
	*state = scratch;
	return 0;
}

void scratch_path(const struct scratch *scratch, const char *name,
		  char path[96])
{
	(void)snprintf(path, 96, "%.60s/%.30s", scratch->folder, name);
}

static unsigned walk(const struct scratch *scratch, int empty)
{
	DIR *folder = opendir(scratch->folder);
	struct dirent *entry;
	unsigned count = 0;

	while (folder && (entry = readdir(folder))) {
		char path[96];

		if (entry->d_name[0] == '.')
			continue;
		count++;
		scratch_path(scratch, entry->d_name, path);
		if (empty)
			(void)unlink(path);
	}
	if (folder)
		(void)closedir(folder);
	return count;
}

unsigned scratch_files(const struct scratch *scratch)
{
	return walk(scratch, 0);
}

int scratch_teardown(void **state)
{
	struct scratch *scratch = *state;

	(void)walk(scratch, 1);
	(void)rmdir(scratch->folder);
	memory_free(scratch);
	return 0;
}

struct ledger *scratch_open(const struct scratch *scratch,
			    enum ledger_mode mode)
{
	struct ledger *ledger = NULL;
	struct reason why = {""};

	if (ledger_open(scratch->path, mode, &ledger, &why) != STATUS_OK)
		fail_msg("%s", why.text);
	/* A test outlives no power cut: waiting for the disk proves nothing. */
	assert_int_equal(sqlite3_exec(ledger->database,
				      "PRAGMA synchronous = OFF", NULL, NULL,
				      NULL),
			 SQLITE_OK);
	return ledger;
}

void scratch_sql(const char *path, const char *sql)
{
	sqlite3 *database = NULL;

	assert_int_equal(sqlite3_open(path, &database), SQLITE_OK);
	assert_int_equal(sqlite3_exec(database, "PRAGMA synchronous = OFF",
				      NULL, NULL, NULL),
			 SQLITE_OK);
	assert_int_equal(sqlite3_exec(database, sql, NULL, NULL, NULL),
			 SQLITE_OK);
	assert_int_equal(sqlite3_close(database), SQLITE_OK);
}

unsigned char *scratch_bytes(const char *path, size_t *length)
{
	FILE *file = fopen(path, "rb");
	unsigned char *bytes = NULL;
	long end;

	assert_non_null(file);
	assert_int_equal(fseek(file, 0, SEEK_END), 0);
	end = ftell(file);
	rewind(file);
	assert_true(end >= 0);
	*length = (size_t)end;
	assert_int_equal(memory_new(*length, 1, &bytes), STATUS_OK);
	assert_int_equal(fread(bytes, 1, *length, file), *length);
	(void)fclose(file);
	return bytes;
}

void scratch_write(const char *path, const void *bytes, size_t length)
{
	FILE *file = fopen(path, "wb");

	assert_non_null(file);
	assert_int_equal(fwrite(bytes, 1, length, file), length);
	assert_int_equal(fclose(file), 0);
}
