"""JSON text: readable, sorted, nothing hidden, exact."""

from __future__ import annotations

import json
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.errors import RouteheatError
from routeheat.report.plain_json import digest, exact, is_exact, json_text


def test_keys_are_sorted_and_letters_readable() -> None:
    assert json_text({"b": "Δ", "a": 1}) == '{\n  "a": 1,\n  "b": "Δ"\n}\n'


def test_what_cannot_be_seen_is_written_out() -> None:
    assert json_text("a\u202eb\u200b\x07\ud800") == '"a\\u202eb\\u200b\\u0007\\ud800"\n'


@given(st.text(st.characters()))
def test_every_text_reads_back_the_same_and_is_utf8(text: str) -> None:
    written = json_text(text)
    written.encode("utf-8")
    assert json.loads(written) == text


def test_a_number_that_is_not_finite_is_refused() -> None:
    with pytest.raises(ValueError, match="not JSON compliant"):
        json_text(float("nan"))


@given(st.fractions())
def test_exact_numbers_come_back(number: Fraction) -> None:
    assert exact(str(number)) == number


@pytest.mark.parametrize("text", ["1/0", "1.5", "1e9", "", "--1", "1/2/3", 1, None, "9" * 5_000, "1/2\n"])
def test_other_texts_are_no_exact_numbers(text: object) -> None:
    assert not is_exact(text)
    with pytest.raises(RouteheatError, match="no exact number"):
        exact(text)


def test_the_digest_is_that_of_utf8() -> None:
    # SHA-256 of the empty message: FIPS 180-4 example, from memory
    assert digest("") == "sha256:e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"
