$SEPTUM rate 'typex-16 | steel-92-18@610 | typex-16' --length 24
