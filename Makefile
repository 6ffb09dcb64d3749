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
MODE_clang := -O2 -g
MODE_asan := -O1 -g -fsanitize=address,undefined -fno-sanitize-recover=all \
	-fno-omit-frame-pointer
MODE_tsan := -O1 -g -fsanitize=thread
MODE_coverage := -O0 -g --coverage

ifeq ($(filter $(MODE),release debug native clang asan tsan coverage),)
$(error MODE=$(MODE): use release, debug, native, clang, asan, tsan or coverage)
endif

ALL_CFLAGS := -std=c11 -D_POSIX_C_SOURCE=200809L -DRATEFLOOR_VERSION='"$(VERSION)"' \
	-ffp-contract=off -fno-math-errno -pthread $(WARNINGS) $(MODE_$(MODE)) \

LIBS := $(PKG_LIBS) -lm -pthread

SOURCES := $(sort $(wildcard src/*/*.c))
OBJECTS := $(SOURCES:src/%.c=$(B)/src/%.o)
LIB_OBJECTS := $(filter-out $(B)/src/cli/main.o $(B)/src/host/%,$(OBJECTS))

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

all: $(B)/ratefloor $(B)/codec-host ## build the program: build/release/ratefloor

# Objects depend on this stamp, which changes with compiler and flags only.
$(B)/flags: FORCE
	@mkdir -p $(@D)
	@echo '$(CC) $(subst ','\'',$(ALL_CFLAGS))' | cmp -s - $@ || \
		echo '$(CC) $(subst ','\'',$(ALL_CFLAGS))' > $@

# Sanitizers reserve more addresses than a codec's limit allows, so what runs
# users' codecs, and the example codecs of the tests, are built without.
PLAIN_CFLAGS := $(filter-out $(MODE_$(MODE)),$(ALL_CFLAGS)) -O2 -g
HOST_OBJECTS := $(patsubst src/%.c,$(B)/plain/%.o,$(sort $(wildcard src/host/*.c)))

$(B)/plain/%.o: src/%.c $(B)/flags
	@mkdir -p $(@D)
	$(CC) $(PLAIN_CFLAGS) -Isrc -MMD -MP -c $< -o $@

$(B)/codec-host: $(HOST_OBJECTS)
	$(CC) $(PLAIN_CFLAGS) $^ -ldl -o $@

CODECS := $(patsubst tests/%.c,$(B)/tests/%,$(wildcard tests/support/codecs/*_command.c)) \
	$(patsubst tests/%.c,$(B)/tests/%.so,$(wildcard tests/support/codecs/*_library.c))

$(B)/tests/support/codecs/%: tests/support/codecs/%.c $(B)/flags
	@mkdir -p $(@D)
	$(CC) $(PLAIN_CFLAGS) $< -o $@

$(B)/tests/support/codecs/%.so: tests/support/codecs/%.c src/host/house_codec.h $(B)/flags
	@mkdir -p $(@D)
	$(CC) $(PLAIN_CFLAGS) -shared -fPIC -Isrc/host $< -o $@

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

# Calls to the heap from our own objects go through the injector first.
WRAP := -Wl,--wrap=malloc,--wrap=calloc,--wrap=realloc,--wrap=aligned_alloc
$(FAULTS): $(B)/tests/faults/%: $(B)/tests/faults/%.o $(B)/tests/faults/inject.o $(SUPPORT_OBJECTS) \
		$(B)/libratefloor.a
	$(CC) $(ALL_CFLAGS) $^ $(LDFLAGS) $(WRAP) $(LIBS) -lcmocka -o $@

-include $(shell find $(B) -name '*.d' 2>/dev/null)

.PHONY: test faults golden asan valgrind fuzz coverage lint rooms format check bench \
	corpora results install uninstall dist clean help

test: $(B)/ratefloor $(B)/codec-host $(CODECS) $(TESTS) ## unit, property and reference tests
	@scripts/run-tests $(B) $(TESTS)

faults: $(B)/ratefloor $(FAULTS) ## every allocation fails in turn, full disk, kills
	@scripts/run-tests $(B) $(FAULTS)

golden: $(B)/ratefloor $(B)/codec-host $(CODECS) ## command lines with their expected output and exit code
	@tests/golden/run $(B)/ratefloor

asan: ## tests and faults under the address and undefined-behaviour sanitizers
	@$(MAKE) --no-print-directory MODE=asan test faults

VALGRIND := valgrind --quiet --error-exitcode=9 --leak-check=full --errors-for-leak-kinds=definite,indirect
# Those that kill processes by the clock, or take minutes so, are left to asan.
VALGRIND_SLOW := %/test_ledger_kill %/test_bootstrap %/test_crossfit %/test_cell %/test_codepoint
VALGRIND_TESTS := $(filter-out $(VALGRIND_SLOW),$(filter $(B)/tests/unit/% %/test_codec_framing,$(TESTS)))

valgrind: $(B)/codec-host $(CODECS) $(VALGRIND_TESTS) ## the unit tests, and hostile streams, under valgrind
	@RUNNER="$(VALGRIND)" scripts/run-tests $(B) $(VALGRIND_TESTS)

FUZZ_SECONDS ?= 60
FUZZERS := $(patsubst tests/fuzz/%.c,build/fuzz/%,$(sort $(wildcard tests/fuzz/fuzz_*.c)))

build/fuzz/%: tests/fuzz/%.c $(SOURCES) $(SUPPORT)
	@mkdir -p $(@D)
	clang -std=c11 -D_POSIX_C_SOURCE=200809L -DRATEFLOOR_VERSION='"$(VERSION)"' -g -O1 \
		-ffp-contract=off -pthread -fsanitize=fuzzer,address,undefined -Isrc -Itests $(PKG_CFLAGS) \
		$< $(filter-out src/cli/% src/host/%,$(SOURCES)) $(LIBS) -o $@

fuzz: $(FUZZERS) ## libFuzzer on every entry, FUZZ_SECONDS each
	@set -e; for fuzzer in $(FUZZERS); do \
		mkdir -p $$fuzzer.corpus; \
		$$fuzzer -max_total_time=$(FUZZ_SECONDS) $$fuzzer.corpus \
			tests/fuzz/seeds_$${fuzzer#build/fuzz/fuzz_}; done

coverage: ## line coverage of the tests, by gcov
	@$(MAKE) --no-print-directory MODE=coverage test faults
	@cd build/coverage && gcov -n $(OBJECTS:build/coverage/%=%) 2>/dev/null | \
		awk '/^File .src/ {file=$$2} /^Lines/ && file {split($$2,a,":"); print a[2], file; file=""}' | sort -n

CPPCHECK := cppcheck --quiet --error-exitcode=1 --inline-suppr --std=c11 -j2 \
	--enable=warning,performance,portability --suppress=missingIncludeSystem -Isrc
SHELL_SCRIPTS := scripts/demo scripts/test scripts/prove-bare scripts/packages.sh scripts/run-tests \
	scripts/fetch-corpora .ci/run scripts/prove-nights scripts/prove-slurm \
	scripts/nightly/night scripts/nightly/slurm-array $(wildcard tests/golden/run scripts/facts scripts/same-facts)

lint: ## layout, static analysis, headers alone, shell scripts
	@clang-format --dry-run -Werror $(wildcard src/*/*.[ch] tests/*/*.[ch] tests/*/*/*.[ch])
	@$(CPPCHECK) src
	@shellcheck -x $(SHELL_SCRIPTS)
	@set -e; for header in $(wildcard src/*/*.h); do \
		$(CC) $(ALL_CFLAGS) -Isrc -fsyntax-only -x c $$header; done
	@scripts/check-prose

rooms: all ## check the law of src/ROOMS
	@scripts/check-rooms

format: ## lay out the sources with clang-format
	clang-format -i $(wildcard src/*/*.[ch] tests/*/*.[ch] tests/*/*/*.[ch])

check: test ## all that must hold: what CI runs
	@$(MAKE) --no-print-directory rest

.PHONY: rest
rest: ## check without test, which CI has already run by then
	@$(MAKE) --no-print-directory faults golden rooms lint
	@$(MAKE) --no-print-directory asan
	@$(MAKE) --no-print-directory valgrind
	@$(MAKE) --no-print-directory same-facts

.PHONY: same-facts
same-facts: all ## the same ledger facts from several builds and job counts
	@scripts/same-facts

bench: $(BENCHES) $(B)/ratefloor ## print the ratios of the speed targets
	@set -e; for bench in $(BENCHES); do $$bench; done

corpora: all ## make and fetch the corpora of the nightly set
	$(B)/ratefloor corpora fetch corpora/nightly.set

results: corpora ## survey the nightly set and renew results/
	$(B)/ratefloor survey corpora/nightly.set --ledger build/nightly.ledger
	$(B)/ratefloor report build/nightly.ledger --as markdown --out results/nightly.md

MAN_PAGES = $(shell $(B)/ratefloor --commands)

install: all ## install program, man pages and the fetch script (PREFIX, DESTDIR)
	install -d $(DESTDIR)$(PREFIX)/bin $(DESTDIR)$(PREFIX)/share/man/man1 \
		$(DESTDIR)$(PREFIX)/libexec/ratefloor
	install -m 755 $(B)/ratefloor $(DESTDIR)$(PREFIX)/bin/ratefloor
	install -m 755 scripts/fetch-corpora $(DESTDIR)$(PREFIX)/libexec/ratefloor/fetch-corpora
	install -m 755 $(B)/codec-host $(DESTDIR)$(PREFIX)/libexec/ratefloor/codec-host
	install -d $(DESTDIR)$(PREFIX)/include/ratefloor
	install -m 644 src/host/house_codec.h $(DESTDIR)$(PREFIX)/include/ratefloor/house_codec.h
	$(B)/ratefloor --help=man > $(DESTDIR)$(PREFIX)/share/man/man1/ratefloor.1
	set -e; for command in $(MAN_PAGES); do \
		$(B)/ratefloor $$command --help=man \
			> $(DESTDIR)$(PREFIX)/share/man/man1/ratefloor-$$command.1; done

uninstall: ## remove what install put there
	rm -f $(DESTDIR)$(PREFIX)/bin/ratefloor $(DESTDIR)$(PREFIX)/share/man/man1/ratefloor.1 \
		$(DESTDIR)$(PREFIX)/share/man/man1/ratefloor-*.1
	rm -rf $(DESTDIR)$(PREFIX)/libexec/ratefloor $(DESTDIR)$(PREFIX)/include/ratefloor

dist: ## a source archive: build/ratefloor-VERSION.tar.xz
	@mkdir -p build
	git archive --prefix=ratefloor-$(VERSION)/ HEAD | xz > build/ratefloor-$(VERSION).tar.xz

clean: ## remove build/
	rm -rf build

help: ## this list
	@sed -n 's/^\([a-z-]*\):.*## \(.*\)/  \1 - \2/p' $(MAKEFILE_LIST)
