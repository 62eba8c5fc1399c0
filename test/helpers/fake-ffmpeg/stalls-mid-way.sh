#!/bin/sh
# The real one, which falls silent after some frames.
"$REAL_FFMPEG" "$@" | head -c "$CUT_AFTER_BYTES"
exec tail -f /dev/null
