$SEPTUM rate 'typex-16 | steel-41-18@610, glass-89 | typex-16'
