"""Each load case has a folder of its own, whatever its name."""

from hypothesis import given
from hypothesis import strategies as st

from convergence.case_folders import case_folders


def test_plain_names_stay_and_others_are_made_plain() -> None:
    names = ["lift", "Side_pull-2", "swell / port", "swell, port", "LIFT", "../up", "figures", "..."]
    assert list(case_folders(names).values()) == [
        *("lift", "Side_pull-2", "swell-port", "swell-port-2", "LIFT-2", "up", "figures-2", "case"),
    ]


@given(st.lists(st.text(max_size=80), unique=True, max_size=6))
def test_no_two_are_alike_and_none_leads_elsewhere(names: list[str]) -> None:
    found = list(case_folders(names).values())
    assert len({folder.casefold() for folder in found}) == len(names)
    assert not any(set(folder) & set("/\\:. \0") or not folder or len(folder) > 70 for folder in found)
