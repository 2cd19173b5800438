"""A table in partitions of a Dask cluster gives the same rows, to the last bit, as one in memory; needs Dask."""

import numpy as np
import pandas as pd
import pytest

from meanlab import Question, analyse_many

dask_frames = pytest.importorskip("dask.dataframe", reason="Dask is not installed (tests/requirements-dask.txt)")
distributed = pytest.importorskip("distributed", reason="Dask is not installed (tests/requirements-dask.txt)")

QUESTION = Question("5.00", equivalence_limit="0.05")


@pytest.fixture(scope="module")
def cluster():
    """Two workers on this computer, each a process of its own."""
    with (
        distributed.LocalCluster(n_workers=2, threads_per_worker=1, dashboard_address=None) as workers,
        distributed.Client(workers) as client,
    ):
        yield client


def scattered(texts: bool) -> pd.DataFrame:
    """Return 300 samples whose readings lie all over the table, with decimal commas and limits where they are texts."""
    generator = np.random.default_rng(20261209)
    lots = generator.integers(0, 300, 3000)
    values = generator.normal(5.01, 0.05, 3000).round(3)
    table = pd.DataFrame({"lot": lots, "value": values})
    if texts:
        written = [f"{value:.3f}".replace(".", ",") for value in values]
        written[::40] = ["<4,95"] * len(written[::40])
        written[::71] = [""] * len(written[::71])
        table["value"] = written
    return table


@pytest.mark.filterwarnings("ignore")  # the library's own words on ports and shuffles
@pytest.mark.parametrize("texts", [False, True], ids=["numbers", "texts"])
def test_partitions_give_the_same_rows(texts, cluster):
    """Samples that lie in several partitions are brought together; order, figures and flags are those in memory."""
    table = scattered(texts)
    whole = analyse_many(table, "value", "lot", QUESTION)
    parts = analyse_many(dask_frames.from_pandas(table, npartitions=5), "value", "lot", QUESTION)
    pd.testing.assert_frame_equal(parts, whole, check_exact=True, check_dtype=False)
    assert parts["procedure"].fillna("").tolist() == whole["procedure"].fillna("").tolist()
