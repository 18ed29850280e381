/** Where lucia keeps its sessions. The table holds hashes: a copy of it lets nobody in. */
import type { Adapter, DatabaseSession } from 'lucia';
import { Op } from 'sequelize';
import { Session } from '../db/models/Session';
import { User } from '../db/models/User';
import { hashSecret } from './secrets';

function toDatabaseSession(row: Session, id: string): DatabaseSession {
  return { id, userId: row.userId, expiresAt: row.expiresAt, attributes: {} };
}

export const adapter: Adapter = {
  async getSessionAndUser(id) {
    const row = await Session.findByPk(hashSecret(id));
    const user = row && (await User.findByPk(row.userId, { attributes: ['id'] }));
    return user ? [toDatabaseSession(row, id), { id: user.id, attributes: {} }] : [null, null];
  },
  async getUserSessions(userId) {
    return (await Session.findAll({ where: { userId } })).map((row) => toDatabaseSession(row, row.id));
  },
  async setSession(session) {
    const { ip = '', userAgent = '', transaction } = session.attributes;
    await Session.create(
      {
        id: hashSecret(session.id),
        userId: session.userId,
        expiresAt: session.expiresAt,
        ip: ip.slice(0, 64),
        userAgent: userAgent.slice(0, 300)
      },
      { transaction }
    );
  },
  async updateSessionExpiration(id, expiresAt) {
    await Session.update({ expiresAt }, { where: { id: hashSecret(id) } });
  },
  async deleteSession(id) {
    await Session.destroy({ where: { id: hashSecret(id) } });
  },
  async deleteUserSessions(userId) {
    await Session.destroy({ where: { userId } });
  },
  async deleteExpiredSessions() {
    await Session.destroy({ where: { expiresAt: { [Op.lte]: new Date() } } });
  }
};
