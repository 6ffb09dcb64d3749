#include "cli/output.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

enum status output_open(struct output *output, const char *path,
			struct reason *why)
{
	struct stat about;

	*output = (struct output){.path = path, .file = stdout};
	if (!path)
		return STATUS_OK;
	/* A device or a pipe is written to as it is. */
	if (stat(path, &about) == 0 && !S_ISREG(about.st_mode)) {
		output->file = fopen(path, "w");
	} else {
		int length =
			snprintf(output->temporary, sizeof(output->temporary),
				 "%s.%ld.part", path, (long)getpid());

		if (length < 0 || (size_t)length >= sizeof(output->temporary))
			return reason_give(why, STATUS_IO, "%s: name too long",
					   path);
		output->file = fopen(output->temporary, "w");
	}
	if (output->file)
		return STATUS_OK;
	return reason_give(why, STATUS_IO, "%s: cannot write: %s", path,
			   strerror(errno));
}

enum status output_keep(struct output *output, struct reason *why)
{
	const char *name = output->path ? output->path : "standard output";
	int bad = fflush(output->file) != 0 || ferror(output->file);
	int error = errno;

	if (!output->path)
		return bad ? reason_give(why, STATUS_IO, "%s: cannot write: %s",
					 name, strerror(error))
			   : STATUS_OK;
	if (!bad && output->temporary[0] && fsync(fileno(output->file)) != 0) {
		bad = 1;
		error = errno;
	}
	if (fclose(output->file) != 0 && !bad) {
		bad = 1;
		error = errno;
	}
	output->file = NULL;
	if (!bad && output->temporary[0] &&
	    rename(output->temporary, output->path) != 0) {
		bad = 1;
		error = errno;
	}
	if (!bad)
		return STATUS_OK;
	output_drop(output);
	return reason_give(why, STATUS_IO, "%s: cannot write: %s", name,
			   strerror(error));
}

void output_drop(struct output *output)
{
	if (output->path && output->file)
		(void)fclose(output->file);
	if (output->temporary[0])
		(void)unlink(output->temporary);
	*output = (struct output){0};
}

enum status output_end(struct output *output, enum status status,
		       struct reason *why)
{
	if (status == STATUS_OK)
		return output_keep(output, why);
	output_drop(output);
	return status;
}
