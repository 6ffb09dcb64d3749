/* A codec that comes as a shared object, answering requests. */
#ifndef HOST_LIBRARY_WORKER_H
#define HOST_LIBRARY_WORKER_H

/* Loads the object and answers on 0 and 1 until 0 ends; see host_talk.h. */
void library_work(const char *path);

#endif
