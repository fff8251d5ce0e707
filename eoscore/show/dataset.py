"""Grids as labelled arrays: an xarray Dataset, and netCDF through h5netcdf (extra `grid`)."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from pathlib import Path

    import xarray
    from numpy.typing import NDArray

    from eoscore.answer.record import Finding, FoundAnswer

__all__ = ["MissingExtraError", "dataset", "write_netcdf"]

# The last axis of quantities that are lists.
_ENTRIES = {"freq": "direction", "r_min": "coordinate", "R_TF": "direction"}


class MissingExtraError(EoscoreError, ImportError):
    """A feature wants packages that are not installed: which, and the extra that brings them."""

    def __init__(self, wanted: str, extra: str) -> None:
        self.wanted, self.extra = wanted, extra
        super().__init__(f"{wanted} is not installed; pip install 'eoscore[{extra}]' brings it")


def dataset(answer: FoundAnswer) -> xarray.Dataset:
    """One question as a Dataset: dimensions named as in `over`, SI units in the attribute `units`.

    Its attributes hold the file's name and text, the question and the version. Where a quantity has points without
    a value, `NAME_why` is 0 at points with one, else the number of the attribute `why_1`, `why_2`... with the words.
    `NAME_error` is the absolute numerical error, `NAME_sigma` the standard deviation carried from the input, `NAME_low`
    and `NAME_high` the ends of a sampled interval, with its attributes `coverage` and `samples`.

    Raises
    ------
    MissingExtraError
        Where xarray is not installed.
    """
    try:
        import xarray
    except ImportError:
        raise MissingExtraError("xarray", "grid") from None
    from eoscore import __version__

    variables: dict[str, Any] = {}
    for name, finding in answer.found.items():
        variables |= _variables(name, finding, tuple(answer.over))
    coordinates = {
        name: ((name,), values, {"units": answer.over_units[name]}) for name, values in answer.over.items()
    }
    about = {
        "file": answer.file,
        "line": answer.line,
        "question": answer.question,
        "version": f"eoscore {__version__}",
        "text": answer.text,
    }
    given = {f"given_{name}": f"{value.value!r} {value.unit}" for name, value in answer.given.items()}
    settings = {f"set_{place}": setting for place, setting in enumerate(answer.settings, 1)}
    return xarray.Dataset(variables, coordinates, about | given | settings)


def write_netcdf(answer: FoundAnswer, path: Path) -> None:
    """Write one question's grid as netCDF 4.

    Raises
    ------
    MissingExtraError
        Where xarray or h5netcdf is not installed.
    """
    data = dataset(answer)
    try:
        data.to_netcdf(path, engine="h5netcdf")
    except (ImportError, ValueError) as fault:
        if "h5netcdf" not in str(fault) and "h5py" not in str(fault):
            raise
        raise MissingExtraError("h5netcdf", "grid") from None


def _variables(name: str, finding: Finding, axes: tuple[str, ...]) -> dict[str, Any]:
    dims = axes + ((_ENTRIES.get(name, f"{name}_entry"),) if finding.value.ndim > len(axes) else ())
    attributes = {"units": finding.unit, "route": finding.route}
    words = {"why": finding.why} if finding.why else {}
    variables: dict[str, Any] = {
        name: (dims, finding.value, attributes | words),
        f"{name}_error": (dims, finding.error, {"units": finding.unit}),
    }
    if finding.sigma is not None:
        variables[f"{name}_sigma"] = (dims, finding.sigma, {"units": finding.unit})
    if (interval := finding.interval) is not None:
        sample = {"coverage": interval.coverage, "samples": interval.samples}
        for end, values in (("low", interval.low), ("high", interval.high)):
            variables[f"{name}_{end}"] = (dims, values, {"units": finding.unit} | sample)
        variables[f"{name}_answered"] = (dims, interval.answered, {"units": "1"} | sample)
    if finding.reasons and axes:
        variables[f"{name}_why"] = (axes, *_reasons(finding, finding.value.shape[: len(axes)]))
    return variables


def _reasons(finding: Finding, shape: tuple[int, ...]) -> tuple[NDArray[np.int16], dict[str, str]]:
    """The number of the reason at every point, and the words of each number."""
    which = np.zeros(shape, dtype=np.int16)
    words = {}
    for number, reason in enumerate(finding.reasons, 1):
        which[tuple(reason.points.array.T)] = number
        words[f"why_{number}"] = reason.text
    return which, words
