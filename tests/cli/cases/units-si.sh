$SEPTUM rate --units si 'typex-16 | steel-92-18@610, glass-89 | typex-16'
