package intake

// Help is the part of the short help that tells of recordings.
const Help = "What a data logger recorded becomes a duty too: From a recording…, the same in the File menu (Ctrl+I), or drop the file on the window, or several. The page reads it as it comes and shows what came of it. " +
	"File: how it is written, with its first and last lines as they stand and as they are read; every item of the guess can be corrected in place, and what the file leaves open is asked. " +
	"Columns: quantity and unit of each, and what the ends of a signal of 4 to 20 mA or 0 to 10 V stand for. " +
	"Loggers: further files in which the same recording goes on, and recordings of other loggers, whose clocks are found by a channel that both have, typed, or right; what was found at the joints and of the clocks stands beside them, and all of it is kept with the audit. " +
	"Findings: gaps, clocks that jump, doubled rows, channels that are stuck, clipped, noisy or off zero, and what is done about each, with a choice. Nothing is changed silently, and never in the file. " +
	"Tracks: by which law each track is made of which columns, such as the load of two chamber pressures; its formula stands below with the numbers in it, and the work that the tracks come to above the plot. Axes that the audit lacks are made with the duty. " +
	"Cycles: whether the rows are dense enough to tell the energy, when the machine works, holds or idles, and the cycles over one another; the whole recording, the typical cycle, the extreme one, a clicked one or a stretch makes the duty.\n\n" +
	"In the year: where duties have hours already, the new one takes those of a duty that it stands in place of, which stays with 0 h, or has its own beside the others. " +
	"Make the duty is one step of undo. The recording is kept beside the audit, its fingerprint and the recipe in it. Change the import… among the notes opens the page again; if the file has become another since, the notes say so and the button reads it anew."
