"""Prints as JSON what astropy finds in a VOTable: its verdict, its fields with units and UCDs, and every value."""

import io
import json
import sys
import warnings

import numpy
from astropy import units
from astropy.io import votable


def plain(value):
    """A value as JSON: null for masked ones, words for what JSON has no number for."""
    if numpy.ma.is_masked(value):
        return None
    if isinstance(value, (bool, numpy.bool_)):
        return bool(value)
    if isinstance(value, numpy.integer):
        return int(value)
    if isinstance(value, numpy.floating):
        return float(value) if numpy.isfinite(value) else str(float(value))
    return str(value)


def unit_fault(unit):
    """What the strict VOUnit parser has against a unit; warnings about it count."""
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error")
            units.Unit(str(unit), format="vounit", parse_strict="raise")
    except Exception as fault:
        return str(fault)
    return None


def described(field):
    # The text as written in the file: astropy respells units that it has parsed.
    unit = None if field.unit is None else field.unit.to_string("vounit")
    return {
        "name": field.name,
        "datatype": field.datatype,
        "arraysize": field.arraysize,
        "unit": unit,
        "unitFault": None if unit is None else unit_fault(unit),
        "ucd": field.ucd,
        "xtype": field.xtype,
        "ref": field.ref,
        "description": field.description,
    }


path = sys.argv[1]
report = io.StringIO()
# With xmllint astropy 5.2 takes the schema 1.1 for a document 1.4.
valid = votable.validate(path, output=report, xmllint=False)
answer = {"valid": valid, "report": report.getvalue()}
try:
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        document = votable.parse(path)
        table = document.get_first_table()
    answer.update(
        version=document.version,
        coordinateSystems=[[system.ID, system.system] for system in document.coordinate_systems],
        infos=[[info.name, info.value] for info in document.resources[0].infos],
        params=[[param.name, plain(param.value)] for param in document.resources[0].params],
        description=table.description,
        fields=[described(field) for field in table.fields],
        rows=[[plain(row[name]) for name in table.array.dtype.names] for row in table.array],
    )
except Exception as fault:
    answer["fault"] = str(fault)
print(json.dumps(answer))
