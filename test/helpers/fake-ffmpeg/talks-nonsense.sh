#!/bin/sh
echo "this is some other program"
exit 0
