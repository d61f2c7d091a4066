package circuit

// drives reports whether a block is a prime mover.
func drives(b *Block) bool { return b.Kind == kindElectricMotor || b.Kind == kindEngine }

// limited reports whether a prime mover slows down when it is asked for too much.
func limited(b *Block) bool {
	_, ok := b.Values["torque_limit"]
	return b.Kind == kindEngine || (ok && b.Kind == kindElectricMotor)
}

// slows refuses what cannot turn with a drive whose speed its torque lets fall.
func (k *checker) slows(nets []*net, drive *Block) {
	why := "whose torque is limited"
	switch {
	case slips(drive):
		why = "whose speed falls with torque"
	case commandsTorque(drive):
		why = "whose torque is commanded"
	case !limited(drive):
		return
	}
	for _, n := range nets {
		for _, p := range n.ports {
			switch b := k.c.Block(p.Block); {
			case b.Kind == kindFlywheel:
				k.say(Stops, b, "", "it turns with %s, %s: how the wheel carries it over is not described. Drop the flywheel, or give the drive a speed", drive.ID, why)
			case b.Word("axis") != "":
				k.say(Stops, b, "axis", "it drives an axis on the shaft of %s, %s; that is not described. Give the drive a speed", drive.ID, why)
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
	k.say(Stops, b, "reference_speed", "no motor or engine turns its shaft; give the reference speed (reference_speed) that its power limit or set flow belongs to").because(MissingValue, "")
}

// terminals checks what a motor's terminals hang on.
func (k *checker) terminals(b *Block) {
	n := k.of[PortRef{b.ID, "E"}]
	converter := n != nil && len(n.ports) > 1
	_, idles := b.Values["idle_speed"]
	switch {
	case converter && slips(b):
		k.say(Stops, b, "slip", "a converter feeds it, which makes up for slip; drop one of the two").because(NeedsNoValue, "")
	case converter:
	case isServo(b):
		k.say(Stops, b, "type", "a permanent-magnet motor cannot start on the mains; join its terminals E to a converter").because(NoConverter, "E")
	case idles:
		k.say(Stops, b, "idle_speed", "only a converter can turn it slower; join its terminals E to one, or drop its soft idle speed (idle_speed)").because(NoConverter, "E")
	case commandsTorque(b):
		k.say(Stops, b, "commands", "only a converter can command its torque; join its terminals E to one").because(NoConverter, "E")
	case varies(b):
		k.say(Note, b, "", "its speed varies but no converter feeds it; the losses of the converter are not counted, and what comes back goes to the mains").because(NoConverter, "E")
	}
}
