-- Whom a comment is for: everybody who reads the protocol, or only who may know how blocks are chosen.
ALTER TABLE protocol_comment ADD COLUMN scope text NOT NULL DEFAULT 'rule' CHECK (scope IN ('rule', 'all'));
