# make demo | make test | make help. Needs python3, python3-venv and make; everything else is set up here.

SHELL := /bin/bash
.SHELLFLAGS := -eu -o pipefail -c
.DEFAULT_GOAL := help
MAKEFLAGS += --no-builtin-rules
.NOTPARALLEL:
.DELETE_ON_ERROR:

PYTHON ?= python3
WORKERS ?= 2
BIN := .venv/bin
SCRIPTS := sample_bids/make_sample_bids.py benchmarks/help_time.py benchmarks/rates_speed.py \
	benchmarks/cooling_speed.py benchmarks/break_even_speed.py docs/make_findings.py docs/make_pictures.py \
	docs/make_load_profile_table.py docs/example_power_tender/make_profile.py tests/wheel_check.py

export PIP_DISABLE_PIP_VERSION_CHECK := 1
export PIP_ROOT_USER_ACTION := ignore

.PHONY: help demo test check lint types doctest wheel unit system format pictures findings benchmark clean

help: ## this list
	@awk -F ':[^\#]*\#\# ' '/^[a-z]+:.*\#\# / { printf "  make %-11s%s\n", $$1, $$2 }' $(MAKEFILE_LIST)

demo: .venv/installed ## evaluate sample_bids and say where the papers are
	$(BIN)/lossworth evaluate sample_bids --overwrite
	@echo
	@echo "The papers of the demo:"
	@ls -1 $(CURDIR)/sample_bids/papers/*

test: system lint types doctest wheel unit ## set everything up and run every check; the tests come last

lint: .venv/installed-for-tests ## style and format, nothing is changed
	$(BIN)/ruff check .
	$(BIN)/ruff format --check .

types: .venv/installed-for-tests ## types
	$(BIN)/mypy
	$(BIN)/mypy $(SCRIPTS)

doctest: .venv/installed-for-tests ## the examples in the docstrings
	$(BIN)/python -m pytest --quiet --doctest-modules src

wheel: .venv/installed-for-tests ## build the wheel, install it elsewhere, run the main job there
	$(BIN)/python tests/wheel_check.py

unit: .venv/installed-for-tests ## pytest
	$(BIN)/python -m pytest -n $(WORKERS)

system: ## Chromium, LibreOffice Calc, poppler-utils and what they need, through apt
	@bash .ci/system_packages

format: .venv/installed-for-tests ## put the code into the one format
	$(BIN)/ruff check --fix .
	$(BIN)/ruff format .

pictures: .venv/installed-for-tests ## make the pictures of the README anew
	$(BIN)/python docs/make_pictures.py

findings: .venv/installed ## write docs/findings.md anew from the table of kinds
	$(BIN)/python docs/make_findings.py

benchmark: .venv/installed-for-tests ## how long the help, and the rates of many scenarios take
	$(BIN)/python benchmarks/help_time.py
	$(BIN)/python benchmarks/rates_speed.py
	$(BIN)/python benchmarks/cooling_speed.py
	$(BIN)/python benchmarks/break_even_speed.py

clean: ## remove what was made here, also the virtual environment
	rm -rf .venv build dist *.egg-info src/*.egg-info .pytest_cache .mypy_cache .ruff_cache .hypothesis sample_bids/papers docs/example_power_tender/papers
	find src tests templates sample_bids docs benchmarks -name __pycache__ -type d -prune -exec rm -rf {} +

.venv/bin/python:
	$(PYTHON) -m venv --clear .venv

.venv/installed: pyproject.toml | .venv/bin/python
	$(BIN)/python -m pip install --quiet --editable .
	@touch $@

# One install serves both; the demo then has nothing left to do.
.venv/installed-for-tests: pyproject.toml | .venv/bin/python
	$(BIN)/python -m pip install --quiet --editable '.[test]'
	@touch .venv/installed $@
