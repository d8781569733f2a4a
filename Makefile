# meltwright: `make demo` and `make check` do everything on a fresh machine; `make help` lists the rest.
# Settings (override on the command line):
CC       ?= cc
CFLAGS   ?= -O2 -g
PREFIX   ?= /usr/local
DESTDIR  ?=
SAN      ?=
COV      ?=
V        ?=

# ---- nothing to change below -----------------------------------------------------------------------------------
Q       := $(if $(V),,@)
comma   := ,
VERSION := $(shell sed -n 's/^\#define MW_VERSION "\(.*\)"/\1/p' include/meltwright/version.h)
SOMAJOR := $(firstword $(subst ., ,$(VERSION)))
FLAVOUR := $(if $(SAN),san-$(subst $(comma),-,$(SAN)),$(if $(COV),cov,rel))$(if $(findstring clang,$(CC)),-clang)
B       := build/$(FLAVOUR)

WARN := -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wstrict-prototypes -Wmissing-prototypes -Wwrite-strings -Wcast-qual -Werror
# clang warns where a loop marked for vectors stays plain, as under the sanitizers: no fault of the code.
WARN += $(if $(findstring clang,$(CC)),-Wno-pass-failed)
# Numbers: no fused multiply-add behind our back, no errno from libm; never -ffast-math. Same bytes everywhere.
NUM  := -fno-math-errno -ffp-contract=off
OMP   = $(shell echo 'int main(void){return 0;}' | $(CC) -fopenmp -x c - -o /dev/null 2>/dev/null && echo -fopenmp)
OMPF := $(if $(findstring thread,$(SAN)),,$(OMP))
INST := $(if $(SAN),-fsanitize=$(SAN) -fno-sanitize-recover=all -fno-omit-frame-pointer) $(if $(COV),--coverage -O0)
ALLC  = -std=c11 -Iinclude -Isrc $(WARN) $(if $(OMPF),,-Wno-unknown-pragmas) $(NUM) $(OMPF) -fPIC $(CFLAGS) $(INST)
PLPLOT_C = $(shell pkg-config --cflags plplot 2>/dev/null)
LIBS  = -lplplot -lcjson -lgsl -lgslcblas -lm -lpthread

LIB_SRC  := $(sort $(wildcard src/base/*.c src/material/*.c src/model/*.c src/criteria/*.c src/study/*.c src/present/*.c))
CLI_SRC  := $(sort $(wildcard src/cli/*.c))
TEST_SRC := $(sort $(wildcard tests/unit/test_*.c))
LIB_OBJ  := $(LIB_SRC:%.c=$(B)/%.o)
CLI_OBJ  := $(CLI_SRC:%.c=$(B)/%.o)
BENCH_OBJ := $(patsubst %.c,$(B)/%.o,$(sort $(wildcard tests/bench/*.c)))
VAL_OBJ  := $(patsubst %.c,$(B)/%.o,$(sort $(wildcard tests/validation/*.c)))
TESTS    := $(TEST_SRC:%.c=$(B)/%)
HEADERS  := $(sort $(wildcard include/meltwright/*.h))
PROGRAM  := $(B)/meltwright

.DELETE_ON_ERROR:
.SECONDARY:
.PHONY: all demo check test plots validate bench coverage install uninstall clean help setup setup-check FORCE

all: $(PROGRAM) $(B)/libmeltwright.so $(B)/meltwright.pc ## build library and program (set-up must have run once)

help: ## this list
	@sed -n 's/^\([a-z]*\):.*## \(.*\)/  make \1\t\2/p' Makefile | expand -t 20
	@echo; echo "  SAN=address,undefined   sanitizer flavour      COV=1   coverage flavour      CC=clang      V=1   show commands"
	@echo "  PREFIX=/usr/local DESTDIR=    where install puts things"

setup: ## find compiler, GSL, cJSON, PLplot, font, test library; install what is missing where allowed
	@sh .ci/setup

setup-check:
	@sh .ci/setup check

# Everything on a fresh machine. The second make starts after set-up, so that its probes see the new tools.
demo: setup ## set up, build, and run the main job on the demo case
	@$(MAKE) --no-print-directory all
	@sh tests/demo/run.sh $(PROGRAM)

check: setup-check ## set up, build, and run every test
	@$(MAKE) --no-print-directory test

test: all $(TESTS) # without set-up
	@CC='$(CC)' sh tests/run.sh $(B) $(PROGRAM)

plots: setup ## redraw the gallery in plots/
	@$(MAKE) --no-print-directory all
	@sh tests/demo/gallery.sh $(PROGRAM)

validate: setup ## accuracy against published measurements; draws plots/parity.png
	@$(MAKE) --no-print-directory $(B)/validate
	@$(B)/validate plots/parity.png

bench: setup ## speed against the simple way, the machine's limits, other sizes (a minute or two)
	@$(MAKE) --no-print-directory $(PROGRAM) $(B)/bench
	@$(B)/bench $(PROGRAM)

coverage: setup ## branch coverage of each storey (gcov)
	@$(MAKE) --no-print-directory COV=1 test
	@sh tests/coverage.sh build/cov

$(PROGRAM): $(CLI_OBJ) $(B)/libmeltwright.a
	$(if $(V),,@echo '  link $@')
	$(Q)$(CC) $(OMPF) $(INST) $(LDFLAGS) -o $@ $(CLI_OBJ) $(B)/libmeltwright.a $(LIBS)

$(B)/libmeltwright.a: $(LIB_OBJ)
	@rm -f $@
	$(if $(V),,@echo '  ar   $@')
	$(Q)ar rcs $@ $(LIB_OBJ)

$(B)/libmeltwright.so: $(LIB_OBJ)
	$(if $(V),,@echo '  link $@')
	$(Q)$(CC) $(OMPF) $(INST) $(LDFLAGS) -shared -Wl,-soname,libmeltwright.so.$(SOMAJOR) -o $@ $(LIB_OBJ) $(LIBS)

$(B)/tests/unit/%: $(B)/tests/unit/%.o $(B)/libmeltwright.a
	$(if $(V),,@echo '  link $@')
	$(Q)$(CC) $(OMPF) $(INST) $(LDFLAGS) -o $@ $< $(B)/libmeltwright.a -lcmocka $(LIBS)

$(B)/validate: $(VAL_OBJ) $(B)/libmeltwright.a
	$(if $(V),,@echo '  link $@')
	$(Q)$(CC) $(OMPF) $(INST) $(LDFLAGS) -o $@ $(VAL_OBJ) $(B)/libmeltwright.a $(LIBS)

$(B)/bench: $(BENCH_OBJ) $(B)/libmeltwright.a
	$(if $(V),,@echo '  link $@')
	$(Q)$(CC) $(OMPF) $(INST) $(LDFLAGS) -o $@ $(BENCH_OBJ) $(B)/libmeltwright.a $(LIBS)

$(B)/src/present/%.o: ALLC += $(PLPLOT_C)

# Tables of the Gaussian pool, made from the exact solver by a tool that is built first (without sanitizers: it is arithmetic only).
GEN_SRC := src/generate/pool_tables.c src/model/gaussian.c src/model/gaussian_integral.c src/model/cylinder.c
$(B)/gen/pool_tables: $(GEN_SRC) $(wildcard src/model/*.h include/meltwright/*.h) $(B)/flags
	@mkdir -p $(@D)
	$(if $(V),,@echo '  tool $@')
	$(Q)$(CC) -std=c11 -O2 -Iinclude -Isrc $(WARN) $(if $(OMPF),,-Wno-unknown-pragmas) $(NUM) $(OMPF) -o $@ $(GEN_SRC) -lgsl -lgslcblas -lm

$(B)/gen/gaussian_table_data.h: $(B)/gen/pool_tables
	$(if $(V),,@echo '  make $@')
	$(Q)$< > $@

# The loops over lanes are worth the compiler's full effort.
LANES := $(B)/src/model/gaussian_table.o $(B)/src/model/keyhole_line.o $(B)/src/model/rosenthal_line.o $(B)/src/study/survey_lanes.o $(B)/src/study/survey.o
$(LANES): ALLC += -I$(B)/gen $(if $(COV),,-O3)
$(B)/src/model/gaussian_table.o: $(B)/gen/gaussian_table_data.h

$(B)/%.o: %.c $(B)/flags
	@mkdir -p $(@D)
	$(if $(V),,@echo '  cc   $<')
	$(Q)$(CC) $(ALLC) -MMD -MP -c -o $@ $<

# Rewritten only when compiler or flags differ, so that switching them rebuilds and a second make does nothing.
$(B)/flags: FORCE
	@mkdir -p $(@D); echo '$(CC) $(ALLC)' | cmp -s - $@ || echo '$(CC) $(ALLC)' > $@

# Always written anew: it holds PREFIX, which may differ from call to call.
$(B)/meltwright.pc: FORCE
	@mkdir -p $(@D); printf '%s\n' 'prefix=$(PREFIX)' 'libdir=$${prefix}/lib' 'includedir=$${prefix}/include' '' 'Name: meltwright' \
	  'Description: melt pools, defect criteria and process maps for laser powder bed fusion' 'Version: $(VERSION)' \
	  'Libs: -L$${libdir} -lmeltwright' 'Libs.private: $(LIBS)' 'Cflags: -I$${includedir}' > $@

install: all ## install program, library, headers, cards
	install -d '$(DESTDIR)$(PREFIX)/bin' '$(DESTDIR)$(PREFIX)/lib/pkgconfig' '$(DESTDIR)$(PREFIX)/include/meltwright' '$(DESTDIR)$(PREFIX)/share/meltwright/alloys'
	install -m 755 $(PROGRAM) '$(DESTDIR)$(PREFIX)/bin/meltwright'
	install -m 644 $(B)/libmeltwright.a '$(DESTDIR)$(PREFIX)/lib/'
	install -m 755 $(B)/libmeltwright.so '$(DESTDIR)$(PREFIX)/lib/libmeltwright.so.$(VERSION)'
	ln -sf libmeltwright.so.$(VERSION) '$(DESTDIR)$(PREFIX)/lib/libmeltwright.so.$(SOMAJOR)'
	ln -sf libmeltwright.so.$(SOMAJOR) '$(DESTDIR)$(PREFIX)/lib/libmeltwright.so'
	install -m 644 $(B)/meltwright.pc '$(DESTDIR)$(PREFIX)/lib/pkgconfig/'
	install -m 644 $(HEADERS) '$(DESTDIR)$(PREFIX)/include/meltwright/'
	install -m 644 $(wildcard alloys/*.json) alloys/README.md '$(DESTDIR)$(PREFIX)/share/meltwright/alloys/'

uninstall: ## remove what install put there
	rm -f '$(DESTDIR)$(PREFIX)/bin/meltwright' '$(DESTDIR)$(PREFIX)/lib/libmeltwright.a' '$(DESTDIR)$(PREFIX)/lib/pkgconfig/meltwright.pc'
	rm -f '$(DESTDIR)$(PREFIX)/lib/libmeltwright.so' '$(DESTDIR)$(PREFIX)/lib/libmeltwright.so.$(SOMAJOR)' '$(DESTDIR)$(PREFIX)/lib/libmeltwright.so.$(VERSION)'
	rm -rf '$(DESTDIR)$(PREFIX)/include/meltwright' '$(DESTDIR)$(PREFIX)/share/meltwright'

clean: ## remove build/
	rm -rf build

-include $(wildcard $(B)/src/*/*.d $(B)/tests/*/*.d)
