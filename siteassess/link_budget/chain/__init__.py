"""The parts behind the antenna: what they lose, add and feed."""
