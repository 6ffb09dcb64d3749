# ratefloor: how much of a corpus is still compressible, and by what.
#
# Everything built lands in build/$(MODE)/. `make help` lists the targets.

VERSION := 0.1.0
MODE ?= release
CC ?= gcc
PREFIX ?= /usr/local
DESTDIR ?=
PYTHON ?= python3

B := build/$(MODE)

PACKAGES := zlib liblzma libzstd sqlite3 jansson inih libdivsufsort libmd
PKG_CFLAGS := $(shell pkg-config --cflags $(PACKAGES))
PKG_LIBS := $(shell pkg-config --libs $(PACKAGES))

WARNINGS := -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wstrict-prototypes \
	-Wmissing-prototypes -Wundef -Wvla -Wwrite-strings -Wdouble-promotion \
	-Wformat=2 -Werror

MODE_release := -O2 -g
MODE_debug := -O0 -g3
MODE_native := -O3 -march=native -g
MODE_asan := -O1 -g -fsanitize=address,undefined -fno-sanitize-recover=all \
	-fno-omit-frame-pointer
MODE_tsan := -O1 -g -fsanitize=thread
MODE_coverage := -O0 -g --coverage

ifeq ($(filter $(MODE),release debug native asan tsan coverage),)
$(error MODE=$(MODE): use release, debug, native, asan, tsan or coverage)
endif

ALL_CFLAGS := -std=c11 -D_POSIX_C_SOURCE=200809L -DRATEFLOOR_VERSION='"$(VERSION)"' \
	-ffp-contract=off -fno-math-errno -pthread $(WARNINGS) $(MODE_$(MODE)) \

LIBS := $(PKG_LIBS) -lm -pthread

SOURCES := $(sort $(wildcard src/*/*.c))
OBJECTS := $(SOURCES:src/%.c=$(B)/src/%.o)
LIB_OBJECTS := $(filter-out $(B)/src/cli/main.o,$(OBJECTS))

SUPPORT := $(sort $(wildcard tests/support/*.c))
SUPPORT_OBJECTS := $(SUPPORT:%.c=$(B)/%.o)
TEST_SOURCES := $(sort $(wildcard tests/unit/*/test_*.c tests/property/test_*.c \
	tests/reference/test_*.c))
TESTS := $(TEST_SOURCES:%.c=$(B)/%)
FAULT_SOURCES := $(sort $(wildcard tests/faults/test_*.c))
FAULTS := $(FAULT_SOURCES:%.c=$(B)/%)
BENCHES := $(patsubst %.c,$(B)/%,$(sort $(wildcard tests/bench/bench_*.c)))

.DELETE_ON_ERROR:
.SECONDARY:
.PHONY: all FORCE

all: $(B)/ratefloor ## build the program: build/release/ratefloor

# Objects depend on this stamp, which changes with compiler and flags only.
$(B)/flags: FORCE
	@mkdir -p $(@D)
	@echo '$(CC) $(subst ','\'',$(ALL_CFLAGS))' | cmp -s - $@ || \
		echo '$(CC) $(subst ','\'',$(ALL_CFLAGS))' > $@

$(B)/src/%.o: src/%.c $(B)/flags
	@mkdir -p $(@D)
	$(CC) $(ALL_CFLAGS) -Isrc -MMD -MP -c $< -o $@

$(B)/tests/%.o: tests/%.c $(B)/flags
	@mkdir -p $(@D)
	$(CC) $(ALL_CFLAGS) -Isrc -Itests -MMD -MP -c $< -o $@

$(B)/libratefloor.a: $(LIB_OBJECTS)
	@rm -f $@
	ar rcs $@ $^

$(B)/ratefloor: $(B)/src/cli/main.o $(B)/libratefloor.a
	$(CC) $(ALL_CFLAGS) $^ $(LDFLAGS) $(LIBS) -o $@

$(B)/tests/%: $(B)/tests/%.o $(SUPPORT_OBJECTS) $(B)/libratefloor.a
	$(CC) $(ALL_CFLAGS) $^ $(LDFLAGS) $(LIBS) -lcmocka -o $@

# Every call to the heap goes through the fault injector of tests/support.
$(B)/tests/faults/%: LDFLAGS += -Wl,--wrap=malloc,--wrap=calloc,--wrap=realloc,--wrap=aligned_alloc

-include $(shell find $(B) -name '*.d' 2>/dev/null)

.PHONY: test bench lint rooms format clean help

test: $(B)/ratefloor $(TESTS) ## unit, property and reference tests
	@scripts/run-tests $(B) $(TESTS)

bench: $(BENCHES) $(B)/ratefloor ## print the ratios of the speed targets
	@set -e; for bench in $(BENCHES); do $$bench; done

rooms: all ## check the law of src/ROOMS
	@scripts/check-rooms

format: ## lay out the sources with clang-format
	clang-format -i $(wildcard src/*/*.[ch] tests/*/*.[ch] tests/*/*/*.[ch])

clean: ## remove build/
	rm -rf build

help: ## this list
	@sed -n 's/^\([a-z-]*\):.*## \(.*\)/  \1 - \2/p' $(MAKEFILE_LIST)
