$SEPTUM rate '2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16' --save-model x.lp
