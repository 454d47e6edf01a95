/**
 * Who may do what: the only table of roles. Guards, the socket gateway and the pages all read it; nothing else
 * decides by role.
 */
export const ROLES = ["owner", "engineer", "reviewer", "manager", "guest"] as const;
export type Role = (typeof ROLES)[number];

/** Roles that a member of a workspace can hold; a guest holds a link, not a membership. */
export const MEMBER_ROLES = ["owner", "engineer", "reviewer", "manager"] as const;
export type MemberRole = (typeof MEMBER_ROLES)[number];

export const PERMISSIONS = [
  "scene.edit",
  "run.control",
  "watch",
  "watch.shared",
  "comment",
  "measurement.upload",
  "limit.set",
  "signoff.ask",
  "signoff.decide",
  "share",
  "workspace.administer",
] as const;
export type Permission = (typeof PERMISSIONS)[number];

const TABLE: Record<Role, readonly Permission[]> = {
  owner: [
    "scene.edit",
    "run.control",
    "watch",
    "comment",
    "measurement.upload",
    "limit.set",
    "signoff.ask",
    "signoff.decide",
    "share",
    "workspace.administer",
  ],
  engineer: [
    "scene.edit",
    "run.control",
    "watch",
    "comment",
    "measurement.upload",
    "limit.set",
    "signoff.ask",
    "share",
  ],
  reviewer: ["watch", "comment", "measurement.upload"],
  manager: ["watch", "comment", "measurement.upload", "limit.set", "signoff.decide"],
  guest: ["watch.shared"],
};

export const permissionsOf = (role: Role): readonly Permission[] => TABLE[role];
export const may = (role: Role, permission: Permission): boolean => TABLE[role].includes(permission);

/** What a refused person is told; `rolesThat` names who could do it. */
export const PERMISSION_WORDS: Record<Permission, string> = {
  "scene.edit": "create or edit scenes and media",
  "run.control": "run scenes or edit them live",
  watch: "watch and compare runs",
  "watch.shared": "watch what a link shares",
  comment: "comment",
  "measurement.upload": "upload measurements",
  "limit.set": "set limits",
  "signoff.ask": "ask for sign-off",
  "signoff.decide": "sign off or return",
  share: "share links",
  "workspace.administer": "manage members, roles and deletion",
};

export const rolesThat = (permission: Permission): Role[] => ROLES.filter((role) => may(role, permission));
