"""What was made before and need not be made again: values by what they were made from, in files beside the records."""

from builder.kept.folder import Kept
from builder.kept.shelf import Shelf, digest
from builder.kept.site_folder import SiteFolder

__all__ = ["Kept", "Shelf", "SiteFolder", "digest"]
