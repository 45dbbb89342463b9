"""Asks a cone search with pyvo, the usual client of astronomers in Python, and prints what it understood as JSON.
Arguments: base URL, right ascension, declination, radius (degrees), verbosity, and MAXREC or '-'."""
import json
import sys
import warnings

import pyvo
from astropy.coordinates import SkyCoord

base, ra, dec, radius, verbosity, maxrec = sys.argv[1:7]
warnings.simplefilter("ignore")
service = pyvo.dal.SCSService(base)
try:
    pos = SkyCoord(float(ra), float(dec), unit="deg")
    more = {} if maxrec == "-" else {"maxrec": maxrec}
    query = service.create_query(pos=pos, radius=float(radius), verbosity=int(verbosity), **more)
    results = query.execute()
    print(json.dumps({
        "ids": [record.id for record in results],
        "positions": [[record.pos.ra.deg, record.pos.dec.deg] for record in results],
        "columns": list(results.fieldnames),
        "table": len(results.to_table()),
    }))
except pyvo.dal.DALQueryError as error:
    print(json.dumps({"error": str(error)}))
except pyvo.dal.DALServiceError as error:
    print(json.dumps({"serviceError": str(error)}))
