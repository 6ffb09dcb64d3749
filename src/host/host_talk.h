/* What the program and its codec host say to each other over pipes. */
#ifndef HOST_HOST_TALK_H
#define HOST_HOST_TALK_H

#include <stdint.h>

/*
 * codec-host command|library PARENT MEMORY CPU FILE WORD...
 *
 * PARENT is the process that asks, MEMORY and FILE are bytes, CPU seconds: the
 * limits of the codec. After command comes a program with its arguments; after
 * library the path of a shared object. Descriptors 0, 1 and 2 are the codec's;
 * on 3 one host_report is written when all is over and nothing of the codec
 * runs any more. SIGTERM ends the codec at once. Both ends are one build on one
 * machine, so structs go as they lie in memory.
 */
#define HOST_REPORT_FD 3

enum host_end {
	HOST_EXITED,     /* value: exit code */
	HOST_SIGNALLED,  /* value: signal */
	HOST_STOPPED,    /* SIGTERM came */
	HOST_NO_PROGRAM, /* value: errno of exec */
	HOST_NO_FOLDER,  /* value: errno of the private folder, or fork */
	HOST_LIMITLESS   /* value: errno of setrlimit */
};

struct host_report {
	int32_t end, value;
	int32_t left_running; /* processes that outlived the codec */
	uint64_t peak_bytes;  /* resident, of its largest process */
	uint64_t cpu_microseconds;
};

/* Library: requests come on 0, replies go to 1, until 0 ends. */
#define HOST_LEVEL_BYTES 32
#define HOST_WORDS_BYTES 160

enum host_action { HOST_COMPRESS, HOST_DECOMPRESS };

/* Followed by length bytes of input. */
struct host_request {
	int32_t action;
	char level[HOST_LEVEL_BYTES];
	uint64_t length;
	uint64_t room; /* bytes that may come out */
};

enum host_result {
	HOST_DONE,
	HOST_FULL,    /* the codec says so, or it wrote past the room */
	HOST_ERROR,   /* an own error of the codec; words */
	HOST_REFUSED, /* not loaded: words say why; no more comes */
	HOST_NO_MEMORY
};

/* Followed by length bytes of output on HOST_DONE. */
struct host_reply {
	int32_t result;
	char words[HOST_WORDS_BYTES];
	uint64_t length;
	uint64_t peak_bytes;
	uint64_t cpu_microseconds, wall_microseconds; /* of the call */
};

#endif
