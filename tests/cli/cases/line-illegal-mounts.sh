$SEPTUM rate 'typex-16 | rc@610 | steel-92-18@610, glass-89 | rc@610 | typex-16'
