# Targets of the contributor's loop; each sets up what it needs. `make` alone prints this help.
PYTHON ?= python3
VENV := .venv
BIN := $(VENV)/bin
READY := $(VENV)/ready

export OPENBLAS_NUM_THREADS ?= 1

.DEFAULT_GOAL := help
.PHONY: help demo test check figures calibrate bench clean

help: ## show this help
	@awk -F ':.*## ' '/^[a-z]+:.*## / {printf "  make %-10s %s\n", $$1, $$2}' $(MAKEFILE_LIST)

$(READY): pyproject.toml
	@$(PYTHON) -c 'import sys; sys.exit(sys.version_info < (3, 11))' \
	  || { echo "Python 3.11 or newer is needed; try: make PYTHON=python3.12"; exit 2; }
	$(PYTHON) -m venv $(VENV)
	$(BIN)/python -m pip install --quiet --upgrade pip
	$(BIN)/python -m pip install --quiet --editable ".[dev]"
	@touch $(READY)

demo: $(READY) ## solve and judge the davit's lug; says where the report is
	@$(BIN)/meshassay run studies/lug.toml; code=$$?; \
	  if [ $$code -gt 1 ]; then exit $$code; fi; \
	  echo "Open out/lug/report.html in a browser."

test: $(READY) ## all tests
	$(BIN)/python -m pytest

check: $(READY) ## format, lint, types and the fast tests
	$(BIN)/ruff format --check convergence tests
	$(BIN)/ruff check convergence tests
	$(BIN)/mypy
	$(BIN)/python -m pytest -m "not slow"

figures: $(READY) ## redraw the README's pictures from two studies: the lug and the sharp bracket
	@for study in lug bracket_sharp; do \
	  $(BIN)/meshassay run studies/$$study.toml || [ $$? -eq 1 ] || exit 3; \
	done
	cp out/lug/figures/stress.png figures/lug-stress.png
	cp out/lug/figures/hole-peak-value.svg figures/lug-hole-peak.svg
	cp out/bracket_sharp/figures/corner-stress-growth.svg figures/bracket-corner-growth.svg

calibrate: $(READY) ## bank (an hour), table (16 GB), figures/calibration.md; BANK=kept uses the packaged bank
	$(BIN)/python -m convergence.calibration $(if $(filter kept,$(BANK)),,--bank)

bench: $(READY) ## measure speed and memory against NGSolve: figures/performance.md (alone on the machine)
	$(BIN)/python -m pip install --quiet --editable ".[bench,fast]"
	$(BIN)/python -m convergence.bench

clean: ## remove what the targets made, the environment too
	rm -rf $(VENV) out build *.egg-info .pytest_cache .mypy_cache .ruff_cache .hypothesis
	find . -name __pycache__ -type d -prune -exec rm -rf {} +
