#!/bin/sh
# Ignores SIGTERM; only SIGKILL ends it. Says so once the trap is set.
trap '' TERM
echo ready
exec tail -f /dev/null
