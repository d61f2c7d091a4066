package station

// SaveDirVariable names the folder that scripts save into, without a dialog.
const SaveDirVariable = "BARLITRE_SAVE_DIR"
