#include "base/pool.h"

#include "base/memory.h"

#include <pthread.h>

struct pool {
	pthread_mutex_t lock;
	size_t next, count;
	void (*work)(void *context, size_t i);
	void *context;
};

static void *pool_worker(void *argument)
{
	struct pool *pool = argument;

	for (;;) {
		size_t i;

		(void)pthread_mutex_lock(&pool->lock);
		i = pool->next < pool->count ? pool->next++ : pool->count;
		(void)pthread_mutex_unlock(&pool->lock);
		if (i == pool->count)
			return NULL;
		pool->work(pool->context, i);
	}
}

enum status pool_run(size_t count, unsigned jobs,
		     void (*work)(void *context, size_t i), void *context)
{
	struct pool pool = {.count = count, .work = work, .context = context};
	unsigned wanted = jobs < 1 ? 1 : jobs, started = 0;
	pthread_t *threads;

	if (wanted > count)
		wanted = count ? (unsigned)count : 1;
	TRY(memory_new(wanted, sizeof(*threads), &threads));
	if (pthread_mutex_init(&pool.lock, NULL) != 0) {
		memory_free(threads);
		return STATUS_NO_MEMORY;
	}
	/* The caller is one of the workers, so one is always there. */
	while (started + 1 < wanted &&
	       pthread_create(&threads[started], NULL, pool_worker, &pool) == 0)
		started++;
	(void)pool_worker(&pool);
	while (started > 0)
		(void)pthread_join(threads[--started], NULL);
	(void)pthread_mutex_destroy(&pool.lock);
	memory_free(threads);
	return STATUS_OK;
}
