#!/bin/sh
# Says nothing and never ends, but stops when asked to.
exec tail -f /dev/null
