"""The public names, and the example of the package's own text."""

import textwrap

import pytest

import igu


def test_the_example_in_the_package_text_runs(capsys):
    code = textwrap.dedent(igu.__doc__.split("\n\n", 1)[1].rsplit("\n\n", 1)[0])
    exec(compile(code, "igu docstring", "exec"), {})
    assert float(capsys.readouterr().out) == pytest.approx(1.484, abs=5e-4)


def test_every_public_name_is_there_and_no_other():
    for name in igu.__all__:
        assert getattr(igu, name).__doc__
    with pytest.raises(AttributeError, match="no attribute"):
        _ = igu.nothing


def test_results_are_frozen():
    result = igu.rate(
        igu.Unit((igu.catalogue().pane([igu.catalogue().glass_ply("clear", 0.004)]),)),
        igu.Conditions("c", outdoor_air=263.15, indoor_air=293.15),
    )
    with pytest.raises(AttributeError):
        result.U = 1.0
