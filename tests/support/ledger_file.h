/* A ledger in a folder of its own that goes away with the test. */
#ifndef SUPPORT_LEDGER_FILE_H
#define SUPPORT_LEDGER_FILE_H

#include "ledger/ledger.h"
#include "support/near.h"

#include <limits.h>

struct scratch {
	char folder[64];
	char path[96]; /* of the ledger; not there at first */
};

/* Setup and teardown; *state is the struct scratch. */
int scratch_setup(void **state);
int scratch_teardown(void **state);
#define scratch_test(f) \
	cmocka_unit_test_setup_teardown(f, scratch_setup, scratch_teardown)

/* Opens the scratch ledger or fails the test. */
struct ledger *scratch_open(const struct scratch *scratch,
			    enum ledger_mode mode);
/* Another path in the folder. */
void scratch_path(const struct scratch *scratch, const char *name,
		  char path[96]);
/* Runs SQL on the file behind the ledger's back. */
void scratch_sql(const char *path, const char *sql);
/* Number of files in the folder. */
unsigned scratch_files(const struct scratch *scratch);
/* The whole file, of the heap; *length its bytes. */
unsigned char *scratch_bytes(const char *path, size_t *length);
void scratch_write(const char *path, const void *bytes, size_t length);

#endif
