#include "corpus/file_read.h"

#include <errno.h>
#include <fcntl.h>
#include <inttypes.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static enum status refuse_errno(const char *path, struct reason *why)
{
	int code = errno;

	if (code == ENOENT || code == ENOTDIR)
		return reason_give(why, STATUS_NOT_FOUND,
				   "%s: there is no such file", path);
	return reason_give(why, STATUS_IO, "%s: cannot be read: %s", path,
			   strerror(code));
}

/* Rounded up, and no overflow at any file's length. */
static uint64_t mebibytes(uint64_t length, unsigned each)
{
	return ((length >> 10) * each >> 10) + 1;
}

static enum status check_stat(const char *path, const struct stat *stat,
			      const struct read_limit *limit,
			      struct reason *why)
{
	uint64_t length = (uint64_t)stat->st_size;

	if (S_ISDIR(stat->st_mode))
		return reason_give(why, STATUS_IO,
				   "%s: is a folder, not a file", path);
	if (!S_ISREG(stat->st_mode))
		return reason_give(why, STATUS_IO,
				   "%s: is no regular file; copy what it gives "
				   "into one",
				   path);
	if (!length)
		return reason_give(why, STATUS_BAD_INPUT, "%s: is empty", path);
	if (length <= limit->bytes / limit->each)
		return STATUS_OK;
	if (limit->each == 1)
		return reason_give(why, STATUS_NO_MEMORY,
				   "%s: has %" PRIu64 " bytes; %" PRIu64
				   " are the most",
				   path, length, limit->bytes);
	return reason_give(why, STATUS_NO_MEMORY,
			   "%s: %" PRIu64 " bytes need %" PRIu64
			   " MiB of memory (%u times their length); %" PRIu64
			   " MiB may be used",
			   path, length, mebibytes(length, limit->each),
			   limit->each, limit->bytes >> 20);
}

static enum status read_all(int descriptor, const char *path, uint8_t *bytes,
			    size_t length, struct reason *why)
{
	size_t done = 0;

	while (done < length) {
		ssize_t got = read(descriptor, bytes + done, length - done);

		if (got < 0 && errno == EINTR)
			continue;
		if (got < 0)
			return refuse_errno(path, why);
		if (!got)
			return reason_give(why, STATUS_IO,
					   "%s: became shorter while it was "
					   "read",
					   path);
		done += (size_t)got;
	}
	return STATUS_OK;
}

static enum status read_open(int descriptor, const char *path,
			     const struct read_limit *limit, uint8_t **bytes,
			     size_t *length, struct reason *why)
{
	struct stat stat;
	enum status status;
	uint8_t *made;
	size_t size;

	if (fstat(descriptor, &stat) != 0)
		return refuse_errno(path, why);
	TRY(check_stat(path, &stat, limit, why));
	size = (size_t)stat.st_size;
	if (memory_new(size, 1, &made) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY,
				   "%s: no memory for its %zu bytes", path,
				   size);
	status = read_all(descriptor, path, made, size, why);
	if (status != STATUS_OK) {
		memory_free(made);
		return status;
	}
	*bytes = made;
	*length = size;
	return STATUS_OK;
}

enum status file_read(const char *path, const struct read_limit *limit,
		      uint8_t **bytes, size_t *length, struct reason *why)
{
	/* Non-blocking, so that a pipe without a writer is refused at once. */
	int descriptor = open(path, O_RDONLY | O_NONBLOCK | O_CLOEXEC);
	enum status status;

	if (descriptor < 0)
		return refuse_errno(path, why);
	status = read_open(descriptor, path, limit, bytes, length, why);
	(void)close(descriptor);
	return status;
}
