"""Every sample set opens as it is, needs no further choice, and comes to the route and verdict it is there to show."""

import json

import pytest

from meanlab.page import asked, cache, file_choice
from meanlab.page.fields import FIELDS
from meanlab.pictures import readings_picture, sampling_distribution
from meanlab.samples import FOLDER, sample_sets

SETS = {one.path.name: one for one in sample_sets()}
ROUTES = {"z", "t", "guarded_t", "signed_rank", "sign", None}
VERDICTS = {"differs", "differs, within the limit", "agrees", "cannot tell", "not testable"}


def opened(one):
    """Return what the page reads and finds when a set is opened."""
    fields = dict(FIELDS) | dict(one.fields)
    by_preparation = fields["preparation"] is not None
    name = None if one.pasted else one.path.name
    source = cache.Source(one.content, name, file_choice.selection_of(fields), by_preparation)
    found = cache.read(source)
    return found, cache.outcome(source, (), asked.question_from(fields, found.decimal_sign)).analysis


@pytest.mark.parametrize("name", SETS)
def test_a_set_comes_to_its_route_and_verdict(name):
    """Nothing in it is refused or doubted, and rule and verdict are those of the index."""
    one = SETS[name]
    found, analysis = opened(one)
    said = found.to_dict()
    assert [said[key] for key in ("refused", "needs_choice", "rejected", "warnings")] == [False, False, [], []]
    assert (analysis.route.procedure, analysis.verdict) == (one.route, one.verdict)
    assert set(one.fields) <= set(FIELDS)
    assert not analysis.question.set_after


@pytest.mark.parametrize("name", SETS)
def test_the_readme_tells_each_set(name):
    """Each file has a row in the folder's README, and a scenario of one sentence."""
    row = next(line for line in (FOLDER / "README.md").read_text("utf-8").splitlines() if f"`{name}`" in line)
    assert row.split("|")[4].strip().startswith(SETS[name].verdict.split(",")[0])
    assert SETS[name].scenario.rstrip().endswith((".", "?"))
    assert len(SETS[name].scenario) <= 120


def test_the_sets_cover_every_route_and_verdict():
    """At least eight, with all five procedures and all five verdicts among them; no file without a set."""
    assert len(SETS) >= 8
    assert {one.route for one in SETS.values()} == ROUTES
    assert {one.verdict for one in SETS.values()} == VERDICTS
    files = {path.name for path in FOLDER.iterdir()} - {"README.md", "sets.json", "page.png"}
    assert files == set(SETS)


def test_what_the_readme_says_of_single_sets_is_so():
    """The certificate decides; the far reading decides; injections taken as independent would mislead."""
    _, lead = opened(SETS["reference_material.txt"])
    assert lead.uncertainty.scatter_only.reject
    assert not lead.test.reject
    _, buffer = opened(SETS["buffer_ph.txt"])
    assert [(one.label, one.verdict) for one in buffer.withouts] == [("without", "differs")]
    _, caffeine = opened(SETS["caffeine_preparations.csv"])
    assert (caffeine.summary.n, caffeine.summary.n_readings) == (4, 12)
    _, cadmium = opened(SETS["feed_cadmium.txt"])
    assert (cadmium.summary.n, cadmium.summary.below) == (12, 5)


@pytest.mark.parametrize("name", SETS)
def test_each_set_can_be_drawn(name):
    """Both pictures are there wherever something was tested."""
    _, analysis = opened(SETS[name])
    assert readings_picture(analysis).marks
    if analysis.test is not None:
        assert sampling_distribution(analysis.test, analysis.readings.decimal_sign).alt


def test_a_missing_folder_is_no_failure(tmp_path):
    """Without the folder there are no sets; a folder of one's own is read in the order of its index."""
    assert sample_sets(tmp_path) == ()
    (tmp_path / "one.txt").write_text("5.01\n5.03\n", encoding="utf-8")
    index = [{"title": "One", "scenario": "Two readings.", "readings": "one.txt", "pasted": True, "fields": {},
              "route": "t", "verdict": "cannot tell"}]  # fmt: skip
    (tmp_path / "sets.json").write_text(json.dumps(index), encoding="utf-8")
    assert [one.content for one in sample_sets(tmp_path)] == ["5.01\n5.03\n"]
