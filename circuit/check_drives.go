package circuit

// drives reports whether a block is a prime mover.
func drives(b *Block) bool { return b.Kind == kindElectricMotor || b.Kind == kindEngine }

// limited reports whether a prime mover slows down when it is asked for too much.
func limited(b *Block) bool {
	_, ok := b.Values["torque_limit"]
	return b.Kind == kindEngine || (ok && b.Kind == kindElectricMotor)
}

// slows refuses what cannot turn with a drive whose torque limit lets its speed fall, and
// notes what an engine's supply is.
func (k *checker) slows(nets []*net, drive *Block) {
	if !limited(drive) {
		return
	}
	if drive.Kind == kindEngine {
		k.say(Note, drive, "", "what it draws is counted as energy of its fuel; the energy price and the CO2 factor must be those of the fuel")
	}
	for _, n := range nets {
		for _, p := range n.ports {
			switch b := k.c.Block(p.Block); {
			case b.Kind == kindFlywheel:
				k.say(Stops, b, "", "it turns with %s, whose torque is limited: how the wheel carries it over is not described. Drop the flywheel, or the torque limit", drive.ID)
			case b.Word("axis") != "":
				k.say(Stops, b, "axis", "it drives an axis on the shaft of %s, whose torque is limited; that is not described. Drop the torque limit", drive.ID)
			}
		}
	}
}

// reference asks for the speed that a power limit or a set flow belongs to.
func (k *checker) reference(b *Block) {
	_, given := b.Values["reference_speed"]
	_, limits := b.Values["power_limit"]
	if given || (!limits && !isPQ(b)) {
		return
	}
	for _, p := range trainPorts(k.c, k.of, b) {
		if drives(k.c.Block(p.Block)) {
			return
		}
	}
	k.say(Stops, b, "reference_speed", "no motor or engine turns its shaft; give the reference_speed that its power limit or set flow belongs to")
}
