# Every command that answers about walls writes a page; it is whole and the text goes to stdout all the same.
for command in "rate typex-16|steel-92-18@610|typex-16" "pick $EXAMPLES/party-wall.json" "ladder $EXAMPLES/party-wall.json --to 50" \
  "trim $EXAMPLES/party-wall.json --spec $EXAMPLES/specified-party-wall.json --count 1"; do
  "$SEPTUM" $command --html page.html >text || exit
  head -c 16 page.html | grep -q '<!DOCTYPE html>' || echo "$command: no page"
  tail -n 1 page.html | grep -q '</html>' || echo "$command: not whole"
  [ -s text ] || echo "$command: no text"
  mv page.html first.html
  "$SEPTUM" $command --html page.html >text || exit
  cmp first.html page.html || echo "$command: other bytes"
done
