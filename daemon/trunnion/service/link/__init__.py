"""The link: hands orders to the driver and brings readings back, whatever the hardware does."""

from trunnion.service.link.direct import DirectLink
from trunnion.service.link.link import Link
from trunnion.service.link.status import LinkState, LinkStatus
from trunnion.service.link.threaded import ThreadedLink

__all__ = ["DirectLink", "Link", "LinkState", "LinkStatus", "ThreadedLink"]
