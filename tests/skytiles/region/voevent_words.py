"""VOEvent messages for the tests, put together from their parts."""

PLACE = (
    '<Position2D unit="deg"><Name1>RA</Name1><Name2>Dec</Name2>'
    "<Value2><C1>{ra}</C1><C2>{dec}</C2></Value2>{error}</Position2D>"
)


def where_when(
    *,
    system="UTC-ICRS-TOPO",
    time="2027-03-14T05:06:07",
    ra=266.4,
    dec=-29.0,
    error="<Error2Radius>5.0</Error2Radius>",
    place=PLACE,
):
    """A WhereWhen of the usual path."""
    return (
        "<WhereWhen><ObsDataLocation>"
        '<ObservatoryLocation><AstroCoordSystem id="UTC-GEOD-TOPO"/></ObservatoryLocation>'
        f'<ObservationLocation><AstroCoordSystem id="{system}"/>'
        f'<AstroCoords coord_system_id="{system}">'
        f'<Time unit="s"><TimeInstant><ISOTime>{time}</ISOTime></TimeInstant></Time>'
        f"{place.format(ra=ra, dec=dec, error=error)}"
        "</AstroCoords></ObservationLocation></ObsDataLocation></WhereWhen>"
    )


def packet(*parts, version="2.0", role=None, ivorn="ivo://example.invented/a#1", namespace=None):
    """A whole message."""
    space = namespace or f"http://www.ivoa.net/xml/VOEvent/v{version}"
    stated = "" if role is None else f' role="{role}"'
    return (
        f'<?xml version="1.0"?><voe:VOEvent xmlns:voe="{space}" ivorn="{ivorn}" '
        f'version="{version}"{stated}>{"".join(parts)}</voe:VOEvent>'
    ).encode()
