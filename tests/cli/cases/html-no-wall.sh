# An answer without a wall is a page too.
"$SEPTUM" pick "$EXAMPLES/impossible.json" --html page.html >text
status=$?
grep -c 'No wall fits this brief' page.html
exit $status
