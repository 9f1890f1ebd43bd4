echo '{"septum":"brief/1","code":"ibc","floor_area_value_per_m2":3000,"only":["typex-16","wood-89","wood-89-double","glass-89"]}' >floor.json
$SEPTUM ladder floor.json
