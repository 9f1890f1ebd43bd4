$SEPTUM rate 'typex-16 | steel-92-18@500 | typex-16'
