type RigFault = 'no-such-rig' | 'no-such-room' | 'name-taken' | 'visits-booked';

/** The field a refusal is about, and what it says there. */
export function explainRigFault(reason: RigFault): ['name' | 'roomId', string] {
	const words: Record<RigFault, ['name' | 'roomId', string]> = {
		'no-such-rig': ['name', 'This rig is not in the list any more.'],
		'no-such-room': ['roomId', 'This room is not in the list any more. Choose another.'],
		'name-taken': ['name', 'Another rig has this name. Give each its own.'],
		'visits-booked': [
			'roomId',
			'Visits are booked on this rig, and their invitations name the room. Have them moved or cancelled first.'
		]
	};
	return words[reason];
}
