"""Puts a package in place in one step, and tells whether the one there is current."""

from calcgen.publishing.errors import (
    NotAPackageError,
    PackageBusyError,
    PublishError,
    UnlistedFilesError,
    WriteError,
)
from calcgen.publishing.manifest import (
    MANIFEST,
    Manifest,
    altered_files,
    build_key,
    digest_of,
    is_current,
    read_manifest,
    unlisted_files,
)
from calcgen.publishing.publish import publish, recover

__all__ = [
    "MANIFEST",
    "Manifest",
    "NotAPackageError",
    "PackageBusyError",
    "PublishError",
    "UnlistedFilesError",
    "WriteError",
    "altered_files",
    "build_key",
    "digest_of",
    "is_current",
    "publish",
    "read_manifest",
    "recover",
    "unlisted_files",
]
