"""What the satellites deliver: signals, beams, spreading and gases."""
