import type { z } from 'zod';
import type { commentRow } from '../../shared/schemas/unknowns.js';
import type { Comment } from '../models/comment.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import { presentPerson } from './person.js';

export function presentComment(actor: Actor, comment: Comment): z.input<typeof commentRow> {
  return {
    id: comment.id,
    author: presentPerson(comment.author),
    text: comment.text,
    createdAt: comment.createdAt.toISOString(),
    abilities: abilitiesOn(actor, 'comment', ['remove'], comment),
  };
}
