$SEPTUM rate 'typex-61 | steel-92-18@610 | typex-16'
