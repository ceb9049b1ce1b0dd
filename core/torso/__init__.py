"""Volume conductor: what currents in the heart do to the potential of the skin. SI units."""
