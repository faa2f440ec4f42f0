"""Fail if a test of this JUnit file was skipped because a tool is missing."""

import sys
from xml.etree import ElementTree

skipped = [
    f"{case.get('classname')}::{case.get('name')}: {skip.get('message')}"
    for case in ElementTree.parse(sys.argv[1]).iter("testcase")
    for skip in case.iter("skipped")
    if "is missing" in (skip.get("message") or "")
]
if skipped:
    sys.exit("\n".join(["skipped for want of a tool:", *skipped]))
