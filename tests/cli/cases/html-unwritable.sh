"$SEPTUM" rate 'typex-16 | steel-92-18@610 | typex-16' --html no-such-folder/page.html --csv takeoff.csv
status=$?
ls
exit $status
