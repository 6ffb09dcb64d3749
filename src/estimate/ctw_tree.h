/* Context trees, weighted: the probability of one binary decision at a time. */
#ifndef ESTIMATE_CTW_TREE_H
#define ESTIMATE_CTW_TREE_H

#include "base/log2.h"
#include "base/memory.h"

#include <stdbool.h>

/*
 * A node s of a tree counts the decisions made in its context and estimates
 * P_e(x|s) after Krichevsky and Trofimov. With all contexts up to depth D,
 *   P_w(x|s) = w P_e(x|s) + (1 - w) P_w(x|child),   P_w = P_e at depth D,
 *   w <- w P_e(x|s) / P_w(x|s) after x, from 1/2:
 * Willems, Shtarkov, Tjalkens 1995, w being beta / (beta + 1) of their
 * sequential form. Whole numbers: P in 2^-32, w in 2^-48 and never nearer to 0
 * or 1 than 2^-40. That limit costs at most 2^-39 bit a decision, and wins some
 * where a context had long been wrong. Counts stop at 2^24 - 1: then both are
 * halved.
 */
#define CTW_NODES_MAX 32 /* on one path: depth + 1 */

struct ctw_slot {
	uint64_t weight; /* w, then bits 24 … 39 of the name; 0: free */
	uint64_t counts; /* zeros and ones, 24 bits each, then 40 … 55 */
};

/* At most this many slots: 1 GiB, and half of it more while growing to it. */
#define CTW_SLOTS_MAX ((size_t)1 << 26)

/*
 * A table for all nodes of all trees; no pointers, and no nodes are dropped. It
 * doubles when three eighths full. Nodes are told apart by 40 bits of their
 * names.
 */
struct ctw_tree {
	struct ctw_slot *slots; /* owned; lines of four */
	unsigned line_bits;     /* 2^line_bits lines, by the name's top bits */
	unsigned line_bits_max;
	unsigned depth;   /* D */
	bool exhausted;   /* the heap said no: nothing since is of use */
	uint64_t nodes;   /* made since the last restart */
	uint64_t refused; /* not made, since their place was full */
	/* The path of the decision in hand, from the root of its tree. */
	unsigned length;
	struct ctw_slot *path[CTW_NODES_MAX];
	uint32_t local[CTW_NODES_MAX];   /* P_e(1|s) */
	uint32_t weighed[CTW_NODES_MAX]; /* P_w(1|s) */
	uint64_t inverse[1024];          /* 2^63 / i */
};

/*
 * slots_max, rounded up to a power of two from 8192 to CTW_SLOTS_MAX, is how
 * far the table may grow; depth below CTW_NODES_MAX. STATUS_NO_MEMORY.
 */
MUST_USE enum status ctw_tree_init(struct ctw_tree *tree, unsigned depth,
				   size_t slots_max);
void ctw_tree_release(struct ctw_tree *tree);

/* Forgets all. */
void ctw_tree_restart(struct ctw_tree *tree);

/* Asks the memory for a node long before it is used. */
static inline void ctw_tree_ask(const struct ctw_tree *tree, uint64_t name)
{
	__builtin_prefetch(
		&tree->slots[(size_t)(name >> (64 - tree->line_bits)) * 4]);
}

/*
 * P(1) in 2^-32, from 1 to 2^32 - 1, of the decision whose nodes have these
 * names: depth + 1 well-mixed numbers, the root's first. Nodes are made where
 * there are none; where the table is full a path ends early.
 */
uint32_t ctw_tree_predict(struct ctw_tree *tree, const uint64_t *names);

/* The decision just predicted turned out to be this one. */
void ctw_tree_learn(struct ctw_tree *tree, bool one);

#endif
