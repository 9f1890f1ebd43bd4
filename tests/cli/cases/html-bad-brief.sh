# Bad input leaves no file behind.
"$SEPTUM" pick "$EXAMPLES/../../tests/bad/brief-limits.json" --html page.html
status=$?
ls
exit $status
