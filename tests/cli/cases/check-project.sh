cp $CASES/check-project.json p.json; cp $CASES/check-project.csv walls.csv; $SEPTUM check p.json
